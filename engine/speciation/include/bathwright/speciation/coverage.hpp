// Whether an answer may be believed: which interactions that matter in it are missing, estimated or out of
// their range.
#pragma once

#include <bathwright/speciation/solver.hpp>

namespace bathwright::speciation {

struct Coverage {
  bool valid = true;                  ///< nothing below makes the answer more than indicative
  std::vector<std::string> missing;   ///< interactions nobody published, between solutes that are not traces
  std::vector<std::string> warnings;  ///< estimates in use, ranges left, constants without temperature data
  double u_ln_gamma = 0;              ///< the largest of ln_gamma_uncertainty among the species that matter
};

/// From here on a species matters: the largest part it holds of any component. (The coefficient of an ion
/// that is a trace beside its complexes or its acid changes nothing: its activity is set by theirs.)
inline constexpr double least_share = 0.05;
/// A component below this, mol/kg, is a trace that nobody asks for; acid and alkali below this are set by
/// other traces, such as the carbon dioxide of the air, and the pH of such a solution is not promised.
inline constexpr double traces_end = 1e-9, acid_traces_end = 0.01;
/// Standard uncertainty of ln gamma beyond which an answer is not valid: 15 % in a coefficient, 0.07 in pH.
inline constexpr double most_u_ln_gamma = 0.15;

/// Per species: the largest part it holds of any component that is more than a trace.
[[nodiscard]] std::vector<double> largest_share(const Solver& solver, const Equilibrium& answer);

/// Per species: standard uncertainty of ln gamma from the model's notes, what is missing or estimated, taken
/// as independent (activity::InteractionNote::u_ln_gamma).
[[nodiscard]] std::vector<double> ln_gamma_uncertainty(const Solver& solver, const Equilibrium& answer);

/// The molality of the salt that a cation and an anion could make up together, whichever of them is short.
///   pair  positions in ChemicalSystem::species()
[[nodiscard]] double salt_molality(const Solver& solver, const Equilibrium& answer,
                                   const std::vector<std::uint32_t>& pair);

/// Reads the model's notes in the light of the answer.
///   told: a note that moves ln gamma of a species that matters by 0.01 or more
///   not valid: the notes together make ln gamma of a species that matters more uncertain than
///   most_u_ln_gamma (a warning says which, and by what); more of a salt, ligand, acid or alkali than the
///   parameters were fitted to; a stand-in ion that matters above 0.5 mol/kg ionic strength; an ionic
///   strength beyond the model as such; a Gibbs energy that does not curve upward
[[nodiscard]] Coverage coverage(const Solver& solver, const Equilibrium& answer);

}  // namespace bathwright::speciation
