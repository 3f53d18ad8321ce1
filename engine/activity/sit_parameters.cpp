#include <algorithm>
#include <bathwright/data/tables.hpp>
#include <cmath>
#include <map>
#include <numbers>
#include <string>

#include "sit_model.hpp"

namespace bathwright::activity {
namespace {

struct Published {
  SitCoefficient epsilon;
  double uncertainty;  ///< kg/mol; NaN where none is stated
};
using PairName = std::pair<std::string, std::string>;

const std::map<PairName, Published>& published() {
  static const auto loaded = [] {
    const data::CsvTable table =
        data::built_in_table("activity/sit.csv", {"epsilon", "uncertainty", "epsilon1", "epsilon2"});
    std::map<PairName, Published> found;
    for (std::size_t i = 0; i < table.size(); ++i) {
      const data::CsvRow row = table[i];
      const bool varies = !std::isnan(row.number("epsilon1"));
      found[{std::string(row["cation"]), std::string(row["anion"])}] = {
          varies ? SitCoefficient{row.number("epsilon1"), row.number("epsilon2")}
                 : SitCoefficient{row.number("epsilon"), 0},
          row.number("uncertainty")};
    }
    return found;
  }();
  return loaded;
}

/// How epsilon may move with temperature, kg/(mol K): coefficients of salts move by 0.001 to 0.005 (Grenthe,
/// Plyasunov & Spahiu 1997, from memory).
constexpr double sit_drift_per_K = 0.002;

/// The rules of sit_model.hpp.
struct Estimate {
  double epsilon, uncertainty;  // kg/mol
};
Estimate estimated(int cation_charge, int anion_charge) {
  if (cation_charge == 1) return {0.05 * anion_charge, 0.1};
  if (anion_charge == -1) return {-0.05 + 0.1 * cation_charge, 0.1};
  return {0, 0.2};
}

}  // namespace

SitParameters sit_parameters(std::span<const Solute> solutes, units::Celsius t,
                             std::span<const Interaction> stated) {
  using Kind = InteractionNote::Kind;
  constexpr double noticed_K = 5;
  SitParameters found;
  const auto note = [&](Kind kind, std::vector<std::uint32_t> who, std::string text, double u_log10) {
    InteractionNote added;
    added.kind = kind;
    added.solutes = std::move(who);
    added.text = std::move(text);
    added.u_ln_gamma = u_log10 * std::numbers::ln10;
    found.notes.push_back(std::move(added));
  };
  constexpr double u_neutral = 0.1;  // kg/mol
  for (std::uint32_t i = 0; i < solutes.size(); ++i)
    for (std::uint32_t j = 0; j < solutes.size(); ++j)
      if (solutes[i].charge == 0 && solutes[j].charge > 0)
        note(Kind::estimated, {i, j},
             solutes[i].name + " in salts of " + solutes[j].name + ": taken as ideal", u_neutral);
  for (std::uint32_t i = 0; i < solutes.size(); ++i)
    for (std::uint32_t j = 0; j < solutes.size(); ++j) {
      const Solute &cation = solutes[i], &anion = solutes[j];
      if (cation.charge <= 0 || anion.charge >= 0) continue;
      const std::string names = cation.name + " - " + anion.name;
      const Interaction here{InteractionParameter::epsilon, {cation.name, anion.name}, 0, {}, {}};
      const auto own = std::find_if(stated.begin(), stated.end(),
                                    [&](const Interaction& one) { return same_place(one, here); });
      if (own != stated.end()) {
        found.pairs.push_back({i, j, {own->value, 0}});
        note(Kind::stated, {i, j}, names + ": epsilon " + own->source,
             std::abs(t.v - 25) > noticed_K ? std::abs(t.v - 25) * sit_drift_per_K : 0);
        continue;
      }
      if (const auto row = published().find({cation.name, anion.name}); row != published().end()) {
        found.pairs.push_back({i, j, row->second.epsilon});
        if (std::abs(t.v - 25) > noticed_K)
          note(Kind::no_temperature_data, {i, j}, names + ": epsilon of 25 degC taken",
               std::abs(t.v - 25) * sit_drift_per_K);
        continue;
      }
      const Estimate guess = estimated(cation.charge, anion.charge);
      found.pairs.push_back({i, j, {guess.epsilon, 0}});
      note(Kind::estimated, {i, j}, names + ": no epsilon published; estimated from the charges",
           guess.uncertainty);
    }
  return found;
}

}  // namespace bathwright::activity
