#include "pitzer_parameters.hpp"

#include <algorithm>
#include <array>
#include <bathwright/data/tables.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>
#include <cstdlib>
#include <map>
#include <optional>
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
  std::string quality, source;
};
struct MixingRow {
  double t_C, value, slope;
  std::string quality, source;
};
using BinaryKey = std::tuple<std::string, std::string, std::string>;  ///< set, cation, anion
using MixingKey =
    std::tuple<std::string, std::string, std::array<std::string, 3>>;  ///< set, kind, sorted names

struct Tables {
  std::map<BinaryKey, std::vector<BinaryRow>> binary;  ///< rows by rising temperature
  std::map<MixingKey, std::vector<MixingRow>> mixing;
};

MixingKey mixing_key(std::string set, std::string kind, std::string_view i, std::string_view j,
                     std::string_view k) {
  std::array<std::string, 3> names{std::string(i), std::string(j), std::string(k)};
  std::sort(names.begin(), names.end());
  return {std::move(set), std::move(kind), std::move(names)};
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
           std::string(row["quality"]),
           std::string(row["source"])});
    }
    const data::CsvTable mixing =
        data::built_in_table("activity/pitzer_mixing.csv", {"t_C", "value", "dvalue_dT"});
    for (std::size_t i = 0; i < mixing.size(); ++i) {
      const data::CsvRow row = mixing[i];
      t.mixing[mixing_key(std::string(row["set"]), std::string(row["kind"]), row["i"], row["j"], row["k"])]
          .push_back({row.number("t_C"), row.number("value"), row.number("dvalue_dT"),
                      std::string(row["quality"]), std::string(row["source"])});
    }
    for (auto& [key, rows] : t.binary)
      std::sort(rows.begin(), rows.end(), [](const auto& a, const auto& b) { return a.t_C < b.t_C; });
    for (auto& [key, rows] : t.mixing)
      std::sort(rows.begin(), rows.end(), [](const auto& a, const auto& b) { return a.t_C < b.t_C; });
    return t;
  }();
  return loaded;
}

/// The sets in the order in which they are asked. The warm tables of Na, K, Ca, Mg, H with Cl, SO4 replace
/// the linear slopes above 50 degC, where those drift; at 25 degC itself the temperature tables by analogy
/// add nothing to the published values they start from (engine/data/README.md).
std::vector<std::string> set_order(Celsius t, AcidSet acid_set) {
  std::vector<std::string> order{acid_set == AcidSet::sulfate ? "A" : "B"};
  if (std::abs(t.v - reference_C) > 0.01) order.insert(order.end(), {"sulfate T", "chloride T"});
  if (t.v > 50) order.emplace_back("warm");
  order.insert(order.end(), {"main", "estimates"});
  return order;
}

/// Value at t from rows of rising temperature: linear between them, the end row held outside; a single row
/// uses its slope. `no_slope` is set when a temperature shift of more than 5 degrees had to be left out.
template <class Row, class Value, class Slope>
double at_temperature(const std::vector<Row>& rows, Celsius t, Value value, Slope slope, bool& no_slope) {
  if (rows.size() == 1) {
    const double shift = t.v - rows[0].t_C, s = slope(rows[0]);
    if (std::isnan(s)) {
      no_slope = no_slope || (std::abs(shift) > 5 && value(rows[0]) != 0);
      return value(rows[0]);
    }
    return value(rows[0]) + s * shift;
  }
  if (t.v < rows.front().t_C - 5 || t.v > rows.back().t_C + 5) no_slope = true;
  const double x = std::clamp(t.v, rows.front().t_C, rows.back().t_C);
  auto above =
      std::lower_bound(rows.begin(), rows.end(), x, [](const Row& r, double at) { return r.t_C < at; });
  if (above == rows.begin()) ++above;
  const auto below = above - 1;
  const double fraction = (x - below->t_C) / (above->t_C - below->t_C);
  return value(*below) + fraction * (value(*above) - value(*below));
}

bool is_published(std::string_view quality) { return quality.starts_with("published"); }

