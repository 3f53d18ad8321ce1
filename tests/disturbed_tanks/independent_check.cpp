#include "independent_check.hpp"

#include <bathwright/matter/component_density.hpp>
#include <bathwright/speciation/components.hpp>
#include <cmath>

namespace disturbed {

using namespace bathwright;

namespace {

using Elements = std::map<std::string, double>;

void add_atoms(Elements& elements, const matter::Formula& formula, double mol) {
  for (const matter::Atom& atom : formula.atoms()) elements[atom.element] += mol * atom.count;
}

/// Largest difference of two sets of elements, each relative to what there is of it.
double largest_defect(const Elements& poured, const Elements& held) {
  double largest = 0;
  for (const auto& [element, mol] : poured) {
    const auto at = held.find(element);
    const double there = at == held.end() ? 0 : at->second;
    largest = std::max(largest, std::abs(there - mol) / std::max(std::abs(mol), 1e-6));
  }
  return largest;
}

}  // namespace

Result<Ending> follow(const bath::Tank& tank, const bath::BathType& type, const bath::TankState& start,
                      const dosing::Plan& plan) {
  auto equilibria = speciation::Equilibria::built_in(type.convention, type.sets.zinc)
                        .with(type.own_species, type.own_solids);
  if (!equilibria) return equilibria.problems();
  std::vector<std::string> names;
  for (const bath::Component& component : type.components) names.push_back(component.species);
  auto made = speciation::ChemicalSystem::make(*equilibria, names);
  if (!made) return made.problems();
  const auto system = std::make_shared<const speciation::ChemicalSystem>(*std::move(made));
  const auto density = matter::ComponentDensity::prepare(system->components());
  if (!density) return density.problems();

  const std::vector<std::string>& components = system->components();
  const double volume_at_start = density->volume_L(start.component_mol, start.water_kg, start.temperature);
  const double kept = 1 - plan.decant_L / volume_at_start;
  speciation::Task task;
  task.component_mol = start.component_mol;
  for (double& mol : task.component_mol) mol *= kept;
  task.water_kg = kept * start.water_kg;

  const double grams_of_water = matter::Formula::parse("H2O")->molar_mass().v;
  const auto elements_of = [&](const speciation::Task& held) {
    Elements elements;
    for (std::size_t i = 0; i < components.size(); ++i)
      if (const auto formula = matter::Formula::parse(components[i]))
        add_atoms(elements, *formula, held.component_mol[i]);
    add_atoms(elements, *matter::Formula::parse("H2O"), 1000 * held.water_kg / grams_of_water);
    return elements;
  };
  Elements poured = elements_of(task);
  for (const dosing::Addition& addition : plan.additions) {
    const matter::StockChemical& stock = tank.on_shelf(addition.chemical)->stock;
    const auto formula = matter::Formula::parse(stock.formula);
    if (!formula) return formula.problems();
    const auto parts = speciation::parts_of(*formula, *equilibria);
    if (!parts) return parts.problems();
    const double mol = 1000 * addition.kg * stock.assay / formula->molar_mass().v;
    double water_mol = stock.liquid ? 1000 * addition.kg * (1 - stock.assay) / grams_of_water : 0;
    add_atoms(poured, *formula, mol);
    add_atoms(poured, *matter::Formula::parse("H2O"), water_mol);
    water_mol += parts->water * mol;
    for (const auto& [name, count] : parts->basis) {
      if (const auto at = system->component(name)) {
        task.component_mol[*at] += count * mol;
      } else if (name == "CO3^2-") {  // leaves an acid bath as CO2: CO3^2- + 2 H^+ = CO2 + H2O
        task.component_mol[0] -= 2 * count * mol;
        water_mol += count * mol;
        add_atoms(poured, *matter::Formula::parse("CO2"), -count * mol);
      } else {
        return Problem{Fault::inconsistent_data, stock.id,
                       "brings " + name + ", which the bath does not hold", "", ""};
      }
    }
    task.water_kg += water_mol * grams_of_water / 1000;
  }

  const auto kind = type.convention == activity::Convention::interaction ? activity::ModelKind::pitzer
                                                                         : activity::ModelKind::sit;
  const auto solver = speciation::Solver::prepare(system, kind, tank.temperature, type.sets.acid);
  if (!solver) return solver.problems();
  const auto solved = solver->solve(task);
  if (!solved) return solved.problems();
  Ending end;
  end.pH = solved->pH();
  end.volume_L = density->volume_L(task.component_mol, task.water_kg, start.temperature);
  end.element_defect = largest_defect(poured, elements_of(task));
  for (const bath::Quantity& quantity : type.quantities) {
    double mol = 0;
    for (const auto& [name, count] : quantity.counts)
      mol += count * task.component_mol[*system->component(name)];
    end.g_per_L[quantity.id] = mol * quantity.formula.molar_mass().v / end.volume_L;
  }
  return end;
}

}  // namespace disturbed
