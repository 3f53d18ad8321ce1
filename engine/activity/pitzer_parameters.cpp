#include "pitzer_parameters.hpp"

#include <algorithm>
#include <array>
#include <bathwright/data/tables.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>
#include <cstdlib>
#include <map>
#include <numeric>
#include <optional>
#include <set>
#include <tuple>

namespace bathwright::activity {
namespace {

using units::Celsius;

constexpr double reference_C = 25;

/// One row's values at its temperature, with their slopes where published (NaN where not).
struct BinaryRow {
  double t_C;
  std::array<double, 4> value, slope;  ///< beta0, beta1, beta2, C_phi
  double alpha1, alpha2, max_molality;
  std::string range_of, quality, source;
};
struct MixingRow {
  double t_C, value, slope;
  std::string quality, source;
};
using BinaryKey = std::tuple<std::string, std::string, std::string>;    ///< set, cation, anion
using MixingName = std::pair<std::string, std::array<std::string, 3>>;  ///< kind, sorted names
using MixingKey = std::pair<std::string, MixingName>;                   ///< set, which

struct Tables {
  std::map<BinaryKey, std::vector<BinaryRow>> binary;  ///< rows by rising temperature
  std::map<MixingKey, std::vector<MixingRow>> mixing;
  std::set<MixingName> triplets;  ///< every psi, zeta and mu that some set holds
};

MixingName mixing_name(std::string_view kind, std::string_view i, std::string_view j, std::string_view k) {
  std::array<std::string, 3> names{std::string(i), std::string(j), std::string(k)};
  std::sort(names.begin(), names.end());
  return {std::string(kind), std::move(names)};
}

const Tables& tables() {
  static const Tables loaded = [] {
    Tables t;
    const data::CsvTable binary = data::built_in_table(
        "activity/pitzer_binary.csv", {"t_C", "beta0", "beta1", "beta2", "cphi", "alpha1", "alpha2",
                                       "dbeta0_dT", "dbeta1_dT", "dbeta2_dT", "dcphi_dT", "max_molality"});
    for (std::size_t i = 0; i < binary.size(); ++i) {
      const data::CsvRow row = binary[i];
      t.binary[{std::string(row["set"]), std::string(row["cation"]), std::string(row["anion"])}].push_back(
          {row.number("t_C"),
           {row.number("beta0"), row.number("beta1"), row.number("beta2"), row.number("cphi")},
           {row.number("dbeta0_dT"), row.number("dbeta1_dT"), row.number("dbeta2_dT"),
            row.number("dcphi_dT")},
           row.number("alpha1"),
           row.number("alpha2"),
           row.number("max_molality"),
           std::string(row["range_of"]),
           std::string(row["quality"]),
           std::string(row["source"])});
    }
    const data::CsvTable mixing =
        data::built_in_table("activity/pitzer_mixing.csv", {"t_C", "value", "dvalue_dT"});
    for (std::size_t i = 0; i < mixing.size(); ++i) {
      const data::CsvRow row = mixing[i];
      MixingName who = mixing_name(row["kind"], row["i"], row["j"], row["k"]);
      if (!row["k"].empty()) t.triplets.insert(who);
      t.mixing[{std::string(row["set"]), std::move(who)}].push_back(
          {row.number("t_C"), row.number("value"), row.number("dvalue_dT"), std::string(row["quality"]),
           std::string(row["source"])});
    }
    for (auto& [key, rows] : t.binary)
      std::sort(rows.begin(), rows.end(), [](const auto& a, const auto& b) { return a.t_C < b.t_C; });
    for (auto& [key, rows] : t.mixing)
      std::sort(rows.begin(), rows.end(), [](const auto& a, const auto& b) { return a.t_C < b.t_C; });
    return t;
  }();
  return loaded;
}

/// The sets that give an interaction its value at 25 degC, in the order in which they are asked.
std::vector<std::string> sets_at_25(ParameterSets sets) {
  std::vector<std::string> order;
  if (sets.zinc == ZincSet::chloride) order.emplace_back("zinc chloride");
  if (sets.zinc == ZincSet::alkaline) order.emplace_back("zincate");
  order.insert(order.end(), {sets.acid == AcidSet::sulfate ? "A" : "B", "main", "estimates"});
  return order;
}

/// The sets that tabulate an interaction against temperature.
constexpr const char* temperature_sets[] = {"sulfate T", "chloride T", "warm", "estimates"};

/// The rows that serve one interaction: those of its value at 25 degC and, where there is one, the table of
/// its change with temperature.
template <class Row>
struct Served {
  const std::vector<Row>* at_25 = nullptr;
  const std::vector<Row>* table = nullptr;

