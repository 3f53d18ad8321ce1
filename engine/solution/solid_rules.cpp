#include "solid_rules.hpp"

#include <algorithm>
#include <bathwright/base/nearest.hpp>
#include <bathwright/units/show.hpp>

namespace bathwright::solution {

using speciation::SolidData;
using speciation::SolidRule;

namespace {

std::string range_text(double min_C, double max_C) {
  return units::significant(min_C) + " to " + units::significant(max_C) + " degC";
}

bool holds(const SolidData& solid, units::Celsius t) { return t.v >= solid.min_C && t.v <= solid.max_C; }

}  // namespace

std::string solids_place(const Recipe& recipe) { return recipe.file + ": solids"; }

Result<const SolidData*> find_solid(const speciation::Equilibria& equilibria, const std::string& name,
                                    units::Celsius t, const std::string& where) {
  std::vector<const SolidData*> fits;
  std::vector<std::string> names;
  for (const SolidData& solid : equilibria.solids()) {
    names.push_back(solid.name);
    if (solid.name == name) return &solid;
    if (solid.formula == name) fits.push_back(&solid);
  }
  if (fits.empty()) {
    const auto close = nearest(name, names);
    return Problem{Fault::bad_input, where, name + " is not a solid of the tables",
                   "the name or formula of a solid", close ? "Did you mean " + *close + "?" : ""};
  }
  if (fits.size() > 1 && std::count_if(fits.begin(), fits.end(), [&](auto* s) { return holds(*s, t); }) == 1)
    return *std::find_if(fits.begin(), fits.end(), [&](auto* s) { return holds(*s, t); });
  if (fits.size() == 1) return fits.front();
  std::string phases;
  for (const SolidData* solid : fits)
    phases += (phases.empty() ? "\"" : ", \"") + solid->name + "\" (" +
              range_text(solid->min_C, solid->max_C) + ")";
  return Problem{Fault::bad_input, where, name + " fits several solids", "one of " + phases,
                 "Write the name of the one you mean."};
}

Result<std::vector<SolidRule>> solid_rules(const Recipe& recipe, const speciation::Equilibria& equilibria,
                                           const speciation::Solver& solver) {
  const auto& solids = solver.system().solids();
  std::vector<SolidRule> rules(solids.size(), SolidRule::report_only);
  Problems problems;
  if (recipe.may_form == MayForm::all)
    for (std::size_t k = 0; k < solids.size(); ++k)
      if (!solids[k].slow && solver.covers(k)) rules[k] = SolidRule::may_precipitate;
  const auto set = [&](const std::string& name, SolidRule rule) {
    const auto solid = find_solid(equilibria, name, recipe.temperature, solids_place(recipe));
    if (!solid) {
      problems.insert(problems.end(), solid.problems().begin(), solid.problems().end());
      return;
    }
    // An allowed solid whose ions are not in the solution cannot form, and is no mistake.
    const auto k = solver.system().solid((*solid)->name);
    if (!k) return;
    if (rule == SolidRule::in_excess && !solver.covers(*k)) {
      problems.push_back(
          {Fault::out_of_range, solids_place(recipe),
           "the constant of " + (*solid)->name + " does not cover " + units::show(recipe.temperature),
           range_text((*solid)->min_C, (*solid)->max_C), ""});
      return;
    }
    rules[*k] = rule;
  };
  if (recipe.may_form == MayForm::listed)
    for (const std::string& name : recipe.allowed) set(name, SolidRule::may_precipitate);
  for (const std::string& name : recipe.excess) set(name, SolidRule::in_excess);
  if (!problems.empty()) return problems;
  return rules;
}

}  // namespace bathwright::solution