/// Median parameters of the published pairs of one charge type, or nothing when there are fewer than three.
std::optional<std::array<double, 3>> charge_type_median(int cation_charge, int anion_charge,
                                                        const std::map<std::string, int>& charge_of) {
  std::array<std::vector<double>, 3> values;
  const bool both_divalent = cation_charge == 2 && anion_charge == -2;
  for (const auto& [key, rows] : tables().binary) {
    const auto& [set, cation, anion] = key;
    if (set != "main" || charge_of.at(cation) != cation_charge || charge_of.at(anion) != anion_charge)
      continue;
    const BinaryRow& row = rows.front();
    if (row.alpha1 != (both_divalent ? 1.4 : 2.0) || (!both_divalent && row.value[2] != 0)) continue;
    for (std::size_t k = 0; k < 3; ++k) values[k].push_back(row.value[k]);
  }
  if (values[0].size() < 3) return std::nullopt;
  std::array<double, 3> median{};
  for (std::size_t k = 0; k < 3; ++k) {
    std::sort(values[k].begin(), values[k].end());
    median[k] = values[k][values[k].size() / 2];
  }
  return median;
}

const std::map<std::string, int>& charges_in_table() {
  static const std::map<std::string, int> charges = [] {
    std::map<std::string, int> all;
    for (const auto& [key, rows] : tables().binary) {
      all[std::get<1>(key)] = charge_in_name(std::get<1>(key));
      all[std::get<2>(key)] = charge_in_name(std::get<2>(key));
    }
    return all;
  }();
  return charges;
}

