#include "answer.hpp"

#include <array>
#include <cmath>
#include <limits>
#include <numbers>

#include "elimination.hpp"
#include "verify.hpp"

namespace bathwright::speciation {
namespace {

constexpr double lowest_ln_molality = -700;

/// Whether the Gibbs energy curves upward in every direction at the answer: 1 + sqrt(M) H sqrt(M) positive
/// definite over the kinds of solute that are not traces. Where it does not, the model has left its range and
/// may have other solutions.
/// `w.derivative` is that of the coefficients there.
bool curves_upward(Workspace& w, const SpeciesVector& in_kind) {
  const std::size_t kinds = w.kinds();
  SpeciesVector charge = SpeciesVector::Zero(static_cast<Index>(kinds));
  for (Index j = 0; j < w.count(); ++j) charge(w.kind[static_cast<std::size_t>(j)]) = w.charge(j);
  std::array<std::size_t, activity::max_solutes> abundant;
  std::size_t size = 0;
  for (std::size_t k = 0; k < kinds; ++k)
    if (in_kind(static_cast<Index>(k)) > 1e-6 * in_kind.sum()) abundant[size++] = k;
  // A steep wall across the charged direction, in which single-ion coefficients are a convention and may
  // curve downward.
  double steepest = 0, charged = 0;
  const auto root = [&](std::size_t r) { return std::sqrt(in_kind(static_cast<Index>(abundant[r]))); };
  const auto z = [&](std::size_t r) { return charge(static_cast<Index>(abundant[r])); };
  double* curvature = w.elimination.data();
  const std::size_t stride = padded(size);
  for (std::size_t r = 0; r < size; ++r) {
    charged += z(r) * z(r) * root(r) * root(r);
    for (std::size_t c = 0; c <= r; ++c) {
      const double both =
          w.derivative[abundant[r] * kinds + abundant[c]] + w.derivative[abundant[c] * kinds + abundant[r]];
      curvature[r * stride + c] = (r == c ? 1 : 0) + root(r) * root(c) * both / 2;
      steepest = std::max(steepest, std::abs(curvature[r * stride + c]));
    }
  }
  const double wall = charged > 0 ? 1e4 * (1 + steepest) / charged : 0;
  for (std::size_t r = 0; r < size; ++r)
    for (std::size_t c = 0; c <= r; ++c) curvature[r * stride + c] += wall * z(r) * root(r) * z(c) * root(c);
  std::array<double, activity::max_solutes> unused{};
  return solve_positive_definite(curvature, unused.data(), size, stride);
}

}  // namespace

void read_answer(Workspace& w, const Solver& solver, const Constants& ln_K, const Task& task,
                 Equilibrium& answer) {
  const ChemicalSystem& system = solver.system();
  const std::size_t count = system.species().size();
  answer.molality.assign(count, 0);
  answer.ln_gamma.assign(count, 0);
  answer.ln_activity.assign(count, -std::numeric_limits<double>::infinity());
  SpeciesVector m = w.ln_m, in_kind;
  // What a double cannot hold is none of it.
  m = (m.array() < lowest_ln_molality).select(0, m.array().exp());
  w.sum_kinds(m, in_kind);
  for (std::size_t j = 0; j < w.species.size(); ++j) answer.molality[w.species[j]] = m(static_cast<Index>(j));
  // One last look at the coefficients, so that what is printed belongs together to the last digit.
  SpeciesVector ln_gamma(static_cast<Index>(w.kinds()));
  answer.ln_water_activity =
      w.model().evaluate_kinds({in_kind.data(), w.kinds()}, {ln_gamma.data(), w.kinds()}, w.derivative);
  for (std::size_t j = 0; j < count; ++j) answer.ln_gamma[j] = ln_gamma(w.model().kind_of()[j]);
  for (std::size_t j = 0; j < w.species.size(); ++j)
    answer.ln_activity[w.species[j]] = w.ln_m(static_cast<Index>(j)) + answer.ln_gamma[w.species[j]];
  answer.water_kg = w.water_kg;
  answer.ionic_strength = 0;
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
  answer.saturation_index.clear();
  answer.gas_bar.clear();
  for (std::size_t k = 0; k < system.solids().size(); ++k)
    answer.saturation_index.push_back((ln_product(system.solids()[k]) - ln_K.solids[k]) / std::numbers::ln10);
  for (std::size_t g = 0; g < system.gases().size(); ++g)
    answer.gas_bar.push_back(std::exp(ln_product(system.gases()[g]) - ln_K.gases[g]));
  answer.solid_mol.assign(system.solids().size(), 0);
  answer.gas_mol.assign(task.gases.size(), 0);
  answer.held_ph_mol = 0;
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
  answer.stable = curves_upward(w, in_kind);
  answer.residuals = verify(solver, ln_K, task, answer);
}

}  // namespace bathwright::speciation
