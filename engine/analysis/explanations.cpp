#include "explanations.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <bathwright/analysis/method.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>

#include "chi_square.hpp"

namespace bathwright::analysis {
namespace {

using Eigen::Index;
using Eigen::VectorXd;

// Sizes of mistakes, one standard deviation: common practice.
constexpr double reading_error_rel = 0.3;  // of the level
constexpr double volume_error_rel = 0.1;
constexpr double addition_error_rel = 0.5;            // of the amount logged
constexpr double unlogged_addition_kg_per_L = 0.010;  // the usual largest single addition

std::string mass(double kg) { return fmt::format("{} kg", units::significant(kg, 3)); }

/// NiSO4 of NiSO4.6H2O; empty for what has other parts than water behind its dots.
std::string anhydrous(const std::string& formula) {
  const std::size_t dot = formula.find('.');
  if (dot == std::string::npos) return formula;
  std::string tail = formula.substr(dot + 1);
  tail.erase(0, tail.find_first_not_of("0123456789."));
  return tail == "H2O" ? formula.substr(0, dot) : "";
}

class Explaining {
 public:
  Explaining(Misfit& misfit, const Case& met)
      : misfit_(misfit),
        met_(met),
        readings_(static_cast<Index>(met.gathered.what.size())),
        amounts_(met.weighed.state.size() - 1) {}

  void run() {
    for (Index r = 0; r < readings_; ++r) {
      if (met_.gathered.what[at(r)] == "volume") continue;
      factor_of_two(r);
      wrong_reading(r);
      free_for_total(r);
    }
    swapped_burettes();
    if (met_.carried) {
      wrong_volume();
      for (const LoggedAddition& addition : met_.carried->additions) logged_addition(addition);
      for (const bath::ShelfItem& item : met_.tank.shelf) unlogged_addition(item);
    }
    sort();
  }

 private:
  static std::size_t at(Index i) { return static_cast<std::size_t>(i); }

  /// A mistake of known size: what is weighed without it.
  void propose(const Weighing& without, Explanation explanation) {
    keep(weigh(without), std::move(explanation));
  }

  void keep(const Weighed& fit, Explanation explanation) {
    explanation.chi_square_drop = misfit_.chi_square - fit.chi_square;
    explanation.log_evidence = (met_.weighed.surprise() - fit.surprise()) / 2;
    if (explanation.log_evidence <= 0) return;
    if (misfit_.explanations.empty() || explanation.log_evidence > best_) {
      best_ = explanation.log_evidence;
      best_fits_ = chi_square_tail(fit.chi_square, misfit_.degrees_of_freedom) >= false_alarms;
    }
    misfit_.explanations.push_back(std::move(explanation));
  }

  [[nodiscard]] const Titration* titration_of(const std::string& quantity) const {
    const Titration* only = nullptr;
    for (const Titration& titration : met_.readings.titrations) {
      if (titration.quantity != quantity) continue;
      if (only) return nullptr;
      only = &titration;
    }
    return only;
  }

  void factor_of_two(Index r) {
    const std::string& what = met_.gathered.what[at(r)];
    const bool titrated = titration_of(what) != nullptr;
    for (const double times : {2.0, 0.5}) {
      Weighing without = met_.gathered.weighing;
      without.readings[at(r)].times = times;
      const char* size = times > 1 ? "twice" : "half";
      std::string words =
          titrated
              ? fmt::format(
                    "{} was titrated on {} the sample that was written down ({}), or with a titrant {} as "
                    "strong",
                    what, size, times > 1 ? "10 mL for 5 mL" : "5 mL for 10 mL", times > 1 ? "half" : "twice")
              : fmt::format("{} was reported as {} what it is: a dilution forgotten or counted twice", what,
                            size);
      propose(without, {Mistake::sample_size, what, std::move(words), again(what), std::nullopt});
    }
  }

  static std::string again(const std::string& what) {
    return fmt::format(
        "Repeat {} first, with a fresh pipette and the titrant's strength read off the bottle.", what);
  }

  void wrong_reading(Index r) {
    const std::string& what = met_.gathered.what[at(r)];
    const double level =
        met_.weighed.derivatives.row(r).head(amounts_).dot(met_.weighed.state.head(amounts_));
    FreeShift free;
    free.of_readings = VectorXd::Zero(readings_);
    free.of_readings(r) =
        reading_error_rel * std::max(std::abs(met_.gathered.weighing.readings[at(r)].value), std::abs(level));
    const Weighed fit = weigh(met_.gathered.weighing, free);
    const double off = fit.shift * free.of_readings(r);
    const double truth = met_.gathered.weighing.readings[at(r)].value - off;
    keep(fit, {Mistake::reading, what,
               fmt::format("{} reads {} too {}: {} would fit", what,
                           units::show(units::GramsPerLitre{std::abs(off)}), off > 0 ? "high" : "low",
                           units::show(units::GramsPerLitre{std::max(truth, 0.0)})),
               fmt::format("Repeat {} first: reading, blank, end point, titrant.", what), std::nullopt});
  }

