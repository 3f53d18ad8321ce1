// Which solid a recipe means by a name, and what each solid of a system may do.
#pragma once

#include <bathwright/solution/recipe.hpp>
#include <bathwright/speciation/solver.hpp>

namespace bathwright::solution {

/// The place to name in a message about the solids of a recipe.
std::string solids_place(const Recipe& recipe);

/// The solid of that phase name; or, where it is a formula, the one phase of it, preferring phases whose
/// range holds the temperature. Fails on an unknown name (with the nearest) and on a formula that fits
/// several phases (naming them).
Result<const speciation::SolidData*> find_solid(const speciation::Equilibria& equilibria,
                                                const std::string& name, units::Celsius t,
                                                const std::string& where);

/// One rule per solid of the solver's system. Fails as find_solid, and on a solid in excess whose constant
/// does not cover the temperature.
Result<std::vector<speciation::SolidRule>> solid_rules(const Recipe& recipe,
                                                       const speciation::Equilibria& equilibria,
                                                       const speciation::Solver& solver);

}  // namespace bathwright::solution
