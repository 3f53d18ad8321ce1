#include <algorithm>
#include <bathwright/matter/component_density.hpp>
#include <bathwright/matter/formula.hpp>

namespace bathwright::matter {
namespace {

double water_kg_per_mol() {
  static const double kg = Formula::parse("H2O").value().molar_mass().v / 1000;
  return kg;
}

}  // namespace

Result<ComponentDensity> ComponentDensity::prepare(const std::vector<std::string>& components) {
  std::vector<std::string> names = components;
  names.emplace_back("OH^-");
  auto density = SolutionDensity::for_species(names);
  if (!density) return density.problems();
  const auto proton = std::find(components.begin(), components.end(), "H^+");
  if (proton == components.end()) return ComponentDensity(*std::move(density), std::nullopt);
  return ComponentDensity(*std::move(density), static_cast<std::size_t>(proton - components.begin()));
}

ComponentDensity::Counted ComponentDensity::counted(const std::vector<double>& component_mol,
                                                    double water_kg) const {
  Counted c{component_mol, water_kg};
  c.mol.push_back(0);
  if (proton_ && component_mol[*proton_] < 0) {
    c.mol.back() = -component_mol[*proton_];
    c.mol[*proton_] = 0;
    c.water_kg -= c.mol.back() * water_kg_per_mol();  // OH^- is H2O less H^+
  }
  return c;
}

double ComponentDensity::volume_L(const std::vector<double>& component_mol, double water_kg,
                                  units::Celsius t) const {
  const Counted c = counted(component_mol, water_kg);
  return density_.volume_L(c.mol, c.water_kg, t);
}

units::KilogramsPerLitre ComponentDensity::density(const std::vector<double>& component_mol, double water_kg,
                                                   units::Celsius t) const {
  const Counted c = counted(component_mol, water_kg);
  return density_.density(c.mol, c.water_kg, t);
}

std::vector<std::string> ComponentDensity::range_warnings(const std::vector<double>& component_mol,
                                                          double water_kg, units::Celsius t) const {
  const Counted c = counted(component_mol, water_kg);
  return density_.range_warnings(c.mol, c.water_kg, t);
}

}  // namespace bathwright::matter
