#include <fmt/format.h>

#include <algorithm>
#include <bathwright/analysis/standardisation.hpp>
#include <bathwright/base/nearest.hpp>
#include <bathwright/data/tables.hpp>
#include <bathwright/matter/formula.hpp>
#include <bathwright/units/show.hpp>
#include <cassert>
#include <cmath>
#include <map>
#include <numeric>

#include "uncertainty_terms.hpp"

namespace bathwright::analysis {
namespace {

using units::show;

constexpr double mL = 1000;  // of a litre

class Standardisation {
 public:
  explicit Standardisation(const Standardised& titrant) : t_(titrant) {}

  Result<Strength> run() {
    find_standard();
    if (problems_.empty()) check_figures();
    if (!problems_.empty()) return problems_;
    return strength();
  }

 private:
  void refuse(std::string_view key, std::string what, std::string expected, std::string mend) {
    problems_.push_back({Fault::bad_input, t_.written.where(key, t_.where), t_.name + ": " + std::move(what),
                         std::move(expected), std::move(mend)});
  }

  void find_standard() {
    std::vector<std::string> fitting;
    for (const Standard& s : standards()) {
      if (s.titrant != t_.titrant) continue;
      fitting.push_back(s.standard);
      if (s.standard == t_.against) standard_ = &s;
    }
    if (standard_) return;
    if (!fitting.empty()) {
      refuse("against", fmt::format("{} is not standardised against \"{}\" here", t_.titrant, t_.against),
             fmt::format("{}", fmt::join(fitting, " or ")), "Name one of them.");
      return;
    }
    std::vector<std::string> titrants;
    for (const Standard& s : standards())
      if (std::ranges::count(titrants, s.titrant) == 0) titrants.push_back(s.titrant);
    const auto close = nearest(t_.titrant, titrants);
    refuse(
        "titrant", fmt::format("no standardisation of \"{}\" is known", t_.titrant),
        fmt::format("one of {}", fmt::join(titrants, ", ")),
        close ? fmt::format("Did you mean {}?", *close) : "Give its strength in mol/L with the titration.");
  }

  void check_figures() {
    const bool weighs = standard_->weighed.has_value();
    const std::size_t runs = t_.burette.size();
    if (runs == 0) refuse("burette", "has no burette reading", "one for each run", "Enter them.");
    const auto as_many = [&](std::string_view key, std::size_t count, bool used) {
      if (count != (used ? runs : 0))
        refuse(key, fmt::format("{} burette readings, and {} under {}", runs, count, key),
               used ? "one for each burette reading" : "none against " + t_.against, "Check the two lists.");
    };
    as_many("weighed", t_.weighed.size(), weighs);
    as_many("taken", t_.taken.size(), !weighs);
    if (!weighs && !(t_.known_strength.v > 0))
      refuse("known_strength", "the strength of " + t_.against + " is not given", "more than 0",
             "Enter it as it was found.");
    if ((t_.diluted_to.v > 0) != (t_.aliquot.v > 0))
      refuse("aliquot", "a flask and an aliquot go together", "both or none",
             "Enter the one that is missing.");
    for (const units::Litres reading : t_.burette) {
      if (!(reading > t_.blank))
        refuse("burette", fmt::format("reading {} is not above the blank", show(reading, "mL")),
               "more titrant used", "Check which figure is which.");
      else if (!u_burette_mL(reading.v * mL))
        refuse("burette", fmt::format("reading {} is more than a burette holds", show(reading, "mL")),
               fmt::format("at most {:g} mL", largest_burette_mL()), "Check the unit.");
    }
    const auto piped = [&](std::string_view key, units::Litres volume) {
      if (!u_pipette_mL(volume.v * mL))
        refuse(key, fmt::format("{} is more than a pipette holds", show(volume, "mL")),
               fmt::format("at most {:g} mL", largest_pipette_mL()), "Check the unit.");
    };
    for (const units::Litres volume : t_.taken) piped("taken", volume);
    if (t_.aliquot.v > 0) piped("aliquot", t_.aliquot);
    if (t_.diluted_to.v > 0 && (!u_flask_mL(t_.diluted_to.v * mL) || t_.diluted_to < t_.aliquot))
      refuse("diluted_to", fmt::format("{} is no flask for that", show(t_.diluted_to, "mL")),
             fmt::format("at most {:g} mL, and more than the aliquot", largest_flask_mL()),
             "Check the unit.");
  }

