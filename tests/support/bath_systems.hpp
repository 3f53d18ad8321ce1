// Three baths of growing size and random totals for them, for sweeps of cold starts and for the benchmark.
// Knows nothing of a test framework. Not for: one hand-made solution (tests/engine/speciation/systems.hpp).
#pragma once

#include <algorithm>
#include <array>
#include <bathwright/speciation/solver.hpp>
#include <cmath>
#include <map>
#include <random>
#include <string>
#include <vector>

namespace bathwright::speciation {

/// mol of each named component.
using Amounts = std::map<std::string, double>;

inline const Equilibria& equilibria_for(activity::ModelKind kind) {
  return Equilibria::built_in(activity::convention(kind));
}

/// The H^+ that makes the totals those of neutral compounds: minus the charge of the other components.
inline double neutral_protons(const ChemicalSystem& system, const std::vector<double>& component_mol) {
  double charge = 0;
  for (std::size_t i = 1; i < component_mol.size(); ++i)
    charge += system.species()[i].charge * component_mol[i];
  return -charge;
}

/// Lets every solid form that its constant and the trade's experience allow.
inline void let_precipitate(Task& task, const ChemicalSystem& system) {
  task.solids.clear();
  for (const SystemSolid& solid : system.solids())
    task.solids.push_back(solid.slow ? SolidRule::report_only : SolidRule::may_precipitate);
}

/// A bath as a shop runs it, per kg of water.
struct BathSystem {
  std::string name;
  double net_protons;  ///< mol: what the weak acids hold at the usual pH
  std::string cation;  ///< of the alkali that corrects the pH; its amount follows from the others
  std::string anion;   ///< of the acid that corrects the pH
  Amounts usual;       ///< mol, without H^+ and the cation
  Amounts addition;    ///< mol: one portion of the salt that is added most, about a fiftieth of the bath's
  std::vector<std::string> solids;  ///< what may precipitate

  [[nodiscard]] std::vector<std::string> components() const {
    std::vector<std::string> names{cation};
    for (const auto& [component, mol] : usual)
      if (component != cation) names.push_back(component);
    return names;
  }
};

/// Amounts: the middle of what suppliers' sheets give for each bath; carbonate from the air, calcium from the
/// water, iron and orthophosphate, phosphite from use.
inline const std::array<BathSystem, 3>& bath_systems() {
  static const std::array<BathSystem, 3> systems{{
      {"Watts nickel",
       0.0005,
       "Na^+",
       "SO4^2-",
       {{"Ni^2+", 1.3}, {"SO4^2-", 1.1}, {"Cl^-", 0.45}, {"H3BO3", 0.65}},
       {{"Ni^2+", 0.02}, {"SO4^2-", 0.02}},
       {"Ni(OH)2 (freshly precipitated)", "NiSO4.7H2O", "NiCl2.6H2O", "H3BO3"}},
      {"pyrophosphate copper",
       0.45,
       "K^+",
       "NO3^-",
       {{"Cu^2+", 0.4},
        {"P2O7^4-", 1.1},
        {"NH3", 0.12},
        {"NO3^-", 0.15},
        {"PO4^3-", 0.2},
        {"CO3^2-", 0.05},
        {"SO4^2-", 0.02}},
       {{"K^+", 0.08}, {"P2O7^4-", 0.02}},
       {"Cu(OH)2", "Cu4(OH)6SO4 (brochantite)", "CuSO4.5H2O", "Cu2P2O7", "Cu3(PO4)2", "K2SO4", "(NH4)2SO4",
        "KH2PO4"}},
      {"electroless nickel",
       1.45,
       "Na^+",
       "SO4^2-",
       {{"Ni^2+", 0.1},
        {"SO4^2-", 0.8},
        {"NH3", 0.3},
        {"HPO3^2-", 1.0},
        {"H2PO2^-", 0.25},
        {"CO3^2-", 0.005},
        {"Ca^2+", 0.002},
        {"Fe^2+", 0.0005},
        {"Fe^3+", 0.0002},
        {"cit^3-", 0.1},
        {"lac^-", 0.3},
        {"suc^2-", 0.05},
        {"mal^2-", 0.05},
        {"CH3COO^-", 0.1},
        {"Cl^-", 0.02}},
       {{"Ni^2+", 0.002}, {"SO4^2-", 0.002}},
       {"Ni(OH)2 (freshly precipitated)", "NiCO3.5.5H2O (hellyerite)", "NiSO4.7H2O", "(NH4)2Ni(SO4)2.6H2O",
        "Fe(OH)3 (amorphous)", "Fe(OH)2", "FeSO4.7H2O (melanterite)", "CaSO4.2H2O (gypsum)",
        "CaCO3 (calcite)", "CaHPO3.H2O (estimate)", "Na2SO4.10H2O (mirabilite)", "NaHCO3",
        "Na2CO3.10H2O (natron)", "NH4Cl", "(NH4)2SO4"}},
  }};
  return systems;
}

/// Lets the bath's own solids form and no others.
inline void let_precipitate(Task& task, const ChemicalSystem& system, const BathSystem& bath) {
  task.solids.assign(system.solids().size(), SolidRule::report_only);
  for (const std::string& solid : bath.solids)
    if (const auto k = system.solid(solid)) task.solids[*k] = SolidRule::may_precipitate;
}

/// The bath's own amounts, each multiplied by a factor between 1/spread and spread, evenly spread in its
/// logarithm; neutral by the alkali or acid that the shop corrects the pH with. 1 kg of water, the bath's
/// solids free to form.
///   spread >= 1; 1 gives the usual bath
template <class Random>
Task near_usual(const BathSystem& bath, const ChemicalSystem& system, double spread, Random& random) {
  std::uniform_real_distribution<double> ln_factor(-std::log(spread), std::log(spread));
  Task task;
  task.component_mol.assign(system.components().size(), 0);
  for (const auto& [name, mol] : bath.usual)
    task.component_mol[*system.component(name)] = mol * std::exp(ln_factor(random));
  const double protons = bath.net_protons * std::exp(ln_factor(random));
  const double missing_cation = neutral_protons(system, task.component_mol) - protons;
  const std::size_t cation = *system.component(bath.cation), anion = *system.component(bath.anion);
  constexpr double trace = 1e-4;  // mol: so that no component is ever absent
  task.component_mol[cation] = std::max(missing_cation, trace) / system.species()[cation].charge;
  if (missing_cation < 0) task.component_mol[anion] += missing_cation / system.species()[anion].charge;
  task.component_mol[0] = neutral_protons(system, task.component_mol);
  let_precipitate(task, system, bath);
  return task;
}

/// Totals that no shop would mix: every component at 1e-12 to 8 mol/kg, evenly spread in its logarithm, each
/// absent with the chance given; neutral by H^+ or OH^-. Nothing precipitates unless the caller lets it.
template <class Random>
Task wild_totals(const ChemicalSystem& system, Random& random, double share_absent = 0.125) {
  constexpr double lowest = 1e-12, highest = 8;
  std::uniform_real_distribution<double> ln_mol(std::log(lowest), std::log(highest)), chance(0, 1);
  Task task;
  task.component_mol.assign(system.components().size(), 0);
  for (std::size_t i = 1; i < task.component_mol.size(); ++i) {
    const double mol = std::exp(ln_mol(random));
    task.component_mol[i] = chance(random) < share_absent ? 0 : mol;
  }
  task.component_mol[0] = neutral_protons(system, task.component_mol);
  return task;
}

}  // namespace bathwright::speciation