  explicit operator bool() const { return at_25 || table; }
  const Row& row() const { return (at_25 ? at_25 : table)->front(); }
};

template <class Row>
double interpolated(const std::vector<Row>& rows, double t_C, const auto& value) {
  const double x = std::clamp(t_C, rows.front().t_C, rows.back().t_C);
  auto above =
      std::lower_bound(rows.begin(), rows.end(), x, [](const Row& r, double at) { return r.t_C < at; });
  if (above == rows.begin()) ++above;
  const auto below = above - 1;
  return value(*below) + (x - below->t_C) / (above->t_C - below->t_C) * (value(*above) - value(*below));
}

/// Whether no table reaches the temperature, and a slope, if any, moves the value of 25 degC.
template <class Row>
bool moved_by_slope(const Served<Row>& served, Celsius t) {
  return !served.table || (t.v < reference_C && served.table->front().t_C >= reference_C && served.at_25);
}

/// Value at t: that of the table, where there is one, else that of 25 degC moved by its slope. Between 25
/// degC and 25 degrees from it the table is reached gradually, so that every value is continuous in t, the
/// published one of 25 degC is kept and so is the whole published table from 50 degC on. A table that begins
/// at 25 degC leaves what is colder to the slope; elsewhere its end row is held outside. `no_slope` is set
/// when a shift of more than 5 degrees had to be left out.
template <class Row>
double at_temperature(const Served<Row>& served, Celsius t, const auto& value, const auto& slope,
                      bool& no_slope) {
  constexpr double negligible_K = 5;
  if (const auto* table = served.table; !moved_by_slope(served, t)) {
    if (t.v < table->front().t_C - negligible_K || t.v > table->back().t_C + negligible_K) no_slope = true;
    const double there = interpolated(*table, t.v, value);
    if (!served.at_25) return there;
    constexpr double blended_K = 25;
    const double blend = std::max(0.0, 1 - std::abs(t.v - reference_C) / blended_K);
    return there + blend * (value(served.at_25->front()) - interpolated(*table, reference_C, value));
  }
  const Row& row = served.at_25->front();
  const double shift = t.v - row.t_C, s = slope(row);
  if (!std::isnan(s)) return value(row) + s * shift;
  no_slope = no_slope || (std::abs(shift) > negligible_K && value(row) != 0);
  return value(row);
}

bool is_published(std::string_view quality) { return quality.starts_with("published"); }

/// The value below which 68 % of the magnitudes stay.
double spread(std::vector<double> values) {
  constexpr double fraction = 0.68;
  for (double& value : values) value = std::abs(value);
  std::sort(values.begin(), values.end());
  return values[static_cast<std::size_t>(fraction * static_cast<double>(values.size() - 1) + 0.5)];
}

/// What stands in for an unpublished pair: the medians of the published pairs of the same charges.
struct ChargeType {
  std::array<double, 3> median;  ///< beta0, beta1, beta2
  std::size_t pairs;
  double u_ln_gamma;  ///< spread of 2 B at 1 mol/kg about that of the median
};

/// 2 B of a pair at an ionic strength of 1 mol/kg: ln gamma of each ion per mol/kg of the other.
double twice_B(const std::array<double, 3>& beta, double alpha1, double alpha2) {
  const auto g = [](double x) { return 2 * (1 - (1 + x) * std::exp(-x)) / (x * x); };
  return 2 * (beta[0] + beta[1] * g(alpha1) + (beta[2] == 0 ? 0 : beta[2] * g(alpha2)));
}

/// By charge of cation and anion; only types with at least three published pairs of the usual form.
const std::map<std::pair<int, int>, ChargeType>& charge_types() {
  static const auto types = [] {
    std::map<std::pair<int, int>, std::vector<std::array<double, 3>>> pairs;
    for (const auto& [key, rows] : tables().binary) {
      const auto& [set, cation, anion] = key;
      if (set != "main") continue;
      const std::pair charges{charge_in_name(cation), charge_in_name(anion)};
      const BinaryRow& row = rows.front();
      const bool both_divalent = charges == std::pair{2, -2};
      if (row.alpha1 != (both_divalent ? 1.4 : 2.0) || (!both_divalent && row.value[2] != 0)) continue;
      pairs[charges].push_back({row.value[0], row.value[1], row.value[2]});
    }
    std::map<std::pair<int, int>, ChargeType> found;
    for (const auto& [charges, of] : pairs) {
      if (of.size() < 3) continue;
      ChargeType type{};
      type.pairs = of.size();
      for (std::size_t k = 0; k < 3; ++k) {
        std::vector<double> values;
        for (const auto& beta : of) values.push_back(beta[k]);
        std::sort(values.begin(), values.end());
        type.median[k] = values[values.size() / 2];
      }
      const double alpha1 = charges == std::pair{2, -2} ? 1.4 : 2.0;
      std::vector<double> off;
      for (const auto& beta : of) off.push_back(twice_B(beta, alpha1, 12) - twice_B(type.median, alpha1, 12));
      type.u_ln_gamma = spread(std::move(off));
      found[charges] = type;
    }
    return found;
  }();
  return types;
}

/// The uncertainties of what is not published, from the spread of what is (pitzer_parameters.hpp).
struct Doubts {
  double theta, lambda, psi;  ///< of ln gamma per mol/kg (psi, zeta: per mol2/kg2)
  double slope_per_K;         ///< of ln gamma per mol/kg and K, for each product of charges
  double fit;  ///< of ln gamma at the end of the range of a published fit, for each product of charges
  double bend_per_K2;  ///< the same, of what a slope leaves out, per K from 25 degC squared
};

/// By how much more a table moves 2 B of a pair away from 25 degC than the published slope does; nothing
/// where one of them does not reach the temperature.
std::optional<double> table_less_slope(const BinaryRow& row, const std::vector<BinaryRow>& table,
                                       double t_C) {
  if (std::isnan(row.slope[0]) || table.size() < 2) return std::nullopt;
  if (std::min(t_C, reference_C) < table.front().t_C || std::max(t_C, reference_C) > table.back().t_C)
    return std::nullopt;
  const auto of = [](const BinaryRow& r, std::array<double, 3> beta) {
    for (double& b : beta) b = std::isnan(b) ? 0 : b;
    return twice_B(beta, r.alpha1, r.alpha2);
  };
  const auto tabulated = [&](double at_C) {
    std::array<double, 3> beta{};
    for (std::size_t k = 0; k < beta.size(); ++k)
      beta[k] = interpolated(table, at_C, [k](const BinaryRow& r) { return r.value[k]; });
    return of(table.front(), beta);
  };
  const double K = t_C - reference_C;
  return tabulated(t_C) - tabulated(reference_C) - K * of(row, {row.slope[0], row.slope[1], row.slope[2]});
}

/// How far the published tables bend away from the published slopes of the same pairs, at 0 and 50 degC: of
/// 2 B, per product of charges and K^2.
std::vector<double> bends() {
  std::vector<double> found;
  for (const auto& [key, table] : tables().binary) {
    const auto& [set, cation, anion] = key;
    const auto main = tables().binary.find({"main", cation, anion});
    if (set != "warm" || main == tables().binary.end()) continue;
    const double product = std::abs(charge_in_name(cation) * charge_in_name(anion));
    for (const double t_C : {0.0, 50.0})
      if (const auto bend = table_less_slope(main->second.front(), table, t_C))
        found.push_back(*bend / (product * (t_C - reference_C) * (t_C - reference_C)));
  }
  return found;
}

/// (1/nu) (nu_M ln gamma_M + nu_X ln gamma_X) of a salt of molality m, what its parameters add to the
/// limiting law. Pitzer 1991, Activity Coefficients in Electrolyte Solutions, 2nd ed., ch. 3.
double specific_part(const BinaryRow& row, int cation_charge, int anion_charge, double m) {
  const int common = std::gcd(cation_charge, anion_charge);
  const double of_cation = std::abs(anion_charge) / common, of_anion = std::abs(cation_charge) / common;
  const double nu = of_cation + of_anion;
  const double I =
      m * (of_cation * cation_charge * cation_charge + of_anion * anion_charge * anion_charge) / 2;
  const auto falling = [&](double beta, double alpha) {
    if (beta == 0 || std::isnan(beta)) return 0.0;
    const double x = alpha * std::sqrt(I);
    return 2 * beta / (x * x) * (1 - (1 + x - x * x / 2) * std::exp(-x));
  };
  const auto& [beta0, beta1, beta2, C_phi] = row.value;
  const double B = 2 * beta0 + falling(beta1, row.alpha1) + falling(beta2, row.alpha2);
  return m * 2 * of_cation * of_anion / nu * B +
         m * m * 2 * std::pow(of_cation * of_anion, 1.5) / nu * 1.5 * C_phi;
}

/// By how much two published fits of one salt differ at 25 degC, at the end of the range of the first: of ln
/// gamma, per product of charges. Acids whose anion has a second proton are left out: only the sum of the
/// parameters of both anions was fitted.
std::vector<double> fits_apart() {
  std::vector<double> found;
  for (const auto& [key, table] : tables().binary) {
    const auto& [set, cation, anion] = key;
    const auto main = tables().binary.find({"main", cation, anion});
    const auto here =
        std::find_if(table.begin(), table.end(), [](const BinaryRow& r) { return r.t_C == reference_C; });
    if (set != "warm" || main == tables().binary.end() || here == table.end()) continue;
    const BinaryRow& row = main->second.front();
    if (std::isnan(row.max_molality) || (cation == "H^+" && anion.find("SO4") != std::string::npos)) continue;
    const int zc = charge_in_name(cation), za = charge_in_name(anion);
    found.push_back(
        (specific_part(*here, zc, za, row.max_molality) - specific_part(row, zc, za, row.max_molality)) /
        std::abs(zc * za));
  }
  return found;
}

const Doubts& doubts() {
  static const Doubts found = [] {
    std::map<std::string, std::vector<double>> values;
    for (const auto& [key, rows] : tables().mixing)
      if (key.first == "main") values[key.second.first].push_back(rows.front().value);
    std::vector<double> slopes;
    for (const auto& [key, rows] : tables().binary) {
      const BinaryRow& row = rows.front();
      if (std::get<0>(key) != "main" || std::isnan(row.slope[0])) continue;
      const double product = std::abs(charge_in_name(std::get<1>(key)) * charge_in_name(std::get<2>(key)));
      slopes.push_back(
          twice_B({row.slope[0], std::isnan(row.slope[1]) ? 0 : row.slope[1], 0}, row.alpha1, 12) / product);
    }
    return Doubts{2 * spread(values["theta"]), 2 * spread(values["lambda"]), spread(values["psi"]),
                  spread(std::move(slopes)),   spread(fits_apart()),         spread(bends())};
  }();
  return found;
}

/// The part of that spread which is left for a value that is no published fit, by its quality.
double left_of_spread(std::string_view quality) {
  if (quality == "regressed" || quality == "analogy, tested" || quality == "imposed") return 0.05;
  if (quality == "regressed, transferred" || quality == "analogy, weakly tested") return 0.25;
  return 0.5;
}

/// A fit that ends below this, mol/kg, ended where the salt alone saturates (gypsum at 0.016), not where its
/// parameters do.
constexpr double saturation_limited = 0.1;

/// The molality that 68 % of the published fits of these charges reach, mol/kg of the salt: the end of the
/// range of a fit for which nobody states one.
double usual_range(int cation_charge, int anion_charge) {
  constexpr double fraction = 0.32;
  std::vector<double> ends;
  for (const auto& [key, rows] : tables().binary) {
    const auto& [set, cation, anion] = key;
    const double end = rows.front().max_molality;
    if (set == "main" && !std::isnan(end) && charge_in_name(cation) == cation_charge &&
        charge_in_name(anion) == anion_charge)
      ends.push_back(end);
  }
  if (ends.empty()) return 1;
  std::sort(ends.begin(), ends.end());
  return ends[static_cast<std::size_t>(fraction * static_cast<double>(ends.size() - 1) + 0.5)];
}

class Collector {
 public:
  Collector(std::span<const Solute> solutes, Celsius t, ParameterSets sets,
            std::span<const Interaction> stated)
      : solutes_(solutes), t_(t), sets_(sets), order_(sets_at_25(sets)) {
    for (std::uint32_t i = 0; i < solutes.size(); ++i) position_[solutes[i].name] = i;
    for (const Interaction& one : stated) {
      const std::string third = one.solutes.size() > 2 ? one.solutes[2] : "";
      stated_[mixing_name(activity::name(one.parameter), one.solutes[0], one.solutes[1], third)] = &one;
    }
  }

