#include <algorithm>
#include <bathwright/speciation/solver.hpp>
#include <cmath>
#include <cstdio>
#include <limits>
#include <numbers>
#include <numeric>

#include "active_set.hpp"
#include "convex_dual.hpp"
#include "coupled_newton.hpp"
#include "verify.hpp"

namespace bathwright::speciation {
namespace {

constexpr double saturated = 1e-9;        // ln units
constexpr double scarce_fraction = 1e-6;  // a free ion below this share of its total needs a better basis
constexpr double covered_margin_C = 1;

Problem not_converged(const std::string& what) {
  return {Fault::not_converged, "", what, "", "Check the amounts; report the input if they are right."};
}

std::string failed_check(const Residuals& r) {
  char text[200];
  std::snprintf(text, sizeof text,
                "the answer does not pass its check: mass balance %.2g, mass action %.2g, saturation %.2g, "
                "negative solid %.2g",
                r.mass_balance, r.mass_action, r.saturation, r.negative_solid);
  return text;
}

Vector molalities(const Workspace& w) { return w.ln_molality().array().min(7.0).exp().matrix(); }

/// Moves the coefficients a share of the way to those of the present composition; the largest change, ln
/// units, of a species that is not a trace.
double move_coefficients(Workspace& w, double share) {
  const Vector m = molalities(w);
  Vector fresh(w.count());
  w.ln_aw += share * (w.activity_coefficients(m, fresh) - w.ln_aw);
  const double threshold = 1e-8 * m.sum();
  double largest = 0;
  for (Index j = 0; j < w.count(); ++j)
    if (m(j) > threshold) largest = std::max(largest, std::abs(fresh(j) - w.ln_gamma(j)));
  w.ln_gamma += share * (fresh - w.ln_gamma);
  return largest;
}

/// Liquid water from the water balance at the present composition.
void balance_water(Workspace& w) {
  double bound = w.water.dot(molalities(w)) * w.water_kg;
  for (const Phase& phase : w.phases)
    if (phase.active) bound += phase.supply_water * phase.mol;
  const double liquid = (w.total_water - bound) / water_mol_per_kg;
  w.water_kg = std::clamp(liquid, 0.2 * w.water_kg, 5 * w.water_kg);
}

/// Coupled Newton, one change of the active set at a time until it settles.
bool finish(Workspace& w, int& iterations) {
  const std::size_t most = 10 + 4 * w.phases.size();
  for (std::size_t change = 0; change < most; ++change) {
    if (!solve_coupled(w, iterations)) return false;
    // Largest violation first; from half-way on the first one found, so that no cycle can last.
    const bool first = change > most / 2;
    Phase* leaving = nullptr;
    std::size_t entering = w.phases.size();
    double least = 0, largest = saturated;
    for (std::size_t k = 0; k < w.phases.size(); ++k) {
      Phase& phase = w.phases[k];
      if (phase.kind != Phase::Kind::precipitate) continue;
      if (phase.active) {
        if (phase.mol < least && !(first && leaving)) leaving = &phase, least = phase.mol;
      } else if (const double above = ln_saturation(w, phase);
                 above > largest && !(first && entering < w.phases.size())) {
        entering = k, largest = above;
      }
    }
    if (leaving) {
      leaving->active = false;
      leaving->mol = 0;
    } else if (entering == w.phases.size()) {
      return true;
    } else if (!let_in(w, entering, WaterActivity::free)) {
      return false;
    }
  }
  return false;
}

/// Fixed point on the activity coefficients with a step that adapts; slow and sturdy, for where Newton does
/// not arrive.
bool approach(Workspace& w, int& iterations) {
  constexpr int most = 200;
  double share = 0.5, last = std::numeric_limits<double>::infinity();
  for (int step = 0; step < most; ++step) {
    if (!solve_convex(w, 1e-8, iterations)) return false;
    balance_water(w);
    const double change = move_coefficients(w, share);
    if (change < 1e-4) return true;
    share = change < last ? std::min(1.0, 1.15 * share) : std::max(0.02, 0.5 * share);
    last = change;
  }
  return false;
}

/// Starts from a dilute solution, where everything is easy, and takes the water away again in steps that
/// adapt.
bool concentrate(Workspace& w, int& iterations) {
  constexpr double least_step = 0.01;  // in ln of the water
  const double water = w.total_water;
  double ln_dilution = std::log(100.0), step = 0.7;
  w.total_water = water * std::exp(ln_dilution);
  w.water_kg *= std::exp(ln_dilution);
  w.ln_gamma.setZero();
  w.ln_aw = 0;
  cold_start(w);
  if (!solve_convex(w, 1e-3, iterations) || !finish(w, iterations)) return false;
  while (ln_dilution > 0) {
    const Workspace start = w;
    const double next = std::max(0.0, ln_dilution - step);
    w.total_water = water * std::exp(next);
    w.water_kg *= std::exp(next - ln_dilution);
    for (Index i = 0; i < w.components(); ++i)
      if (i != w.proton) w.x(i) += ln_dilution - next;
    if (finish(w, iterations)) {
      ln_dilution = next;
      step *= 1.5;
    } else {
      w = start;
      step /= 3;
      if (step < least_step) return false;  // w stands at the last solution found
    }
  }
  return true;
}

/// Whether holding the pH would take more of the counter-ion out than there is.
bool taken_out(const Workspace& w) {
  for (const Phase& phase : w.phases)
    if (phase.kind == Phase::Kind::ph)
      for (Index i = 0; i < w.components(); ++i)
        if (i != w.proton && phase.supply(i) != 0 && w.total(i) - phase.mol * phase.supply(i) <= 0)
          return true;
  return false;
}

Problem cannot_hold(const std::vector<std::string>& components, const HeldPh& held) {
  const std::string& ion = components[held.counter_ion];
  char pH[32];
  std::snprintf(pH, sizeof pH, "%.3g", held.pH);
  return {Fault::out_of_range, "pH",
          std::string("pH ") + pH + " cannot be held with " + ion +
              ": more of it would have to leave than is there",
          ion.ends_with('-') ? "a pH at or below that of the solution as given"
                             : "a pH at or above that of the solution as given",
          ion.ends_with('-') ? "Name a cation such as Na^+ as the counter-ion."
                             : "Name an anion such as Cl^- as the counter-ion."};
}

/// Why no answer exists where the solution could be followed only down to `reached`.
Problem beyond_reach(const Workspace& reached, const Task& task) {
  constexpr double concentrated = 6;  // ionic strength, mol/kg: most parameters were fitted to less
  const Vector m = molalities(reached);
  double I = 0;
  for (Index j = 0; j < reached.count(); ++j) I += 0.5 * m(j) * reached.charge(j) * reached.charge(j);
  const double total_kg = reached.total_water / water_mol_per_kg;
  char text[240];
  if (reached.water_kg < 0.05 * total_kg) {
    std::snprintf(
        text, sizeof text,
        "no liquid is left: with %.3g kg of water, %.2g kg stay liquid and the rest is bound in crystals",
        total_kg, reached.water_kg);
    return {Fault::out_of_range, "", text, "a solution", "Use less salt or more water."};
  }
  if (I < concentrated) return not_converged("the equilibrium did not converge");
  std::snprintf(text, sizeof text,
                "the activity model has no equilibrium at this strength: it follows the solution from the "
                "dilute side to %.4g kg of "
                "water (given: %.4g kg), ionic strength %.1f mol/kg, water activity %.2f",
                total_kg, task.water_kg, I, std::exp(reached.ln_aw));
  return {Fault::out_of_range, "", text, "a solution within the range of the interaction parameters",
          "Use less salt or more water."};
}

/// Whether the Gibbs energy curves upward in every direction at the answer: 1 + sqrt(m) G sqrt(m) positive
/// definite over the solutes that are not traces. Where it does not, the model has left its range and may
/// have other solutions.
bool curves_upward(Workspace& w) {
  const Vector m = molalities(w);
  std::vector<Index> abundant;
  for (Index j = 0; j < w.count(); ++j)
    if (m(j) > 1e-6 * m.sum()) abundant.push_back(j);
  Vector ln_gamma(w.count());
  Matrix G;
  w.activity_coefficients(m, ln_gamma, abundant, G);
  const auto size = static_cast<Index>(abundant.size());
  Matrix curvature(size, size);
  for (Index r = 0; r < size; ++r)
    for (Index c = 0; c < size; ++c) {
      const Index i = abundant[static_cast<std::size_t>(r)], j = abundant[static_cast<std::size_t>(c)];
      curvature(r, c) = (r == c ? 1 : 0) + std::sqrt(m(i) * m(j)) * G(i, c);
    }
  curvature = (curvature + curvature.transpose()) / 2;
  // A steep wall across the charged direction, in which single-ion coefficients are a convention and may
  // curve downward.
  Vector charged(size);
  for (Index r = 0; r < size; ++r) {
    const Index i = abundant[static_cast<std::size_t>(r)];
    charged(r) = w.charge(i) * std::sqrt(m(i));
  }
  if (charged.squaredNorm() > 0)
    curvature += 1e4 * (1 + curvature.norm()) / charged.squaredNorm() * charged * charged.transpose();
  return Eigen::LLT<Matrix>(curvature).info() == Eigen::Success;
}

bool scarce(const Workspace& w) {
  const Vector amount = molalities(w) * w.water_kg;
  const Vector throughput = w.A.cwiseAbs() * amount + w.total.cwiseAbs();
  for (Index i = 0; i < w.components(); ++i) {
    const double own = std::exp(std::min(w.x(i), 50.0)) * w.water_kg;
    if (own < scarce_fraction * throughput(i)) return true;
  }
  return false;
}

Outcome check(const ChemicalSystem& system, const Task& task) {
  Problems problems;
  const auto bad = [&](std::string where, std::string what, std::string expected) {
    problems.push_back({Fault::bad_input, std::move(where), std::move(what), std::move(expected), ""});
  };
  if (task.component_mol.size() != system.components().size())
    return Problem{Fault::bad_input, "",
                   "totals for " + std::to_string(task.component_mol.size()) + " components",
                   std::to_string(system.components().size()), ""};
  for (std::size_t i = 0; i < task.component_mol.size(); ++i) {
    const double mol = task.component_mol[i];
    if (!std::isfinite(mol))
      bad(system.components()[i], "the amount is not a number", "mol");
    else if (mol < 0 && i != 0)
      bad(system.components()[i], "the amount is negative: " + std::to_string(mol) + " mol", "0 or more");
  }
  if (!(task.water_kg > 0) || !std::isfinite(task.water_kg))
    bad("water", std::to_string(task.water_kg) + " kg", "more than 0");
  for (const HeldGas& held : task.gases)
    if (!(held.pressure_bar > 0) || !std::isfinite(held.pressure_bar))
      bad(system.gases()[held.gas].name, "held at " + std::to_string(held.pressure_bar) + " bar",
          "a pressure above 0");
  if (task.pH && !std::isfinite(task.pH->pH)) bad("pH", "not a number", "a pH");
  if (!problems.empty()) return problems;
  return Done{};
}

Equilibrium answer_from(Workspace& w, const Solver& solver, const Task& task, int iterations) {
  const ChemicalSystem& system = solver.system();
  Equilibrium answer;
  const std::size_t count = system.species().size();
  answer.molality.assign(count, 0);
  answer.ln_gamma.assign(count, 0);
  answer.ln_activity.assign(count, -std::numeric_limits<double>::infinity());
  const Vector ln_m = w.ln_molality();
  for (std::size_t j = 0; j < w.species.size(); ++j)
    answer.molality[w.species[j]] = std::exp(ln_m(static_cast<Index>(j)));
  // One last look at the coefficients, so that what is printed belongs together to the last digit.
  answer.ln_water_activity = solver.model().evaluate(answer.molality, answer.ln_gamma);
  for (const std::size_t j : w.species)
    answer.ln_activity[j] = std::log(answer.molality[j]) + answer.ln_gamma[j];
  answer.water_kg = w.water_kg;
  answer.iterations = iterations;
  double sum = 0;
  for (std::size_t j = 0; j < count; ++j) {
    sum += answer.molality[j];
    answer.ionic_strength +=
        0.5 * answer.molality[j] * system.species()[j].charge * system.species()[j].charge;
  }
  answer.osmotic_coefficient = sum > 0 ? -answer.ln_water_activity / (activity::water_kg_per_mol * sum) : 1;

  const auto ln_product = [&](const SystemSpecies& phase) {
    double product = phase.water * answer.ln_water_activity;
    for (std::size_t i = 0; i < system.components().size(); ++i)
      if (phase.made_of[i] != 0) product += phase.made_of[i] * answer.ln_activity[i];
    return product;
  };
  for (std::size_t k = 0; k < system.solids().size(); ++k)
    answer.saturation_index.push_back((ln_product(system.solids()[k]) - solver.ln_K_solids()[k]) /
                                      std::numbers::ln10);
  for (std::size_t g = 0; g < system.gases().size(); ++g)
    answer.gas_bar.push_back(std::exp(ln_product(system.gases()[g]) - solver.ln_K_gases()[g]));
  answer.solid_mol.assign(system.solids().size(), 0);
  answer.gas_mol.assign(task.gases.size(), 0);
  for (const Phase& phase : w.phases) {
    if (!phase.active) continue;
    switch (phase.kind) {
      case Phase::Kind::precipitate:
      case Phase::Kind::excess:
        answer.solid_mol[phase.index] = phase.mol;
        break;
      case Phase::Kind::gas:
        for (std::size_t g = 0; g < task.gases.size(); ++g)
          if (task.gases[g].gas == phase.index) answer.gas_mol[g] = -phase.mol;
        break;
      case Phase::Kind::ph:
        answer.held_ph_mol = -phase.mol;
        break;
    }
  }
  answer.stable = curves_upward(w);
  answer.residuals = verify(solver, task, answer);
  return answer;
}

}  // namespace

double Equilibrium::pH() const { return -ln_activity[0] / std::numbers::ln10; }

Result<Solver> Solver::prepare(std::shared_ptr<const ChemicalSystem> system, activity::ModelKind kind,
                               units::Celsius t, activity::AcidSet acid_set) {
  std::vector<activity::Solute> solutes;
  for (const SystemSpecies& species : system->species()) solutes.push_back({species.name, species.charge});
  auto model = activity::make_model(kind, solutes, t, acid_set);
  if (!model) return model.problems();
  Solver solver;
  solver.system_ = std::move(system);
  solver.model_ = *std::move(model);
  solver.t_ = t;
  const auto ln_K = [&](const SystemSpecies& row) { return row.constant.log10_at(t) * std::numbers::ln10; };
  for (const SystemSpecies& species : solver.system_->species())
    solver.ln_K_species_.push_back(ln_K(species));
  for (const SystemSolid& solid : solver.system_->solids()) solver.ln_K_solids_.push_back(ln_K(solid));
  for (const SystemSpecies& gas : solver.system_->gases()) solver.ln_K_gases_.push_back(ln_K(gas));
  return solver;
}

bool Solver::covers(std::size_t solid) const {
  const SystemSolid& row = system_->solids()[solid];
  // A constant known at one temperature only is still the best guess elsewhere; the user is told.
  if (row.min_C == row.max_C) return true;
  return t_.v >= row.min_C - covered_margin_C && t_.v <= row.max_C + covered_margin_C;
}

Result<Equilibrium> Solver::solve(const Task& task) const {
  if (Outcome ok = check(*system_, task); !ok) return ok.problems();
  Workspace w(*this, task);
  int iterations = 0;

  // First guess of the coefficients: every component as itself.
  Vector guess = Vector::Zero(w.count());
  for (Index i = 0; i < w.components(); ++i) guess(i) = std::max(w.total(i), 0.0) / w.water_kg;
  w.ln_aw = w.activity_coefficients(guess, w.ln_gamma);
  cold_start(w);
  bool found = solve_convex(w, 1e-2, iterations);
  if (found) {
    move_coefficients(w, 1);
    balance_water(w);
    cold_start(w);
    found = solve_convex(w, 1e-3, iterations);
  }
  found = found && finish(w, iterations);
  const auto again = [&](auto&& way) {
    w = Workspace(*this, task);
    w.ln_aw = w.activity_coefficients(guess, w.ln_gamma);
    cold_start(w);
    return way(w, iterations) && finish(w, iterations);
  };
  found = found || again(approach) || again(concentrate);
  if (found && scarce(w)) {
    w.rebase(molalities(w), w.ln_aw);
    found = solve_coupled(w, iterations);
  }
  if (!found)
    return task.pH && taken_out(w) ? cannot_hold(system_->components(), *task.pH) : beyond_reach(w, task);

  Equilibrium answer = answer_from(w, *this, task, iterations);
  const Residuals& r = answer.residuals;
  if (r.mass_balance > 1e-12 || r.mass_action > 1e-10 || r.saturation > 1e-8 || r.negative_solid > 0)
    return not_converged(failed_check(r));
  return answer;
}

}  // namespace bathwright::speciation
