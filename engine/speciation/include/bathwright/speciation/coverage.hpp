// Whether an answer may be believed: which interactions that matter in it are missing, estimated or out of
// their range.
#pragma once

#include <bathwright/speciation/solver.hpp>

namespace bathwright::speciation {

struct Coverage {
  bool valid = true;                  ///< nothing below makes the answer more than indicative
  std::vector<std::string> missing;   ///< interactions nobody published, between solutes that are not traces
  std::vector<std::string> warnings;  ///< estimates in use, ranges left, constants without temperature data
};

/// The molality of the salt that a cation and an anion could make up together, whichever of them is short.
///   pair  positions in ChemicalSystem::species()
[[nodiscard]] double salt_molality(const Solver& solver, const Equilibrium& answer,
                                   const std::vector<std::uint32_t>& pair);

/// Reads the model's notes in the light of the answer.
///   a note counts when all its solutes are above 1e-3 mol/kg
///   not valid: a cation-anion pair that is not published, both above 0.01 mol/kg; more of a salt than its
///   parameters were fitted to; an ionic strength beyond the model as such; a Gibbs energy that does not
///   curve upward; a stand-in ion above 1e-3 mol/kg; no temperature data more than 10 degrees away from 25
///   degC, both above 0.01 mol/kg
[[nodiscard]] Coverage coverage(const Solver& solver, const Equilibrium& answer);

}  // namespace bathwright::speciation
