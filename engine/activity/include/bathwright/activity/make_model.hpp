// Builds an activity model for a list of solutes at a temperature from the built-in constants.
#pragma once

#include <bathwright/activity/interaction.hpp>
#include <bathwright/activity/model.hpp>
#include <bathwright/base/result.hpp>
#include <bathwright/units/quantity.hpp>
#include <map>
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

/// Which regressed set serves zinc (engine/data/README.md): `dilute` is the published zinc chloride to 1.2
/// mol/kg, its complexes inside the fit, and the zincate of dilute alkali; `chloride` has one explicit
/// complex, ZnCl4^2-, for strong chloride; `alkaline` is zincate in more than 0.3 mol/kg alkali. Each comes
/// with a constant of its own: speciation::Equilibria::built_in.
enum class ZincSet { dilute, chloride, alkaline };

/// The sets that exclude each other, one choice of each kind.
struct ParameterSets {
  AcidSet acid = AcidSet::sulfate;
  ZincSet zinc = ZincSet::dilute;
  bool operator==(const ParameterSets&) const = default;
};

/// The sets for a solution by its analytical totals, mol/kg, H^+ among them (negative: net alkali).
[[nodiscard]] ParameterSets parameter_sets_for(const std::map<std::string, double>& total_molality);

/// The model, prepared for the solutes in this order. t: 0-100 degC.
///   stated  take the place of what the tables say, or stand where they say nothing
/// Fails on more than max_solutes solutes, a temperature outside the range or a stated parameter of another
/// model.
Result<std::unique_ptr<const ActivityModel>> make_model(ModelKind kind, std::span<const Solute> solutes,
                                                        units::Celsius t, ParameterSets sets = {},
                                                        std::span<const Interaction> stated = {});

}  // namespace bathwright::activity
