#include <algorithm>
#include <bathwright/activity/model.hpp>
#include <bathwright/base/nearest.hpp>
#include <bathwright/speciation/system.hpp>

namespace bathwright::speciation {
namespace {

template <class Rows>
std::optional<std::size_t> position(const Rows& rows, std::string_view name) {
  const auto found =
      std::find_if(rows.begin(), rows.end(), [&](const auto& row) { return row.name == name; });
  if (found == rows.end()) return std::nullopt;
  return static_cast<std::size_t>(found - rows.begin());
}

}  // namespace

Result<ChemicalSystem> ChemicalSystem::make(const Equilibria& equilibria,
                                            const std::vector<std::string>& components) {
  ChemicalSystem system;
  system.convention_ = equilibria.convention();
  system.zinc_ = equilibria.zinc_set();
  system.interactions_ = equilibria.interactions();
  system.components_.emplace_back("H^+");
  for (const std::string& name : components) {
    const auto& basis = equilibria.basis();
    if (std::find(basis.begin(), basis.end(), name) == basis.end()) {
      const auto close = nearest(name, basis);
      return Problem{Fault::bad_input, name, "is not a component the engine knows", "a basis species",
                     close ? "Did you mean " + *close + "?" : ""};
    }
    if (!system.component(name)) system.components_.push_back(name);
  }
  if (system.components_.size() > static_cast<std::size_t>(max_components))
    return Problem{Fault::out_of_range, "", std::to_string(system.components_.size()) + " components",
                   "at most " + std::to_string(max_components), "Leave out what is not in the tank."};
  const auto dense = [&](const Composition& made_of) -> std::optional<std::vector<double>> {
    std::vector<double> row(system.components_.size(), 0.0);
    for (const auto& [name, count] : made_of) {
      const auto at = system.component(name);
      if (!at) return std::nullopt;
      row[*at] = count;
    }
    return row;
  };
  for (const std::string& name : system.components_)
    system.species_.push_back({name, activity::charge_in_name(name), *dense({{name, 1}}), 0, {}, {}});
  for (const auto& [name, data] : equilibria.species()) {
    if (system.component(name)) continue;
    if (auto row = dense(data.made_of))
      system.species_.push_back(
          {name, activity::charge_in_name(name), *std::move(row), data.water, data.formation, data.sources});
  }
  if (system.species_.size() > activity::max_solutes)
    return Problem{Fault::out_of_range, "", std::to_string(system.species_.size()) + " dissolved species",
                   "at most " + std::to_string(activity::max_solutes),
                   "Leave out components that do not matter."};
  for (const SolidData& solid : equilibria.solids())
    if (auto row = dense(solid.gives))
      system.solids_.push_back(
          {{solid.name, 0, *std::move(row), solid.water, solid.dissolution, solid.sources},
           solid.formula,
           solid.min_C,
           solid.max_C,
           solid.slow,
           solid.note});
  for (const GasData& gas : equilibria.gases())
    if (auto row = dense(gas.gives))
      system.gases_.push_back({gas.name, 0, *std::move(row), gas.water, gas.dissolution, gas.sources});
  return system;
}

std::optional<std::size_t> ChemicalSystem::component(std::string_view name) const {
  const auto found = std::find(components_.begin(), components_.end(), name);
  if (found == components_.end()) return std::nullopt;
  return static_cast<std::size_t>(found - components_.begin());
}
std::optional<std::size_t> ChemicalSystem::species_index(std::string_view name) const {
  return position(species_, name);
}
std::optional<std::size_t> ChemicalSystem::solid(std::string_view name) const {
  return position(solids_, name);
}
std::optional<std::size_t> ChemicalSystem::gas(std::string_view name) const { return position(gases_, name); }

}  // namespace bathwright::speciation