  [[nodiscard]] double standard_mol(std::size_t run) const {
    if (!standard_->weighed) return t_.taken[run].v * t_.known_strength.v;
    const double share = t_.aliquot.v > 0 ? t_.aliquot.v / t_.diluted_to.v : 1;
    return t_.weighed[run].v * 1000 * t_.assay * share / standard_->weighed->molar_mass().v;
  }

  /// What the runs share: glass, and the standard itself.
  [[nodiscard]] double shared_rel(double mean_used_mL) const {
    double u2 = std::pow(*u_burette_mL(mean_used_mL) / mean_used_mL, 2);
    u2 += std::pow(standard_->weighed ? standard_->u_standard_rel : t_.known_u_rel, 2);
    if (!standard_->weighed) u2 += std::pow(*u_pipette_mL(t_.taken[0].v * mL) / (t_.taken[0].v * mL), 2);
    if (t_.aliquot.v > 0)
      u2 += std::pow(*u_pipette_mL(t_.aliquot.v * mL) / (t_.aliquot.v * mL), 2) +
            std::pow(*u_flask_mL(t_.diluted_to.v * mL) / (t_.diluted_to.v * mL), 2);
    return std::sqrt(u2);
  }

  [[nodiscard]] Strength strength() const {
    const auto n = static_cast<double>(t_.burette.size());
    double sum = 0, used_mL = 0, sum_of_squares = 0, run_rel2 = 0;
    std::vector<double> strengths;
    for (std::size_t i = 0; i < t_.burette.size(); ++i) {
      const double used_L = t_.burette[i].v - t_.blank.v;
      strengths.push_back(standard_mol(i) * standard_->mol_per_mol / used_L);
      sum += strengths.back();
      used_mL += used_L * mL / n;
      run_rel2 += std::pow(uncertainty_term("end-point-ordinary") / (used_L * mL), 2) / n;
      if (standard_->weighed)
        run_rel2 += std::pow(uncertainty_term("balance") / (t_.weighed[i].v * 1000), 2) / n;
    }
    const double mean = sum / n;
    for (const double c : strengths) sum_of_squares += std::pow(c - mean, 2);
    const double scatter_rel = n > 1 ? std::sqrt(sum_of_squares / (n - 1)) / mean : 0;
    const double u_rel =
        std::hypot(shared_rel(used_mL), std::max(std::sqrt(run_rel2), scatter_rel) / std::sqrt(n));
    std::string how = n > 1 ? fmt::format("mean of {} against {}, scatter {:.2f} %", t_.burette.size(),
                                          t_.against, 100 * scatter_rel)
                            : "one run against " + t_.against;
    return {{mean}, u_rel, std::move(how)};
  }

  const Standardised& t_;
  const Standard* standard_ = nullptr;
  Problems problems_;
};

}  // namespace

const std::vector<Standard>& standards() {
  static const std::vector<Standard> all = [] {
    const auto table =
        data::built_in_table("analysis/standardisations.csv", {"mol_per_mol", "u_standard_rel"});
    std::vector<Standard> read;
    for (std::size_t i = 0; i < table.size(); ++i) {
      const auto row = table[i];
      Standard s;
      s.titrant = row["titrant"];
      s.standard = row["standard"];
      if (const std::string formula(row["formula"]); !formula.empty()) {
        const auto parsed = matter::Formula::parse(formula, row.where());
        assert(parsed);
        s.weighed = *parsed;
      }
      s.mol_per_mol = row.number("mol_per_mol");
      s.u_standard_rel = row.number("u_standard_rel");
      s.indicator = row["indicator"];
      s.reaction = row["reaction"];
      s.note = row["note"];
      s.source = row["source"];
      read.push_back(std::move(s));
    }
    return read;
  }();
  return all;
}

Result<Strength> strength_of(const Standardised& titrant) { return Standardisation(titrant).run(); }

std::optional<double> equivalents_of(std::string_view titrant) {
  static const auto known = [] {
    const auto table = data::built_in_table("analysis/titrants.csv", {"equivalents"});
    std::map<std::string, double, std::less<>> all;
    for (std::size_t i = 0; i < table.size(); ++i)
      all.emplace(table[i]["titrant"], table[i].number("equivalents"));
    return all;
  }();
  const auto found = known.find(titrant);
  if (found == known.end() || !std::isfinite(found->second)) return std::nullopt;
  return found->second;
}

}  // namespace bathwright::analysis
