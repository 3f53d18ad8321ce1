#include "ion_totals.hpp"

#include <algorithm>

namespace bathwright::solution {

void IonTotals::add(const matter::Formula& formula, const speciation::Composition& ions, double mol) {
  if (ions.empty()) {
    if (formula.text() != "H2O") mol_[formula.text()] += mol;
    return;
  }
  for (const auto& [ion, nu] : ions) mol_[ion] += nu * mol;
}

void IonTotals::add(const std::string& text, double mol) {
  if (const auto formula = matter::Formula::parse(text))
    add(*formula, speciation::nominal_ions(*formula, *equilibria_), mol);
}

void IonTotals::add_ion(const std::string& ion, double mol) { mol_[ion] += mol; }

void IonTotals::divide_by(double water_kg) {
  for (auto& [name, mol] : mol_) mol /= water_kg;
}

double IonTotals::neutralised() const {
  const auto acid = mol_.find("H^+"), alkali = mol_.find("OH^-");
  if (acid == mol_.end() || alkali == mol_.end()) return 0;
  return std::max(0.0, std::min(acid->second, alkali->second));
}

double IonTotals::of(const std::string& ion) const {
  const auto found = mol_.find(ion);
  if (found == mol_.end()) return 0;
  const bool of_water = ion == "H^+" || ion == "OH^-";
  return found->second - (of_water ? neutralised() : 0);
}

double IonTotals::sum() const {
  double sum = -2 * neutralised();
  for (const auto& [name, mol] : mol_) sum += mol;
  return sum;
}

}  // namespace bathwright::solution
