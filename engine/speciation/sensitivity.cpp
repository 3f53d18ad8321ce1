#include <Eigen/Dense>
#include <algorithm>
#include <bathwright/speciation/sensitivity.hpp>
#include <cmath>
#include <numbers>

namespace bathwright::speciation {
namespace {

using Eigen::Index;
using Eigen::MatrixXd;
using Eigen::VectorXd;

double at(const std::vector<double>& values, std::size_t i) { return values.empty() ? 0 : values[i]; }

/// A phase whose condition holds: what it is made of, and by how much its amount counts in the balances.
struct Present {
  enum class Kind : std::uint8_t { solid, gas, pH } kind;
  std::size_t index;               ///< in the solids or gases of the system
  std::vector<double> condition;   ///< over the components
  std::vector<double> in_balance;  ///< over the components, per mol
  double condition_water, in_water;
};

std::vector<Present> present_phases(const ChemicalSystem& system, const Task& task,
                                    const Equilibrium& answer) {
  std::vector<Present> phases;
  for (std::size_t k = 0; k < answer.solid_mol.size(); ++k) {
    const SolidRule rule = task.solids.empty() ? SolidRule::report_only : task.solids[k];
    if (rule != SolidRule::in_excess && answer.solid_mol[k] == 0) continue;
    const SystemSolid& solid = system.solids()[k];
    phases.push_back({Present::Kind::solid, k, solid.made_of, solid.made_of, solid.water, solid.water});
  }
  for (const HeldGas& held : task.gases) {
    const SystemSpecies& gas = system.gases()[held.gas];
    std::vector<double> taken_up = gas.made_of;
    for (double& mol : taken_up) mol = -mol;
    phases.push_back({Present::Kind::gas, held.gas, gas.made_of, taken_up, gas.water, -gas.water});
  }
  if (task.pH) {
    std::vector<double> proton(system.components().size(), 0), added = proton;
    proton[0] = 1;
    added[0] = -1;
    added[task.pH->counter_ion] = 1.0 / system.species()[task.pH->counter_ion].charge;
    phases.push_back({Present::Kind::pH, 0, proton, added, 0, 0});
  }
  return phases;
}

}  // namespace

double Shift::pH() const { return -ln_activity[0] / std::numbers::ln10; }

/// Unknowns: ln m of the present species, ln of the liquid water, the amounts of the present phases.
struct Sensitivity::Parts {
  const ChemicalSystem* system;
  std::vector<Index> unknown;  ///< per species, -1: absent
  Index species = 0;           ///< present
  std::vector<std::size_t> component_rows;
  std::vector<Present> phases;
  MatrixXd to_ln_activity;  ///< present species x present species: d ln a / d ln m
  VectorXd to_ln_water;     ///< d ln a_w / d ln m
  VectorXd row_scale;
  Eigen::PartialPivLU<MatrixXd> factors;

