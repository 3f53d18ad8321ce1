// Builds an activity model for a list of solutes at a temperature from the built-in constants.
#pragma once

#include <bathwright/activity/model.hpp>
#include <bathwright/base/result.hpp>
#include <bathwright/units/quantity.hpp>
#include <memory>

namespace bathwright::activity {

/// Which regressed set serves mixtures of a metal sulfate and sulfuric acid (engine/data/README.md):
/// `sulfate` up to 4.5 mol/kg acid with little chloride, `chloride` when chloride is more than about a third
/// of the sulfate. The two must never be mixed.
enum class AcidSet { sulfate, chloride };

/// The set for a solution by its totals (any unit, the same for both): the rule above.
[[nodiscard]] constexpr AcidSet acid_set_for(double chloride, double sulfate) {
  return chloride > sulfate / 3 ? AcidSet::chloride : AcidSet::sulfate;
}

/// The model, prepared for the solutes in this order. t: 0-100 degC.
/// Fails on more than max_solutes solutes or a temperature outside the range.
Result<std::unique_ptr<const ActivityModel>> make_model(ModelKind kind, std::span<const Solute> solutes,
                                                        units::Celsius t,
                                                        AcidSet acid_set = AcidSet::sulfate);

}  // namespace bathwright::activity