  PitzerParameters collect() {
    find_outside();
    const auto n = static_cast<std::uint32_t>(solutes_.size());
    for (std::uint32_t i = 0; i < n; ++i)
      for (std::uint32_t j = i; j < n; ++j) {
        if (outside_[i] || outside_[j]) continue;
        const int zi = solutes_[i].charge, zj = solutes_[j].charge;
        if (zi == 0 || zj == 0)
          zi == 0 ? neutral(i, j) : neutral(j, i);
        else if (i != j && zi * zj > 0)
          like(i, j);
        else if (i != j)
          zi > 0 ? counter(i, j) : counter(j, i);
      }
    triplets();
    return std::move(found_);
  }

 private:
  using Kind = InteractionNote::Kind;
  struct LikeIons {
    std::uint32_t i, j;
  };

  const std::string& name(std::uint32_t i) const { return solutes_[i].name; }
  int charge_product(const std::vector<std::uint32_t>& pair) const {
    return solutes_[pair[0]].charge * solutes_[pair[1]].charge;
  }
  bool away_from_25() const { return std::abs(t_.v - reference_C) > 0.01; }

  InteractionNote& note(Kind kind, std::vector<std::uint32_t> who, const std::string& text) {
    std::string names;
    for (const std::uint32_t i : who) names += (names.empty() ? "" : " - ") + name(i);
    InteractionNote added;
    added.kind = kind;
    added.solutes = std::move(who);
    added.text = names + ": " + text;
    return found_.notes.emplace_back(std::move(added));
  }