  void linearise_coefficients(const activity::ActivityModel& model, const Equilibrium& answer);
  [[nodiscard]] MatrixXd equations(const Equilibrium& answer);
  /// sum_i count_i v_i over the present components.
  template <class Value>
  double over_components(const std::vector<double>& count, Value value) const {
    double sum = 0;
    for (const std::size_t i : component_rows)
      if (count[i] != 0) sum += count[i] * value(i);
    return sum;
  }
};

void Sensitivity::Parts::linearise_coefficients(const activity::ActivityModel& model,
                                                const Equilibrium& answer) {
  const std::size_t kinds = model.kinds();
  const auto kind = model.kind_of();
  std::vector<double> m(kinds, 0), ln_gamma(kinds), slope(kinds * kinds), water(kinds);
  for (std::size_t j = 0; j < kind.size(); ++j) m[kind[j]] += answer.molality[j];
  model.evaluate_kinds(m, ln_gamma, slope);
  // Of the water by differences: with individual ion sizes it does not follow from the coefficients.
  for (std::size_t k = 0; k < kinds; ++k) {
    if (m[k] == 0) continue;
    const double middle = m[k], step = 1e-4 * middle;
    m[k] = middle + step;
    const double up = model.evaluate_kinds(m, ln_gamma);
    m[k] = middle - step;
    water[k] = (up - model.evaluate_kinds(m, ln_gamma)) / (2 * step);
    m[k] = middle;
  }
  to_ln_activity.setIdentity(species, species);
  to_ln_water.setZero(species);
  for (std::size_t i = 0; i < kind.size(); ++i) {
    if (unknown[i] < 0) continue;
    to_ln_water(unknown[i]) = water[kind[i]] * answer.molality[i];
    for (std::size_t j = 0; j < kind.size(); ++j)
      if (unknown[j] >= 0)
        to_ln_activity(unknown[i], unknown[j]) += slope[kind[i] * kinds + kind[j]] * answer.molality[j];
  }
}

MatrixXd Sensitivity::Parts::equations(const Equilibrium& answer) {
  const auto& all = system->species();
  const auto held = static_cast<Index>(phases.size());
  const Index size = species + 1 + held;
  MatrixXd J = MatrixXd::Zero(size, size);
  Index row = 0;
  const auto action = [&](const std::vector<double>& made_of, double water) {
    for (const std::size_t i : component_rows)
      if (made_of[i] != 0) J.row(row).head(species) += made_of[i] * to_ln_activity.row(unknown[i]);
    J.row(row).head(species) += water * to_ln_water.transpose();
  };
  // Mass action of everything but the components, then balances, water, phases.
  for (std::size_t j = system->components().size(); j < all.size(); ++j) {
    if (unknown[j] < 0) continue;
    action(all[j].made_of, all[j].water);
    J.row(row) *= -1;
    J.row(row).head(species) += to_ln_activity.row(unknown[j]);
    ++row;
  }
  const auto balance = [&](auto count, double extra) {
    for (std::size_t j = 0; j < all.size(); ++j)
      if (unknown[j] >= 0) {
        const double mol = count(all[j]) * answer.molality[j] * answer.water_kg;
        J(row, unknown[j]) = mol;
        J(row, species) += mol;
      }
    J(row, species) += extra;
  };
  for (const std::size_t i : component_rows) {
    balance([i](const SystemSpecies& s) { return s.made_of[i]; }, 0);
    for (Index k = 0; k < held; ++k)
      J(row, species + 1 + k) = phases[static_cast<std::size_t>(k)].in_balance[i];
    ++row;
  }
  balance([](const SystemSpecies& s) { return s.water; }, answer.water_kg * water_mol_per_kg);
  for (Index k = 0; k < held; ++k) J(row, species + 1 + k) = phases[static_cast<std::size_t>(k)].in_water;
  ++row;
  for (const Present& phase : phases) {
    action(phase.condition, phase.condition_water);
    ++row;
  }
  // Balances are in mol of anything between 1e-12 and 50.
  row_scale = J.cwiseAbs().rowwise().maxCoeff().cwiseInverse();
  return row_scale.asDiagonal() * J;
}

Sensitivity::Sensitivity(std::unique_ptr<Parts> parts) : parts_(std::move(parts)) {}
Sensitivity::~Sensitivity() = default;
Sensitivity::Sensitivity(Sensitivity&&) noexcept = default;
Sensitivity& Sensitivity::operator=(Sensitivity&&) noexcept = default;

Result<Sensitivity> Sensitivity::at(const Solver& solver, const Task& task, const Equilibrium& answer) {
  auto parts = std::make_unique<Parts>();
  parts->system = &solver.system();
  for (const double m : answer.molality) parts->unknown.push_back(m > 0 ? parts->species++ : Index{-1});
  for (std::size_t i = 0; i < solver.system().components().size(); ++i)
    if (parts->unknown[i] >= 0) parts->component_rows.push_back(i);
  parts->phases = present_phases(solver.system(), task, answer);
  parts->linearise_coefficients(solver.model(), answer);
  const MatrixXd J = parts->equations(answer);
  if (J.allFinite()) parts->factors.compute(J);
  if (!J.allFinite() || !(parts->factors.matrixLU().diagonal().cwiseAbs().minCoeff() > 0))
    return Problem{Fault::not_converged, "", "the equilibrium has no derivatives here",
                   "an answer away from the edge of what the model can follow", ""};
  return Sensitivity(std::move(parts));
}

Shift Sensitivity::respond(const Change& change) const {
  const Parts& p = *parts_;
  const ChemicalSystem& system = *p.system;
  const auto& all = system.species();
  const Index size = p.species + 1 + static_cast<Index>(p.phases.size());
  const auto ln_K = [&](const Present& phase) {
    switch (phase.kind) {
      case Present::Kind::solid:
        return speciation::at(change.ln_K_solids, phase.index);
      case Present::Kind::gas:
        return speciation::at(change.ln_K_gases, phase.index);
      case Present::Kind::pH:
        return -change.pH * std::numbers::ln10;
    }
    return 0.0;
  };
  /// What the coefficients alone do to an ion product.
  const auto direct = [&](const std::vector<double>& count, double water) {
    return p.over_components(count, [&](std::size_t i) { return speciation::at(change.ln_gamma, i); }) +
           water * change.ln_water_activity;
  };
  VectorXd right(size);
  Index row = 0;
  for (std::size_t j = system.components().size(); j < all.size(); ++j)
    if (p.unknown[j] >= 0)
      right(row++) = speciation::at(change.ln_K_species, j) - speciation::at(change.ln_gamma, j) +
                     direct(all[j].made_of, all[j].water);
  for (const std::size_t i : p.component_rows) right(row++) = speciation::at(change.component_mol, i);
  right(row++) = change.water_kg * water_mol_per_kg;
  for (const Present& phase : p.phases)
    right(row++) = ln_K(phase) - direct(phase.condition, phase.condition_water);
  const VectorXd moved = p.factors.solve(VectorXd(p.row_scale.cwiseProduct(right)));

  Shift shift;
  const VectorXd ln_m = moved.head(p.species), ln_a = p.to_ln_activity * ln_m;
  shift.ln_water_activity = p.to_ln_water.dot(ln_m) + change.ln_water_activity;
  shift.ln_water_kg = moved(p.species);
  for (std::size_t j = 0; j < all.size(); ++j) {
    const Index u = p.unknown[j];
    shift.ln_molality.push_back(u < 0 ? 0 : ln_m(u));
    shift.ln_activity.push_back(u < 0 ? 0 : ln_a(u) + speciation::at(change.ln_gamma, j));
  }
  const auto ln_product = [&](const SystemSpecies& phase) {
    return p.over_components(phase.made_of, [&](std::size_t i) { return shift.ln_activity[i]; }) +
           phase.water * shift.ln_water_activity;
  };
  for (std::size_t k = 0; k < system.solids().size(); ++k)
    shift.saturation_index.push_back(
        (ln_product(system.solids()[k]) - speciation::at(change.ln_K_solids, k)) / std::numbers::ln10);
  for (std::size_t g = 0; g < system.gases().size(); ++g)
    shift.ln_gas_bar.push_back(ln_product(system.gases()[g]) - speciation::at(change.ln_K_gases, g));
  shift.solid_mol.assign(system.solids().size(), 0);
  for (std::size_t k = 0; k < p.phases.size(); ++k) {
    const double mol = moved(p.species + 1 + static_cast<Index>(k));
    if (p.phases[k].kind == Present::Kind::solid) shift.solid_mol[p.phases[k].index] = mol;
    if (p.phases[k].kind == Present::Kind::pH) shift.held_ph_mol = mol;
  }
  return shift;
}

Result<Change> Sensitivity::per_kelvin(const Solver& solver, const Equilibrium& answer) {
  constexpr double half_width = 0.1;
  const units::Celsius warm{std::min(100.0, solver.temperature().v + half_width)},
      cool{std::max(0.0, solver.temperature().v - half_width)};
  auto above = solver.at_temperature(warm), below = solver.at_temperature(cool);
  if (!above) return above.problems();
  if (!below) return below.problems();
  const double kelvin = warm.v - cool.v;
  const auto slope = [kelvin](std::vector<double> high, const std::vector<double>& low) {
    for (std::size_t i = 0; i < high.size(); ++i) high[i] = (high[i] - low[i]) / kelvin;
    return high;
  };
  Change change;
  change.ln_K_species = slope(above->ln_K().species, below->ln_K().species);
  change.ln_K_solids = slope(above->ln_K().solids, below->ln_K().solids);
  change.ln_K_gases = slope(above->ln_K().gases, below->ln_K().gases);
  std::vector<double> high(answer.molality.size()), low = high;
  const double water_high = above->model().evaluate(answer.molality, high);
  const double water_low = below->model().evaluate(answer.molality, low);
  change.ln_gamma = slope(std::move(high), low);
  change.ln_water_activity = (water_high - water_low) / kelvin;
  return change;
}

namespace {

/// Adds the squares of shifts of independent sources.
class Variance {
 public:
  explicit Variance(const ChemicalSystem& system) {
    sum_.ln_molality.assign(system.species().size(), 0);
    sum_.ln_activity = sum_.ln_molality;
    sum_.saturation_index.assign(system.solids().size(), 0);
    sum_.solid_mol = sum_.saturation_index;
    sum_.ln_gas_bar.assign(system.gases().size(), 0);
  }
  void add(const Shift& shift) {
    square(sum_.pH, shift.pH());
    square(sum_.ln_water_activity, shift.ln_water_activity);
    add(sum_.ln_molality, shift.ln_molality);
    add(sum_.ln_activity, shift.ln_activity);
    add(sum_.solid_mol, shift.solid_mol);
    add(sum_.saturation_index, shift.saturation_index);
    add(sum_.ln_gas_bar, shift.ln_gas_bar);
  }
  [[nodiscard]] Uncertainty root() {
    for (auto* values :
         {&sum_.ln_molality, &sum_.ln_activity, &sum_.solid_mol, &sum_.saturation_index, &sum_.ln_gas_bar})
      for (double& v : *values) v = std::sqrt(v);
    sum_.pH = std::sqrt(sum_.pH);
    sum_.ln_water_activity = std::sqrt(sum_.ln_water_activity);
    return std::move(sum_);
  }

