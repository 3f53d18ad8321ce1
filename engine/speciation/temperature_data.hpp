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

class TemperatureData {
 public:
  /// The functions of one convention, and all heat capacities.
  explicit TemperatureData(activity::Convention convention);

  /// Completes a constant whose value and dH at 25 degC a row gives:
  ///   a published function, where there is one for `row`, takes the place of dH and dCp;
  ///   otherwise, where the row has dH but no dCp, the heat capacities of what takes part add up to it, if
  ///   all are known. row          name of the species or solid; a gas with "(g)" states_dCp   whether the
  ///   row has a dCp
  void complete(Constant& constant, const std::string& row, const std::string& set, bool states_dCp,
                const Reaction& reaction) const;

 private:
  struct HeatCapacity {
    double constant = 0;  ///< J/(mol K)
    HeatCapacityCurve curve;
  };
  std::map<std::pair<std::string, std::string>, ReactionAt25C> functions_;  ///< by row and set
  std::map<std::string, HeatCapacity, std::less<>> heat_capacity_;
};

}  // namespace bathwright::speciation