  Served<BinaryRow> binary_rows(std::uint32_t cation, std::uint32_t anion) const {
    // Set B says nothing about calcium; the value of set A serves both (engine/data/README.md).
    const bool calcium = name(cation) == "Ca^2+" && name(anion) == "HSO4^-";
    return served(tables().binary, calcium && sets_.acid == AcidSet::chloride ? "A" : nullptr,
                  [&](const std::string& set) {
                    return BinaryKey{set, name(cation), name(anion)};
                  });
  }

  Served<MixingRow> mixing_rows(const MixingName& who) const {
    return served(tables().mixing, nullptr, [&](const std::string& set) { return MixingKey{set, who}; });
  }

  template <class Key, class Row>
  Served<Row> served(const std::map<Key, std::vector<Row>>& all, const char* first, const auto& key) const {
    Served<Row> found;
    const auto rows = [&](const std::string& set) {
      const auto at = all.find(key(set));
      return at == all.end() ? nullptr : &at->second;
    };
    if (first) found.at_25 = rows(first);
    for (const std::string& set : order_)
      if (const auto* candidate = rows(set); !found.at_25 && candidate && candidate->size() == 1)
        found.at_25 = candidate;
    for (const char* set : temperature_sets)
      if (const auto* candidate = rows(set); !found.table && candidate && candidate->size() > 1)
        found.table = candidate;
    return found;
  }

