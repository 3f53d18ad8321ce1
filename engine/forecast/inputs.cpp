#include "inputs.hpp"

#include <algorithm>

namespace bathwright::forecast {

Draw as_it_stands(const Prepared& p) {
  Draw draw;
  draw.work.assign(p.policy.work.size(), 1);
  for (auto* factors : {&draw.effects, &draw.efficiency, &draw.anode})
    factors->assign(p.compiled.uses.size(), 1);
  draw.level.assign(p.chemistry.components().size(), 1);
  return draw;
}

std::vector<Input> uncertain_inputs(const Prepared& p, double u_level_rel) {
  const Policy& policy = p.policy;
  std::vector<Input> all;
  const auto take = [&](std::string name, double u_rel, std::function<double&(Draw&)> in) {
    if (u_rel > 0) all.push_back({std::move(name), u_rel, std::move(in)});
  };
  take("area", policy.area_m2_per_shift.u_rel, [](Draw& d) -> double& { return d.area; });
  take("drag-out", policy.drag_out_L_per_m2.u_rel, [](Draw& d) -> double& { return d.drag_out; });
  take("drag-in", policy.drag_in_L_per_m2.u_rel, [](Draw& d) -> double& { return d.drag_in; });
  take("evaporation", policy.evaporation_L_per_h.u_rel, [](Draw& d) -> double& { return d.evaporation; });
  take("water", policy.u_water_rel, [](Draw& d) -> double& { return d.water; });
  if (policy.carbon_dioxide)
    take("carbon dioxide", policy.carbon_dioxide->g_per_h.u_rel,
         [](Draw& d) -> double& { return d.carbon_dioxide; });
  for (std::size_t w = 0; w < policy.work.size(); ++w)
    take("work, " + policy.work[w].use, policy.work[w].per_shift.u_rel,
         [w](Draw& d) -> double& { return d.work[w]; });
  for (std::size_t u = 0; u < p.compiled.uses.size(); ++u) {
    const bool at_work =
        std::ranges::count(p.compiled.work, u) + std::ranges::count(p.compiled.always, u) > 0;
    if (!at_work) continue;
    const CompiledUse& use = p.compiled.uses[u];
    const std::string& id = use.use->id;
    if (!use.g_per_unit.empty())
      take("effects of " + id, use.effects_u_rel, [u](Draw& d) -> double& { return d.effects[u]; });
    if (use.mol_per_unit == 0 || !use.by_current) continue;
    take("cathode efficiency of " + id, use.cathode.u_rel,
         [u](Draw& d) -> double& { return d.efficiency[u]; });
    if (use.anode.value > 0)
      take("anode efficiency of " + id, use.anode.u_rel, [u](Draw& d) -> double& { return d.anode[u]; });
  }
  // H^+ and what is found by charge follow from the others.
  for (std::size_t i = 1; i < p.chemistry.components().size(); ++i)
    if (i != p.chemistry.found_by_charge())
      take(p.chemistry.components()[i] + " at the start", u_level_rel,
           [i](Draw& d) -> double& { return d.level[i]; });
  return all;
}

}  // namespace bathwright::forecast
