#include <bathwright/speciation/session.hpp>
#include <numbers>

namespace bathwright::speciation {

double Equilibrium::pH() const { return -ln_activity[0] / std::numbers::ln10; }

Result<Solver> Solver::prepare(std::shared_ptr<const ChemicalSystem> system, activity::ModelKind kind,
                               units::Celsius t, activity::AcidSet acid_set) {
  if (system->convention() != activity::convention(kind))
    return Problem{
        Fault::inconsistent_data, std::string(activity::name(kind)),
        "these equilibria belong to the other convention: an attraction would be counted twice or not "
        "at all",
        "Equilibria::built_in of the convention of the model", ""};
  std::vector<activity::Solute> solutes;
  for (const SystemSpecies& species : system->species()) solutes.push_back({species.name, species.charge});
  auto model = activity::make_model(kind, solutes, t, {acid_set, system->zinc_set()}, system->interactions());
  if (!model) return model.problems();
  Solver solver;
  solver.system_ = std::move(system);
  solver.model_ = *std::move(model);
  solver.t_ = t;
  solver.acid_set_ = acid_set;
  const auto ln_K = [&](const SystemSpecies& row) { return row.constant.log10_at(t) * std::numbers::ln10; };
  for (const SystemSpecies& species : solver.system_->species())
    solver.ln_K_.species.push_back(ln_K(species));
  for (const SystemSolid& solid : solver.system_->solids()) solver.ln_K_.solids.push_back(ln_K(solid));
  for (const SystemSpecies& gas : solver.system_->gases()) solver.ln_K_.gases.push_back(ln_K(gas));
  return solver;
}

Result<Solver> Solver::at_temperature(units::Celsius t) const {
  return prepare(system_, model_->kind(), t, acid_set_);
}

bool Solver::covers(std::size_t solid) const {
  constexpr double margin_C = 1;
  const SystemSolid& row = system_->solids()[solid];
  // A constant known at one temperature only is still the best guess elsewhere; the user is told.
  if (row.min_C == row.max_C) return true;
  return t_.v >= row.min_C - margin_C && t_.v <= row.max_C + margin_C;
}

Result<Equilibrium> Solver::solve(const Task& task) const {
  Equilibrium answer;
  if (const Outcome solved = Session(*this).solve(task, answer); !solved) return solved.problems();
  return answer;
}

}  // namespace bathwright::speciation