  const Interaction* stated(const MixingName& who) const {
    const auto found = stated_.find(who);
    return found == stated_.end() ? nullptr : found->second;
  }

  /// Of beta0, beta1, beta2 and C_phi; null where nothing is stated.
  std::array<const Interaction*, 4> stated_pair(std::uint32_t cation, std::uint32_t anion) const {
    using enum InteractionParameter;
    std::array<const Interaction*, 4> found{};
    for (std::size_t k = 0; k < 4; ++k)
      found[k] = stated(mixing_name(activity::name(std::array{beta0, beta1, beta2, cphi}[k]), name(cation),
                                    name(anion), {}));
    return found;
  }
  bool any_stated(std::uint32_t cation, std::uint32_t anion) const {
    const auto of = stated_pair(cation, anion);
    return std::any_of(of.begin(), of.end(), [](const Interaction* one) { return one != nullptr; });
  }

  void find_outside() {
    outside_.assign(solutes_.size(), false);
    for (std::uint32_t i = 0; i < solutes_.size(); ++i) {
      if (solutes_[i].charge == 0) continue;
      bool known = false, estimable = true, has_counter_ion = false;
      for (std::uint32_t j = 0; j < solutes_.size(); ++j) {
        if (solutes_[i].charge * solutes_[j].charge >= 0) continue;
        has_counter_ion = true;
        const auto [cation, anion] = solutes_[i].charge > 0 ? std::pair{i, j} : std::pair{j, i};
        known = known || binary_rows(cation, anion) || any_stated(cation, anion);
        // Only simple counter-ions decide: those of higher charge are themselves traces.
        if (std::abs(solutes_[j].charge) <= 2) estimable = estimable && type_of(cation, anion) != nullptr;
      }
      if (!has_counter_ion || known || estimable) continue;
      outside_[i] = true;
      found_.outside.push_back(i);
      note(Kind::outside_model, {i},
           "no interaction published and none can be estimated; Davies' coefficient at no more than 1 mol/kg "
           "stands in");
    }
  }

  const ChargeType* type_of(std::uint32_t cation, std::uint32_t anion) const {
    const auto found = charge_types().find({solutes_[cation].charge, solutes_[anion].charge});
    return found == charge_types().end() ? nullptr : &found->second;
  }

  /// Of ln gamma per mol/kg, for a pair about which nothing is published.
  double u_of_pair(std::uint32_t cation, std::uint32_t anion) const {
    constexpr std::size_t enough_pairs = 5;
    const ChargeType* type = type_of(cation, anion);
    if (type && type->pairs >= enough_pairs) return type->u_ln_gamma;
    return charge_types().at({1, -1}).u_ln_gamma * std::abs(solutes_[cation].charge * solutes_[anion].charge);
  }

