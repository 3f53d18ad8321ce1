// What the tables know of how the built-in constants move with temperature: published functions of log10 K
// and heat capacities of substances. Not for: constants of a bath type, which state their own.
#pragma once

#include <bathwright/activity/model.hpp>
#include <bathwright/speciation/constant.hpp>
#include <bathwright/speciation/reaction.hpp>
#include <map>
#include <string>
#include <utility>

namespace bathwright::speciation {

/// Standard uncertainties of dH, kJ/mol, and dCp, J/(mol K).
///
/// dH: formation data and slopes of published functions agree within half a kJ/mol where the heat capacity is
/// known too (functions against measured pK to 60 degC: 0.009 in log10 K, engine/data/README.md); a dH alone
/// is mostly a mean over some range of temperature. One nobody published is as large as those of the tables:
/// 68 % of 409 stay below 48 kJ/mol.
///
/// dCp: published Cp of one dissolved substance differ by 10 to 20, near 0 degC by more: 20 for each, times
/// its coefficient, in root of squares. One nobody published is as large as those of the tables: 68 % of 46
/// stay below 231.
namespace doubt {
inline constexpr double dH_with_dCp = 0.5, dH_alone = 1, dH_rough = 5, dH_unknown = 48;
inline constexpr double dCp_of_one = 20, dCp_unknown = 231;
}  // namespace doubt

class TemperatureData {
 public:
  /// The functions of one convention, and all heat capacities.
  explicit TemperatureData(activity::Convention convention);

  /// Completes a constant whose value and dH at 25 degC a row gives:
  ///   a published function, where there is one for `row`, takes the place of dH and dCp;
  ///   otherwise, where the row has dH but no dCp, the heat capacities of what takes part add up to it, if
  ///   all are known.
  /// And with what is left in doubt, one standard uncertainty of dH and dCp (rules below).
  ///   row          name of the species or solid; a gas with "(g)"
  ///   states_dCp   whether the row has a dCp
  ///   rough_dH     whether the row calls its dH an estimate or approximate
  void complete(Constant& constant, const std::string& row, const std::string& set, bool states_dCp,
                bool rough_dH, const Reaction& reaction) const;

 private:
  /// Adds to dCp; false, and no change, where a heat capacity is not known.
  bool add_heat_capacities(Constant& constant, const Reaction& reaction) const;

  struct HeatCapacity {
    double constant = 0;  ///< J/(mol K)
    HeatCapacityCurve curve;
  };
  std::map<std::pair<std::string, std::string>, ReactionAt25C> functions_;  ///< by row and set
  std::map<std::string, HeatCapacity, std::less<>> heat_capacity_;
};

}  // namespace bathwright::speciation