  /// A level of the total stated for the free, or the other way round: quantities of one formula or one
  /// component that differ by what complexes hold.
  void free_for_total(Index r) {
    const auto& type = met_.chemistry.type();
    const std::string& what = met_.gathered.what[at(r)];
    const bath::Quantity& read = *type.quantity(what);
    for (const bath::Quantity& other : type.quantities) {
      if (other.id == what || other.formula.text() != read.formula.text() || other.counts == read.counts)
        continue;
      Weighing without = met_.gathered.weighing;
      without.readings[at(r)].g_per_mol = met_.gathered.g_per_mol(other, met_.chemistry);
      without.readings[at(r)].g_fixed = met_.gathered.g_fixed(other, met_.chemistry);
      propose(
          without,
          {Mistake::other_share, what, fmt::format("the level given for {} is that of {}", what, other.id),
           fmt::format("Look up by which method {} was titrated; repeat it.", what), std::nullopt});
    }
  }

  void swapped_burettes() {
    struct Burette {
      Index reading;
      double mL, g_per_L_per_mL;
    };
    std::vector<Burette> burettes;
    for (Index r = 0; r < readings_; ++r) {
      const Titration* titration = titration_of(met_.gathered.what[at(r)]);
      const Method* by = titration ? method(titration->method) : nullptr;
      if (!by || by->kind != Kind::direct) continue;
      const double mL = 1000 * (titration->burette.v - titration->blank.v);
      burettes.push_back({r, mL, met_.gathered.weighing.readings[at(r)].value / mL});
    }
    for (const Burette& a : burettes) {
      for (const Burette& b : burettes) {
        if (b.reading <= a.reading) continue;
        Weighing without = met_.gathered.weighing;
        swap_subjects(without.readings[at(a.reading)], without.readings[at(b.reading)],
                      a.g_per_L_per_mL / b.g_per_L_per_mL);
        const std::string &one = met_.gathered.what[at(a.reading)], &two = met_.gathered.what[at(b.reading)];
        propose(without, {Mistake::swapped, fmt::format("{} and {}", one, two),
                          fmt::format("the burette readings of {} and {} are swapped", one, two),
                          fmt::format("Look at the bench sheet; repeat {} first.", one), std::nullopt});
      }
    }
  }

  /// Each stands for what the other was read of; `a_per_b`: g/L by which a mL counts in a, over that in b.
  static void swap_subjects(Reading& a, Reading& b, double a_per_b) {
    std::swap(a.g_per_mol, b.g_per_mol);
    std::swap(a.g_fixed, b.g_fixed);
    a.times = a_per_b;
    b.times = 1 / a_per_b;
  }

  void wrong_volume() {
    const auto volume = std::ranges::find(met_.gathered.what, "volume") - met_.gathered.what.begin();
    FreeShift free;
    free.of_readings = VectorXd::Zero(readings_);
    free.of_readings(volume) = volume_error_rel * met_.gathered.weighing.readings[at(volume)].value;
    const Weighed fit = weigh(met_.gathered.weighing, free);
    const double off = fit.shift * free.of_readings(volume);
    const double truth = met_.gathered.weighing.readings[at(volume)].value - off;
    keep(
        fit,
        {Mistake::volume, "volume",
         fmt::format(
             "all levels together are too {} for this volume: the level was read {} too {} ({} would fit), "
             "or the sample does not stand for the tank (not mixed, water added since), or {} was not logged",
             off > 0 ? "high" : "low", units::show(units::Litres{std::abs(off)}), off > 0 ? "high" : "low",
             units::show(units::Litres{std::max(truth, 0.0)}), off > 0 ? "make-up" : "a dump"),
         "Read the level again, mix, and take a second sample.", std::nullopt});
  }