  void counter(std::uint32_t cation, std::uint32_t anion) {
    const auto own = stated_pair(cation, anion);
    const Served<BinaryRow> rows = binary_rows(cation, anion);
    std::optional<BinaryTerm> term = rows ? published(rows, cation, anion) : estimated(cation, anion);
    if (any_stated(cation, anion)) {
      if (!term) term = BinaryTerm{cation, anion, 0, 0, 0, 0, 2, 12};
      take(own, rows, *term);
    }
    if (term) found_.binary.push_back(*term);
  }

  /// C = C_phi / (2 sqrt|z+ z-|)
  double c_per_c_phi(std::uint32_t cation, std::uint32_t anion) const {
    return 1 / (2 * std::sqrt(std::abs(solutes_[cation].charge * solutes_[anion].charge)));
  }

  std::optional<BinaryTerm> estimated(std::uint32_t cation, std::uint32_t anion) {
    const ChargeType* type = type_of(cation, anion);
    const auto own = stated_pair(cation, anion);
    if (!own[0] || !own[1])
      note(Kind::missing, {cation, anion},
           type ? "not published; median of the published pairs of the same charges taken"
                : "not published; zero taken")
          .u_ln_gamma = u_of_pair(cation, anion);
    if (!type) return std::nullopt;
    const bool both_divalent = solutes_[cation].charge == 2 && solutes_[anion].charge == -2;
    return BinaryTerm{cation,          anion, type->median[0],           type->median[1],
                      type->median[2], 0,     both_divalent ? 1.4 : 2.0, 12};
  }

  static double value_at(const Served<BinaryRow>& rows, std::size_t k, Celsius t, bool& no_slope) {
    return at_temperature(
        rows, t, [k](const BinaryRow& r) { return r.value[k]; },
        [k](const BinaryRow& r) { return r.slope[k]; }, no_slope);
  }

  BinaryTerm published(const Served<BinaryRow>& rows, std::uint32_t cation, std::uint32_t anion) {
    const int zc = solutes_[cation].charge, za = solutes_[anion].charge;
    const BinaryRow& row = rows.row();
    bool no_slope = false;
    std::array<double, 4> v{};
    for (std::size_t k = 0; k < 4; ++k) v[k] = value_at(rows, k, t_, no_slope);
    // Where beta0 or beta1 has a published slope, an empty slope of beta2 or C_phi means "none needed".
    if (!rows.table && !(std::isnan(row.slope[0]) && std::isnan(row.slope[1]))) no_slope = false;
    if (!stated_pair(cation, anion)[0]) {
      note_quality(rows, {cation, anion}, "", u_of_pair(cation, anion));
      if (is_published(row.quality)) note_accuracy(row, cation, anion);
    }
    if (no_slope)
      note(Kind::no_temperature_data, {cation, anion},
           "no temperature dependence published; the value at 25 degC taken")
          .u_ln_gamma = doubts().slope_per_K * std::abs(zc * za * (t_.v - reference_C));
    else if (away_from_25() && (moved_by_slope(rows, t_) || t_.v < reference_C))
      note_bend(rows, cation, anion);
    note_range(rows, cation, anion);
    return {cation,     anion,
            v[0],       v[1],
            v[2],       v[3] * c_per_c_phi(cation, anion),
            row.alpha1, std::isnan(row.alpha2) ? 0 : row.alpha2};
  }

  /// Puts what is stated into a pair. The published change with temperature stays; where there is none, the
  /// change is as uncertain as any that nobody published.
  void take(const std::array<const Interaction*, 4>& own, const Served<BinaryRow>& rows, BinaryTerm& term) {
    std::array<double*, 4> into{&term.beta0, &term.beta1, &term.beta2, &term.c};
    std::map<std::string, std::string> stated;  // names by source
    bool unused = false;
    for (std::size_t k = 0; k < 4; ++k) {
      if (!own[k]) continue;
      const double change =
          rows ? value_at(rows, k, t_, unused) - value_at(rows, k, {reference_C}, unused) : 0;
      *into[k] = (own[k]->value + change) * (k == 3 ? c_per_c_phi(term.cation, term.anion) : 1);
      std::string& names = stated[own[k]->source];
      names += (names.empty() ? "" : ", ") + std::string(activity::name(own[k]->parameter));
    }
    if (own[2] && term.alpha2 == 0) term.alpha2 = 12;
    for (const auto& [source, names] : stated)
      note(Kind::stated, {term.cation, term.anion}, names + ' ' + source).u_ln_gamma =
          u_of_pair(term.cation, term.anion) * left_of_spread("regressed");
    constexpr double noticed_K = 5;
    const double away_K = std::abs(t_.v - reference_C);
    if (!rows && away_K > noticed_K)
      note(Kind::no_temperature_data, {term.cation, term.anion}, "the stated value at 25 degC taken")
          .u_ln_gamma = doubts().slope_per_K * away_K *
                        std::abs(solutes_[term.cation].charge * solutes_[term.anion].charge);
  }

