#include <Eigen/Dense>
#include <algorithm>
#include <bathwright/dosing/chance.hpp>
#include <bathwright/dosing/plan.hpp>
#include <cmath>

#include "sampled_ends.hpp"

namespace bathwright::dosing {
namespace {

using bath::Aim;
using bath::Chemistry;
using bath::Tank;
using bath::TankState;
using Eigen::Index;
using Eigen::MatrixXd;

bool inside(const Aim& aim, double level) {
  const double rounding = 1e-9 * std::abs(aim.aim);  // an end on the edge is inside
  return level >= aim.low - rounding && level <= aim.high + rounding;
}

/// By linear interpolation between the samples that were solved.
Percentiles percentiles(std::vector<double> values) {
  std::erase_if(values, [](double v) { return std::isnan(v); });
  if (values.empty()) return {};
  std::ranges::sort(values);
  const auto at = [&](double share) {
    const double place = share * static_cast<double>(values.size() - 1);
    const auto low = static_cast<std::size_t>(place);
    const std::size_t high = std::min(low + 1, values.size() - 1);
    return values[low] + (place - static_cast<double>(low)) * (values[high] - values[low]);
  };
  return {at(0.05), at(0.5), at(0.95)};
}

template <class Holds>
double share_of(std::size_t samples, Holds holds) {
  std::size_t count = 0;
  for (std::size_t i = 0; i < samples; ++i) count += holds(i);
  return static_cast<double>(count) / static_cast<double>(samples);
}

Chances counted(const Tank& tank, const SampledEnds& ends, const Sampling& sampling) {
  const auto samples = static_cast<std::size_t>(sampling.samples);
  Chances chances;
  chances.samples = sampling.samples;
  chances.unsolved = ends.unsolved;
  const auto level_inside = [&](std::size_t aim, std::size_t i) {
    return inside(tank.aims[aim], ends.level[aim][i]);
  };
  const auto windows = [&](std::size_t i) {
    for (std::size_t a = 0; a < tank.aims.size(); ++a)
      if (!level_inside(a, i)) return false;
    return true;
  };
  const auto dissolved = [](double log10_room) { return log10_room >= 0; };
  chances.in_every_window = share_of(samples, windows);
  chances.all = share_of(samples, [&](std::size_t i) {
    return windows(i) && std::ranges::all_of(ends.solids, [&](const SampledEnds::Solid& solid) {
             return !solid.covers_working || dissolved(solid.working_log10[i]);
           });
  });
  for (std::size_t a = 0; a < tank.aims.size(); ++a)
    chances.levels.push_back({tank.aims[a].quantity,
                              share_of(samples, [&](std::size_t i) { return level_inside(a, i); }),
                              percentiles(ends.level[a])});
  for (const SampledEnds::Solid& solid : ends.solids) {
    SolidChance chance{solid.name, {}, {}, percentiles(solid.working_log10), percentiles(solid.idle_log10)};
    if (solid.covers_working)
      chance.working = share_of(samples, [&](std::size_t i) { return dissolved(solid.working_log10[i]); });
    if (solid.covers_idle)
      chance.idle = share_of(samples, [&](std::size_t i) { return dissolved(solid.idle_log10[i]); });
    chances.solids.push_back(std::move(chance));
  }
  return chances;
}

}  // namespace

std::vector<double> covariance_of(const Chemistry& chemistry, const TankState& now,
                                  const std::map<std::string, double>& u_g_per_L, double u_volume_L) {
  const auto& components = chemistry.components();
  const auto n = static_cast<Index>(components.size());
  const double volume = chemistry.volume_L(now);
  std::vector<const bath::Quantity*> quantities;
  for (const bath::Quantity& quantity : chemistry.type().quantities)
    if (u_g_per_L.contains(quantity.id) && !quantity.counts.contains(components[chemistry.found_by_charge()]))
      quantities.push_back(&quantity);
  std::ranges::stable_sort(quantities, {},
                           [](const bath::Quantity* q) { return std::pair(q->counts.size(), q->salt_view); });
  MatrixXd rows(0, n);
  std::vector<double> u_mol;
  for (const bath::Quantity* quantity : quantities) {
    MatrixXd more = MatrixXd::Zero(rows.rows() + 1, n);
    more.topRows(rows.rows()) = rows;
    for (const auto& [name, count] : quantity->counts)
      more(rows.rows(), std::ranges::find(components, name) - components.begin()) = count;
    if (Eigen::ColPivHouseholderQR<MatrixXd>(more).rank() < more.rows()) continue;  // follows from the others
    rows = std::move(more);
    u_mol.push_back(u_g_per_L.at(quantity->id) * volume / quantity->formula.molar_mass().v);
  }
  MatrixXd covariance = MatrixXd::Zero(n + 1, n + 1);
  if (rows.rows() > 0) {
    const MatrixXd back = Eigen::CompleteOrthogonalDecomposition<MatrixXd>(rows).pseudoInverse();
    const auto u = Eigen::Map<const Eigen::VectorXd>(u_mol.data(), static_cast<Index>(u_mol.size()));
    covariance.topLeftCorner(n, n) = back * u.cwiseAbs2().asDiagonal() * back.transpose();
  }
  Eigen::VectorXd per_litre(n + 1);
  for (Index i = 0; i < n; ++i) per_litre(i) = now.component_mol[static_cast<std::size_t>(i)] / volume;
  per_litre(n) = 1;
  covariance += u_volume_L * u_volume_L * per_litre * per_litre.transpose();
  return {covariance.data(), covariance.data() + covariance.size()};
}

Result<Chances> chance_of(const Tank& tank, const Chemistry& chemistry, const TankState& now,
                          const Plan& plan, const Spread& spread, const Sampling& sampling,
                          const std::function<bool(double)>& progress) {
  const auto ends = sampled_ends(tank, chemistry, now, plan, spread, sampling, progress);
  if (!ends) return ends.problems();
  return counted(tank, *ends, sampling);
}

namespace {

/// The spread after a second look at one thing, as good as the first: half its variance is left.
struct Looked {
  std::string at;
  Spread spread;
};

std::vector<Looked> looked_again(const Chemistry& chemistry, const TankState& now, const Spread& spread) {
  std::vector<Looked> all;
  const auto n = static_cast<Index>(chemistry.components().size());
  if (!spread.covariance.empty()) {
    const MatrixXd covariance = Eigen::Map<const MatrixXd>(spread.covariance.data(), n + 1, n + 1);
    const double volume = chemistry.volume_L(now);
    /// `seen`: how what is looked at moves with the amounts and the volume.
    const auto look = [&](const std::string& at, const Eigen::VectorXd& seen) {
      const Eigen::VectorXd with = covariance * seen;
      const double variance = seen.dot(with);
      if (!(variance > 0)) return;
      const MatrixXd after = covariance - with * with.transpose() / (2 * variance);
      all.push_back({at, spread});
      all.back().spread.covariance.assign(after.data(), after.data() + after.size());
    };
    for (const bath::Component& component : chemistry.type().components) {
      if (component.found_by != bath::FoundBy::analysis) continue;
      const auto i =
          std::ranges::find(chemistry.components(), component.species) - chemistry.components().begin();
      Eigen::VectorXd level = Eigen::VectorXd::Unit(n + 1, i) / volume;
      level(n) = -now.component_mol[static_cast<std::size_t>(i)] / (volume * volume);
      look(component.species, level);
    }
    look("volume", Eigen::VectorXd::Unit(n + 1, n));
  }
  if (chemistry.type().acid_by_pH() && spread.u_pH > 0) {
    all.push_back({"pH", spread});
    all.back().spread.u_pH /= std::sqrt(2.0);
  }
  return all;
}

}  // namespace

Result<std::vector<SecondLook>> second_looks(const Tank& tank, const Chemistry& chemistry,
                                             const TankState& now, const Plan& plan, const Spread& spread,
                                             const Sampling& sampling,
                                             const std::function<bool(double)>& progress) {
  std::vector<SecondLook> looks;
  for (const Looked& looked : looked_again(chemistry, now, spread)) {
    const auto chances = chance_of(tank, chemistry, now, plan, looked.spread, sampling, progress);
    if (!chances) return chances.problems();
    looks.push_back({looked.at, chances->in_every_window});
  }
  std::ranges::stable_sort(looks, std::ranges::greater{}, &SecondLook::in_every_window);
  return looks;
}

}  // namespace bathwright::dosing
