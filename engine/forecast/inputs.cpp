#include "inputs.hpp"

#include <Eigen/Cholesky>
#include <algorithm>

namespace bathwright::forecast {

Result<Eigen::MatrixXd> correlation_root(const Policy& policy, const std::vector<Input>& inputs) {
  const auto n = static_cast<Eigen::Index>(inputs.size());
  Eigen::MatrixXd all = Eigen::MatrixXd::Identity(n, n);
  for (const Correlation& of : policy.correlations) {
    Eigen::Index at[2];
    for (std::size_t side = 0; side < 2; ++side) {
      const std::string& name = side == 0 ? of.one : of.other;
      const auto found = std::ranges::find(inputs, name, &Input::name);
      if (found == inputs.end()) {
        std::string names;
        for (const Input& input : inputs) names += (names.empty() ? "one of " : "; ") + input.name;
        return Problem{Fault::bad_input, "correlated", "'" + name + "' is not uncertain here", names, ""};
      }
      at[side] = found - inputs.begin();
    }
    all(at[0], at[1]) = all(at[1], at[0]) = of.correlation;
  }
  const Eigen::LLT<Eigen::MatrixXd> root(all);
  if (root.info() != Eigen::Success)
    return Problem{Fault::bad_input, "correlated", "correlations that contradict each other", "",
                   "Take one out, or bring them nearer to 0."};
  return Eigen::MatrixXd(root.matrixL());
}

Draw as_it_stands(const Prepared& p) {
  Draw draw;
  draw.work.assign(p.policy.work.size(), 1);
  for (auto* factors : {&draw.effects, &draw.efficiency, &draw.anode})
    factors->assign(p.compiled.uses.size(), 1);
  draw.level.assign(p.levels.size(), 1);
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
  for (std::size_t l = 0; l < p.levels.size(); ++l)
    take(p.chemistry.type().quantities[p.levels[l]].label + " at the start", u_level_rel,
         [l](Draw& d) -> double& { return d.level[l]; });
  return all;
}

}  // namespace bathwright::forecast