  /// What two published fits of one salt differ by, reached at the end of the range.
  void note_accuracy(const BinaryRow& row, std::uint32_t cation, std::uint32_t anion) {
    const int zc = solutes_[cation].charge, za = solutes_[anion].charge;
    const double end = row.max_molality >= saturation_limited ? row.max_molality : usual_range(zc, za);
    const double most_of_other = end * std::max(zc, -za) / std::gcd(zc, za);
    note(Kind::accuracy, {cation, anion}, "the accuracy of its published fit").u_ln_gamma =
        doubts().fit * std::abs(zc * za) / most_of_other;
  }

  /// A slope leaves out how the change bends; told outside 15 to 50 degC, for which slopes were derived
  /// (engine/data/README.md). Below 25 degC tables rest on few measurements: where a pair has both, what they
  /// differ by is the doubt, else what others do.
  void note_bend(const Served<BinaryRow>& rows, std::uint32_t cation, std::uint32_t anion) {
    constexpr double from_C = 15, to_C = 50;
    const bool told = moved_by_slope(rows, t_) && (t_.v < from_C || t_.v > to_C);
    const double K = t_.v - reference_C;
    const auto both =
        rows.at_25 && rows.table ? table_less_slope(rows.at_25->front(), *rows.table, t_.v) : std::nullopt;
    note(told ? Kind::no_temperature_data : Kind::accuracy, {cation, anion},
         moved_by_slope(rows, t_) ? "its linear temperature dependence is meant for 15 to 50 degC"
                                  : "its temperature dependence below 25 degC")
        .u_ln_gamma =
        both ? std::abs(*both)
             : doubts().bend_per_K2 * K * K * std::abs(solutes_[cation].charge * solutes_[anion].charge);
  }

  /// Notes what is not published: the value itself, or its change from 25 degC.
  template <class Row>
  void note_quality(const Served<Row>& rows, std::vector<std::uint32_t> who, const std::string& what,
                    double u_unknown) {
    const Row& row = rows.row();
    const Row* moved_by = rows.table ? &rows.table->front() : nullptr;
    if (!is_published(row.quality))
      note(Kind::estimated, std::move(who), what + row.quality + " (" + row.source + ")").u_ln_gamma =
          u_unknown * left_of_spread(row.quality);
    else if (away_from_25() && moved_by && !is_published(moved_by->quality))
      note(Kind::estimated, who,
           what + "temperature dependence: " + moved_by->quality + " (" + moved_by->source + ")")
          .u_ln_gamma = doubts().slope_per_K * left_of_spread(moved_by->quality) *
                        std::abs(charge_product(who) * (t_.v - reference_C));
  }

  /// What must not exceed the end of the fit; engine/data/README.md, column range_of.
  void note_range(const Served<BinaryRow>& rows, std::uint32_t cation, std::uint32_t anion) {
    const BinaryRow& row = rows.row();
    // The tables were made for, or tested up to, saturation where they state no limit.
    const bool by_table = away_from_25() && !moved_by_slope(rows, t_);
    double limit = (by_table ? rows.table->front() : row).max_molality;
    if (std::isnan(limit) && (by_table || !is_published(row.quality))) return;
    const bool stated = !std::isnan(limit);
    if (!stated) limit = usual_range(solutes_[cation].charge, solutes_[anion].charge);
    std::vector<InteractionNote::Counted> counted;
    std::string of = "the salt";
    if (row.range_of == "ligand") {
      limit *= -static_cast<double>(solutes_[cation].charge) / solutes_[anion].charge;
      counted = {{anion, 1}};
      of = name(anion) + ", on which the complexes inside the fit depend";
    } else if (row.range_of == "acid") {
      counted = {{anion, 0.5}};
      if (const auto proton = position_.find("H^+"); proton != position_.end())
        counted.push_back({proton->second, 0.5});
      of = "sulfuric acid";
    } else if (row.range_of == "alkali") {
      if (const auto hydroxide = position_.find("OH^-"); hydroxide != position_.end())
        counted = {{hydroxide->second, 1}};
      of = "hydroxide";
    }
    InteractionNote& added =
        note(Kind::above_range, {cation, anion},
             stated ? "parameters were fitted up to " + units::significant(limit, 3) + " mol/kg of " + of
                    : "no range of its parameters is published; most of its kind end by " +
                          units::significant(limit, 3) + " mol/kg of " + of);
    added.limit_molal = limit;
    added.counted = std::move(counted);
  }