 private:
  static void square(double& sum, double v) { sum += v * v; }
  static void add(std::vector<double>& sum, const std::vector<double>& v) {
    for (std::size_t i = 0; i < sum.size(); ++i) square(sum[i], v[i]);
  }
  Uncertainty sum_;
};

/// What one standard uncertainty of an interaction does to the coefficients and, by Gibbs-Duhem, to water.
Change by_interaction(const activity::InteractionNote& note, const Equilibrium& answer) {
  Change change;
  change.ln_gamma.assign(answer.molality.size(), 0);
  double all = note.u_ln_gamma;
  for (const std::uint32_t i : note.solutes) {
    double others = note.u_ln_gamma;
    for (const std::uint32_t j : note.solutes)
      if (j != i) others *= answer.molality[j];
    change.ln_gamma[i] = others;
    all *= answer.molality[i];
  }
  if (note.solutes.size() > 1)
    change.ln_water_activity =
        -activity::water_kg_per_mol * all * static_cast<double>(note.solutes.size() - 1);
  return change;
}

}  // namespace

std::vector<Doubt> doubts(const Solver& solver, const Equilibrium& answer) {
  const ChemicalSystem& system = solver.system();
  std::vector<Doubt> all;
  const auto of_constants = [&](Doubt::Of of, std::vector<double> Change::*field, const auto& rows,
                                auto counts) {
    for (std::size_t i = 0; i < rows.size(); ++i) {
      const double u = counts(i) ? rows[i].constant.uncertainty_at(solver.temperature()) : 0;
      if (u == 0) continue;
      Doubt doubt{of, {static_cast<std::uint32_t>(i)}, {}};
      (doubt.change.*field).assign(rows.size(), 0);
      (doubt.change.*field)[i] = u * std::numbers::ln10;
      all.push_back(std::move(doubt));
    }
  };
  const auto every = [](std::size_t) { return true; };
  of_constants(Doubt::Of::species, &Change::ln_K_species, system.species(),
               [&](std::size_t j) { return answer.molality[j] > 0; });
  of_constants(Doubt::Of::solid, &Change::ln_K_solids, system.solids(), every);
  of_constants(Doubt::Of::gas, &Change::ln_K_gases, system.gases(), every);
  // An interaction that moves no coefficient by a thousandth moves nothing a person could see.
  constexpr double seen = 1e-3;
  for (const activity::InteractionNote& note : solver.model().notes()) {
    if (note.u_ln_gamma == 0) continue;
    Doubt doubt{
        Doubt::Of::interaction, {static_cast<std::uint32_t>(note.kind)}, by_interaction(note, answer)};
    doubt.which.insert(doubt.which.end(), note.solutes.begin(), note.solutes.end());
    if (*std::ranges::max_element(doubt.change.ln_gamma) > seen) all.push_back(std::move(doubt));
  }
  return all;
}

Result<std::vector<Shift>> independent_shifts(const Solver& solver, const Task& task,
                                              const Equilibrium& answer, const InputUncertainty& input) {
  const auto sensitivity = Sensitivity::at(solver, task, answer);
  if (!sensitivity) return sensitivity.problems();
  std::vector<Shift> shifts;
  for (const Doubt& doubt : doubts(solver, answer)) shifts.push_back(sensitivity->respond(doubt.change));
  for (std::size_t i = 0; i < input.component_mol.size(); ++i) {
    if (input.component_mol[i] == 0) continue;
    Change change;
    change.component_mol.assign(input.component_mol.size(), 0);
    change.component_mol[i] = input.component_mol[i];
    shifts.push_back(sensitivity->respond(change));
  }
  if (input.water_kg != 0) {
    Change change;
    change.water_kg = input.water_kg;
    shifts.push_back(sensitivity->respond(change));
  }
  if (input.temperature_K != 0) {
    auto change = Sensitivity::per_kelvin(solver, answer);
    if (!change) return change.problems();
    Shift shift = sensitivity->respond(*change);
    for (auto* values : {&shift.ln_molality, &shift.ln_activity, &shift.saturation_index, &shift.ln_gas_bar})
      for (double& v : *values) v *= input.temperature_K;
    shift.ln_water_activity *= input.temperature_K;
    shifts.push_back(std::move(shift));
  }
  return shifts;
}

Result<Uncertainty> uncertainty(const Solver& solver, const Task& task, const Equilibrium& answer,
                                const InputUncertainty& input) {
  const auto shifts = independent_shifts(solver, task, answer, input);
  if (!shifts) return shifts.problems();
  Variance variance(solver.system());
  for (const Shift& shift : *shifts) variance.add(shift);
  return variance.root();
}

}  // namespace bathwright::speciation
