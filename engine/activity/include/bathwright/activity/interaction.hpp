// A parameter of an activity model that is stated beside the tables: found from somebody's measurements, or
// tried out. It is a value that goes with a set of equilibria (speciation/equilibria.hpp) into make_model.
// Not for: the published parameters, which stand in engine/data/activity.
#pragma once

#include <bathwright/activity/model.hpp>
#include <bathwright/base/result.hpp>

namespace bathwright::activity {

/// Of Pitzer's model but for the last, of SIT; as in the tables of engine/data/activity, with their units:
/// kg/mol, and kg2/mol2 for cphi, psi, zeta and mu.
enum class InteractionParameter : std::uint8_t {
  beta0,
  beta1,
  beta2,
  cphi,    ///< C_phi; of one cation and one anion, like the betas
  theta,   ///< of two cations or two anions
  lambda,  ///< of a neutral solute and any other
  psi,     ///< of two like ions and one of the other sign
  zeta,    ///< of a neutral solute, a cation and an anion
  mu,      ///< of three neutral solutes
  epsilon  ///< SIT: of one cation and one anion
};
inline constexpr std::size_t interaction_parameters = 10;

[[nodiscard]] std::string_view name(InteractionParameter parameter);
[[nodiscard]] ModelKind model_with(InteractionParameter parameter);

struct Interaction {
  InteractionParameter parameter = InteractionParameter::beta0;
  std::vector<std::string> solutes;  ///< in any order
  /// At 25 degC, where it takes the place of the table's in every set. The change with temperature that the
  /// tables publish stays.
  double value = 0;
  std::string source;  ///< "regressed from ..."; shown with every result it matters to
  std::string where;   ///< file:line, for messages
};

/// "Cu^2+ - Na^+"
[[nodiscard]] std::string solutes_of(const Interaction& interaction);
/// "theta of Cu^2+ - Na^+"
[[nodiscard]] std::string text(const Interaction& interaction);

/// The same parameter of the same solutes.
[[nodiscard]] bool same_place(const Interaction& a, const Interaction& b);

/// Whether such a parameter exists: as many solutes, of such charges.
Outcome check(const Interaction& interaction);

/// What the model takes without it, at 25 degC: published, estimated or zero. Of an interaction that passes
/// check().
[[nodiscard]] double value_in_tables(const Interaction& interaction);

}  // namespace bathwright::activity