class Collector {
 public:
  Collector(std::span<const Solute> solutes, Celsius t, AcidSet acid_set)
      : solutes_(solutes), t_(t), acid_set_(acid_set), order_(set_order(t, acid_set)) {}

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
    triplets(n);
    return std::move(found_);
  }

 private:
  using Kind = InteractionNote::Kind;

  const std::string& name(std::uint32_t i) const { return solutes_[i].name; }

  void note(Kind kind, std::vector<std::uint32_t> who, std::string text, double limit = 0) {
    std::string names;
    for (const std::uint32_t i : who) names += (names.empty() ? "" : " - ") + name(i);
    found_.notes.push_back({kind, std::move(who), limit, names + ": " + text});
  }

  const std::vector<BinaryRow>* binary_rows(std::uint32_t cation, std::uint32_t anion) const {
    // Set B says nothing about calcium; the value of set A serves both (engine/data/README.md).
    if (acid_set_ == AcidSet::chloride && name(cation) == "Ca^2+" && name(anion) == "HSO4^-") {
      const auto found = tables().binary.find({"A", name(cation), name(anion)});
      if (found != tables().binary.end()) return &found->second;
    }
    for (const std::string& set : order_) {
      const auto found = tables().binary.find({set, name(cation), name(anion)});
      if (found != tables().binary.end()) return &found->second;
    }
    return nullptr;
  }

  const std::vector<MixingRow>* mixing_rows(const char* kind, std::string_view i, std::string_view j,
                                            std::string_view k = {}) const {
    for (const std::string& set : order_) {
      const auto found = tables().mixing.find(mixing_key(set, kind, i, j, k));
      if (found != tables().mixing.end()) return &found->second;
    }
    return nullptr;
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
        known = known || binary_rows(cation, anion) != nullptr;
        // Only simple counter-ions decide: those of higher charge are themselves traces.
        if (std::abs(solutes_[j].charge) <= 2) estimable = estimable && median(cation, anion).has_value();
      }
      if (!has_counter_ion || known || estimable) continue;
      outside_[i] = true;
      found_.outside.push_back(i);
      note(Kind::outside_model, {i},
           "no interaction published and none can be estimated; Davies' coefficient at no more than 1 mol/kg "
           "stands in");
    }
  }

  std::optional<std::array<double, 3>> median(std::uint32_t cation, std::uint32_t anion) const {
    return charge_type_median(solutes_[cation].charge, solutes_[anion].charge, charges_in_table());
  }

  void counter(std::uint32_t cation, std::uint32_t anion) {
    const int zc = solutes_[cation].charge, za = solutes_[anion].charge;
    const std::vector<BinaryRow>* rows = binary_rows(cation, anion);
    if (!rows) {
      const auto guess = median(cation, anion);
      if (guess) {
        const bool both_divalent = zc == 2 && za == -2;
        found_.binary.push_back(
            {cation, anion, (*guess)[0], (*guess)[1], (*guess)[2], 0, both_divalent ? 1.4 : 2.0, 12});
      }
      note(Kind::missing, {cation, anion},
           guess ? "not published; median of the published pairs of the same charges taken"
                 : "not published; zero taken");
      return;
    }
    const BinaryRow& row = rows->front();
    bool no_slope = false;
    std::array<double, 4> v{};
    for (std::size_t k = 0; k < 4; ++k)
      v[k] = at_temperature(
          *rows, t_, [k](const BinaryRow& r) { return r.value[k]; },
          [k](const BinaryRow& r) { return r.slope[k]; }, no_slope);
    // Where beta0 or beta1 has a published slope, an empty slope of beta2 or C_phi means "none needed".
    if (rows->size() == 1 && !(std::isnan(row.slope[0]) && std::isnan(row.slope[1]))) no_slope = false;
    found_.binary.push_back({cation, anion, v[0], v[1], v[2], v[3] / (2 * std::sqrt(std::abs(zc * za))),
                             row.alpha1, std::isnan(row.alpha2) ? 0 : row.alpha2});
    if (!is_published(row.quality))
      note(Kind::estimated, {cation, anion}, row.quality + " (" + row.source + ")");
    if (no_slope)
      note(Kind::no_temperature_data, {cation, anion},
           "no temperature dependence published; the value at 25 degC taken");
    if (!std::isnan(row.max_molality))
      note(Kind::above_range, {cation, anion},
           "parameters were fitted up to " + units::significant(row.max_molality, 3) + " mol/kg of the salt",
           row.max_molality);
  }

  double mixing_value(const std::vector<MixingRow>& rows, std::vector<std::uint32_t> who, const char* what) {
    bool no_slope = false;
    const double value = at_temperature(
        rows, t_, [](const MixingRow& r) { return r.value; }, [](const MixingRow& r) { return r.slope; },
        no_slope);
    if (!is_published(rows.front().quality))
      note(Kind::estimated, std::move(who),
           std::string(what) + " " + rows.front().quality + " (" + rows.front().source + ")");
    return value;
  }

  void like(std::uint32_t i, std::uint32_t j) {
    const std::vector<MixingRow>* rows = mixing_rows("theta", name(i), name(j));
    const double theta = rows ? mixing_value(*rows, {i, j}, "theta") : 0;
    if (!rows) note(Kind::missing, {i, j}, "theta not published; zero taken");
    if (theta != 0 || solutes_[i].charge != solutes_[j].charge) found_.like_pairs.push_back({i, j, theta});
  }

  void neutral(std::uint32_t n, std::uint32_t other) {
    const std::vector<MixingRow>* rows = mixing_rows("lambda", name(n), name(other));
    if (rows) {
      const double lambda = mixing_value(*rows, {n, other}, "lambda");
      if (lambda != 0) found_.neutral_pairs.push_back({n, other, lambda});
    } else if (n != other) {
      note(Kind::missing, {n, other}, "lambda not published; zero taken");
    }
  }

  void triplets(std::uint32_t n) {
    // Far fewer triplets are published than could be formed: walk the published ones and look the ions up.
    std::map<std::string, std::uint32_t> position;
    for (std::uint32_t i = 0; i < n; ++i)
      if (!outside_[i]) position[name(i)] = i;
    for (const auto& [key, unused] : tables().mixing) {
      const auto& [set, kind, names] = key;
      if (kind != "psi" && kind != "zeta") continue;
      std::vector<std::uint32_t> who;
      for (const std::string& member : names) {
        const auto found = position.find(member);
        if (found != position.end()) who.push_back(found->second);
      }
      if (who.size() != 3) continue;
      const std::vector<MixingRow>* rows = mixing_rows(kind.c_str(), names[0], names[1], names[2]);
      if (!rows || rows != &unused) continue;  // another set comes first, or this one is not in use
      const double value = mixing_value(*rows, who, kind.c_str());
      if (value != 0) found_.triplets.push_back({who[0], who[1], who[2], value});
    }
  }

  std::span<const Solute> solutes_;
  Celsius t_;
  AcidSet acid_set_;
  std::vector<std::string> order_;
  std::vector<bool> outside_;
  PitzerParameters found_;
};

}  // namespace

PitzerParameters pitzer_parameters(std::span<const Solute> solutes, Celsius t, AcidSet acid_set) {
  return Collector(solutes, t, acid_set).collect();
}

}  // namespace bathwright::activity