  /// Nothing where it is neither published nor stated.
  std::optional<double> mixing_value(const MixingName& which, std::vector<std::uint32_t> who,
                                     double u_unknown) {
    const Served<MixingRow> rows = mixing_rows(which);
    const Interaction* own = stated(which);
    if (!rows && !own) return std::nullopt;
    bool no_slope = false;
    const auto at = [&](Celsius t) {
      return rows ? at_temperature(
                        rows, t, [](const MixingRow& r) { return r.value; },
                        [](const MixingRow& r) { return r.slope; }, no_slope)
                  : 0;
    };
    if (!own) {
      note_quality(rows, std::move(who), which.first + ' ', u_unknown);
      return at(t_);
    }
    note(Kind::stated, std::move(who), which.first + ' ' + own->source).u_ln_gamma =
        u_unknown * left_of_spread("regressed");
    return own->value + at(t_) - at({reference_C});
  }

  void like(std::uint32_t i, std::uint32_t j) {
    const auto theta = mixing_value(mixing_name("theta", name(i), name(j), {}), {i, j}, doubts().theta);
    if (theta)
      known_thetas_.push_back({i, j});
    else
      note(Kind::missing, {i, j}, "theta not published; zero taken").u_ln_gamma = doubts().theta;
    const double value = theta.value_or(0);
    if (value != 0 || solutes_[i].charge != solutes_[j].charge) found_.like_pairs.push_back({i, j, value});
  }

  void neutral(std::uint32_t n, std::uint32_t other) {
    const auto lambda =
        mixing_value(mixing_name("lambda", name(n), name(other), {}), {n, other}, doubts().lambda);
    if (lambda && *lambda != 0) found_.neutral_pairs.push_back({n, other, *lambda});
    if (!lambda && n != other)
      note(Kind::missing, {n, other}, "lambda not published; zero taken").u_ln_gamma = doubts().lambda;
  }

  void triplets() {
    // Far fewer triplets are known than could be formed: walk the known ones and look the ions up.
    for (const MixingName& who : tables().triplets) triplet(who);
    for (const auto& [who, own] : stated_)
      if (own->solutes.size() == 3 && !tables().triplets.contains(who)) triplet(who);
    for (const LikeIons& pair : known_thetas_)
      for (std::uint32_t k = 0; k < solutes_.size(); ++k)
        if (solutes_[k].charge * solutes_[pair.i].charge < 0) note_missing_psi(pair, k);
  }

  void triplet(const MixingName& who) {
    std::vector<std::uint32_t> at;
    for (const std::string& member : who.second)
      if (const auto found = position_.find(member); found != position_.end() && !outside_[found->second])
        at.push_back(found->second);
    if (at.size() != 3) return;
    const auto value = mixing_value(who, at, doubts().psi);  // nothing: only in a set that is not in use
    if (value && *value != 0) found_.triplets.push_back({at[0], at[1], at[2], *value});
  }

  /// Where all pairs of a triplet are known, what is left open is psi.
  void note_missing_psi(const LikeIons& pair, std::uint32_t counter) {
    const auto known = [&](std::uint32_t ion) {
      const auto [cation, anion] =
          solutes_[ion].charge > 0 ? std::pair{ion, counter} : std::pair{counter, ion};
      return binary_rows(cation, anion) || any_stated(cation, anion);
    };
    if (outside_[counter] || !known(pair.i) || !known(pair.j)) return;
    const MixingName psi = mixing_name("psi", name(pair.i), name(pair.j), name(counter));
    if (mixing_rows(psi) || stated(psi)) return;
    note(Kind::missing, {pair.i, pair.j, counter}, "psi not published; zero taken").u_ln_gamma = doubts().psi;
  }

  std::span<const Solute> solutes_;
  Celsius t_;
  ParameterSets sets_;
  std::vector<std::string> order_;
  std::map<std::string, std::uint32_t> position_;
  std::map<MixingName, const Interaction*> stated_;
  std::vector<bool> outside_;
  std::vector<LikeIons> known_thetas_;
  PitzerParameters found_;
};

}  // namespace

PitzerParameters pitzer_parameters(std::span<const Solute> solutes, Celsius t, ParameterSets sets,
                                   std::span<const Interaction> stated) {
  return Collector(solutes, t, sets, stated).collect();
}

}  // namespace bathwright::activity
