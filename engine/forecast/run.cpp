#include <Eigen/QR>
#include <algorithm>
#include <cmath>
#include <map>

#include "block.hpp"
#include "inputs.hpp"
#include "ledger.hpp"

namespace bathwright::forecast {

std::string_view name(Cause cause) {
  switch (cause) {
    case Cause::window:
      return "window";
    case Cause::by_product:
      return "by-product";
    case Cause::solid_at_work:
      return "solubility at work";
    case Cause::solid_at_rest:
      return "solubility at rest";
  }
  return "";
}

namespace {

std::string why(Beyond beyond) {
  switch (beyond) {
    case Beyond::curvature:
      return "the activity model is outside its range: its Gibbs energy no longer curves upward";
    case Beyond::ionic_strength:
      return "the ionic strength is more than twice what the constants were made for";
    case Beyond::solid:
      return "a solid that forms readily would be more than a hundred times beyond its saturation";
    case Beyond::no:
      break;
  }
  return "";
}

}  // namespace

const Prepared::Metal* counted_metal(const Prepared& p) {
  const auto at = std::ranges::find_if(p.metals, [](const auto& metal) { return metal.at_aim_mol > 0; });
  return at == p.metals.end() ? nullptr : &*at;
}

Result<std::shared_ptr<Prepared>> prepare(const bath::Tank& tank, const bath::Chemistry& chemistry,
                                          const Policy& policy) {
  auto prepared = std::make_shared<Prepared>(
      Prepared{tank, chemistry, policy, {}, Vessels::of(policy), {}, {}, {}, {}, {}, {}, {}});
  if (prepared->vessels.count() > most_vessels)
    return Problem{Fault::bad_input, "rinse", std::to_string(prepared->vessels.stages.size()) + " stages",
                   std::to_string(most_vessels - 1) + " at most", "Leave the cleanest out."};
  auto compiled = compile(prepared->tank, prepared->chemistry, prepared->policy);
  if (!compiled) return compiled.problems();
  prepared->compiled = *std::move(compiled);
  const bath::BathType& type = chemistry.type();
  const speciation::ChemicalSystem& system = chemistry.working().system();
  for (const bath::WatchedSolid& solid : type.solids) prepared->watched.push_back(*system.solid(solid.name));
  for (const auto& species : system.species()) prepared->species_names.push_back(species.name);
  for (const auto& solid : system.solids()) prepared->solid_names.push_back(solid.name);
  for (std::size_t q = 0; q < type.quantities.size(); ++q)
    if (!type.quantities[q].salt_view) prepared->levels.push_back(q);
  Eigen::MatrixXd counts = Eigen::MatrixXd::Zero(static_cast<Eigen::Index>(prepared->levels.size()),
                                                 static_cast<Eigen::Index>(chemistry.components().size()));
  for (std::size_t row = 0; row < prepared->levels.size(); ++row)
    for (const auto& [component, count] : type.quantities[prepared->levels[row]].counts) {
      const std::size_t at = *system.component(component);
      if (at == chemistry.found_by_charge()) continue;  // follows from the others
      counts(static_cast<Eigen::Index>(row), static_cast<Eigen::Index>(at)) = count;
    }
  prepared->mol_per_level_mol = counts.completeOrthogonalDecomposition().pseudoInverse();
  constexpr double indicative_to = 2;  // times what is trusted: common practice with such models
  prepared->most_ionic_strength = indicative_to * (std::isnan(type.max_ionic_strength)
                                                       ? chemistry.working().model().trusted_ionic_strength()
                                                       : type.max_ionic_strength);
  std::map<std::string, double> aims;
  std::optional<double> pH;
  for (const bath::Aim& aim : tank.aims)
    if (aim.quantity == "pH")
      pH = aim.aim;
    else
      aims[aim.quantity] = aim.aim;
  // Aims may be of a salt of the metal; a tank whose aims do not tell its whole state has no turnovers.
  const auto at_aims = chemistry.state_from(aims, pH, tank.working_volume, tank.temperature);
  for (std::size_t q = 0; q < type.quantities.size(); ++q) {
    const bath::Quantity& metal = type.quantities[q];
    if (std::ranges::none_of(type.uses, [&](const bath::Use& use) { return use.deposits == metal.id; }))
      continue;
    const bath::Aim* aim = tank.aim(metal.id);
    const double at_aim_mol = at_aims ? chemistry.quantity_mol(metal, at_aims->component_mol)
                              : aim   ? aim->aim * tank.working_volume.v / metal.formula.molar_mass().v
                                      : 0;
    prepared->metals.push_back({q, at_aim_mol});
  }
  for (const Replenishment& rule : policy.replenishment)
    if (rule.by == Replenishment::By::turnover && !counted_metal(*prepared))
      return Problem{Fault::bad_input, "policy",
                     "'" + rule.stock + "' goes by metal turnovers, and " + tank.name +
                         " plates no metal that its aims tell of",
                     "another rule", ""};
  if (const auto root = correlation_root(policy, uncertain_inputs(*prepared, 0)); !root)
    return root.problems();
  return prepared;
}

Result<Forecast> Forecast::prepare(const bath::Tank& tank, const bath::Chemistry& chemistry,
                                   const Policy& policy) {
  auto prepared = forecast::prepare(tank, chemistry, policy);
  if (!prepared) return prepared.problems();
  Forecast forecast;
  forecast.prepared_ = *std::move(prepared);
  return forecast;
}

std::vector<std::string> Forecast::uncertain() const {
  std::vector<std::string> names;
  for (const Input& input : uncertain_inputs(*prepared_, 0)) names.push_back(input.name);
  return names;
}

const Policy& Forecast::policy() const { return prepared_->policy; }
const std::vector<std::string>& Forecast::notes() const { return prepared_->compiled.notes; }
const bath::Chemistry& Forecast::chemistry() const { return prepared_->chemistry; }

Result<Run> Forecast::run(const bath::TankState& start, const Draw* draw) const {
  const Prepared& p = *prepared_;
  Run out;
  Block block(p, start, {draw ? *draw : Draw{}});
  block.run(p.policy.horizon_days, [&](std::size_t, Day day) { out.days.push_back(std::move(day)); });
  const Path& path = block.path(0);
  out.indicative = block.indicative();
  if (const auto first = std::ranges::find_if(out.days, [](const Day& d) { return d.beyond != Beyond::no; });
      first != out.days.end())
    out.beyond = FromDay{first->day, why(first->beyond)};
  if (out.days.empty()) return path.why_ended();
  out.ended = path.why_ended();
  out.end = path.state();
  out.balance = path.balance();
  out.ledger = ledger_of(p, path);
  out.rinsed = rinsed_of(p, path);
  return out;
}

}  // namespace bathwright::forecast