  void logged_addition(const LoggedAddition& addition) {
    const std::string entry = fmt::format("entry {}", addition.entry);
    const VectorXd made = met_.gathered.shift(addition.component_mol, addition.volume_L);
    const auto moved = [&](double times) {
      Weighing without = met_.gathered.weighing;
      without.before.mean += times * made;
      return without;
    };
    const auto about = [&](Mistake mistake, std::string words, const char* try_this) {
      return Explanation{mistake, entry, std::move(words), try_this, addition.entry};
    };
    constexpr const char* look = "Repeat the analysis first; then look at the slip, the scale and the store.";
    propose(moved(-1),
            about(Mistake::not_made,
                  fmt::format("{} ({}) is not in the tank: logged but not made, or made in another tank",
                              addition.what, entry),
                  look));
    propose(moved(1), about(Mistake::made_twice,
                            fmt::format("{} ({}) is in the tank twice", addition.what, entry), look));
    FreeShift free;
    free.of_state = addition_error_rel * made;
    const Weighed fit = weigh(met_.gathered.weighing, free);
    const double times = 1 + fit.shift * addition_error_rel;
    if (times > 0)
      keep(fit, about(Mistake::other_amount,
                      fmt::format("of {} ({}) it was {} that went in", addition.chemical, entry,
                                  mass(times * addition.kg)),
                      look));
    other_hydrates(addition, moved, about);
  }

  void other_hydrates(const LoggedAddition& addition, const auto& moved, const auto& about) {
    const bath::ShelfItem* item = met_.tank.on_shelf(addition.chemical);
    if (!item) return;
    const std::string salt = anhydrous(item->stock.formula);
    const auto logged = matter::Formula::parse(item->stock.formula);
    if (salt.empty() || !logged) return;
    const auto& catalogue = matter::StockCatalogue::built_in();
    for (const std::string& id : catalogue.ids()) {
      const matter::StockChemical& other = *catalogue.find(id);
      if (other.liquid || other.formula == item->stock.formula || anhydrous(other.formula) != salt) continue;
      const auto formula = matter::Formula::parse(other.formula);
      if (!formula) continue;
      propose(moved(logged->molar_mass().v / formula->molar_mass().v - 1),
              about(Mistake::other_hydrate,
                    fmt::format("the bag of entry {} held {}, not {}", addition.entry, other.formula,
                                item->stock.formula),
                    "Read the label of the bag and its certificate."));
    }
  }

  void unlogged_addition(const bath::ShelfItem& item) {
    const auto brings = met_.chemistry.brings(item.stock);
    if (!brings) return;
    const double usual_kg = unlogged_addition_kg_per_L * met_.weighed.state(amounts_);
    FreeShift free;
    free.of_state = usual_kg * met_.gathered.shift(brings->component_mol, 0);
    if (free.of_state.isZero()) return;  // water
    const Weighed fit = weigh(met_.gathered.weighing, free);
    if (!(fit.shift > 0)) return;
    keep(fit, {Mistake::not_logged, fmt::format("{} not logged", item.stock.id),
               fmt::format("an addition that is not in the log: {} {} would fit", mass(fit.shift * usual_kg),
                           item.stock.id),
               "Ask the last shift and look in the store; repeat the analysis before adding.", std::nullopt});
  }

  /// The best of each culprit, the best first.
  void sort() {
    auto& all = misfit_.explanations;
    std::ranges::stable_sort(all, std::greater{}, &Explanation::log_evidence);
    std::vector<Explanation> one_each;
    for (Explanation& explanation : all)
      if (std::ranges::find(one_each, explanation.culprit, &Explanation::culprit) == one_each.end())
        one_each.push_back(std::move(explanation));
    all = std::move(one_each);
    const double clear = std::log(clear_ratio);
    misfit_.one_is_clear = !all.empty() && best_fits_ && all[0].log_evidence >= clear &&
                           (all.size() == 1 || all[0].log_evidence - all[1].log_evidence >= clear);
  }

  Misfit& misfit_;
  const Case& met_;
  const Index readings_, amounts_;
  double best_ = 0;
  bool best_fits_ = false;
};

}  // namespace

std::string_view name(Mistake mistake) {
  switch (mistake) {
    case Mistake::sample_size:
      return "sample size";
    case Mistake::reading:
      return "reading";
    case Mistake::other_share:
      return "free for total";
    case Mistake::swapped:
      return "swapped burettes";
    case Mistake::volume:
      return "volume";
    case Mistake::not_made:
      return "addition not made";
    case Mistake::made_twice:
      return "addition made twice";
    case Mistake::other_amount:
      return "another amount";
    case Mistake::other_hydrate:
      return "another hydrate";
    case Mistake::not_logged:
      return "addition not logged";
  }
  return "";
}

void explain(Misfit& misfit, const Case& met) {
  if (misfit.alarm) Explaining(misfit, met).run();
}

}  // namespace bathwright::analysis
