#include "study.hpp"

#include <algorithm>
#include <chrono>
#include <cmath>
#include <functional>

namespace simulated_shops {
namespace {

using namespace bathwright::learning;

/// The true figure in the unit of the parameter.
double truth_of(const Parameter& p, const Kind& kind, const Truth& truth) {
  std::size_t w = 0;
  while (w + 1 < kind.work.size() && kind.work[w].use != p.use) ++w;
  switch (p.what) {
    case What::drag_out:
      return p.prior * truth.drag_out;
    case What::evaporation:
      return p.prior * truth.evaporation;
    case What::idle_evaporation:
      return p.prior * truth.idle_evaporation;
    case What::water:
      return p.prior * truth.water;
    case What::work:
      return p.prior * truth.meter[w];
    case What::efficiency:
      return 100 * truth.efficiency[w];
    case What::effects:
      return p.prior * truth.effects[w];
    case What::drag_in:
      break;
  }
  return p.prior;
}

std::mt19937_64 random_of(unsigned seed, int shop) {
  std::seed_seq both{seed, static_cast<unsigned>(shop)};
  return std::mt19937_64(both);
}

}  // namespace

Study study(const Kind& kind, const Bench& bench, int weeks, int shops, unsigned seed, double wide) {
  Study s;
  const auto policy = kind.policy();
  std::vector<std::vector<double>> widths;
  double learning_s = 0;
  for (int shop = 0; shop < shops; ++shop) {
    auto random = random_of(seed, shop);
    const Truth truth = draw_truth(kind, random, wide);
    const Log log = run_shop(kind, truth, weeks, random);
    const auto before = std::chrono::steady_clock::now();
    const auto learned = learn(bench.tank, bench.chemistry, policy, log.history);
    learning_s += std::chrono::duration<double>(std::chrono::steady_clock::now() - before).count();
    if (!learned) {
      ++s.failed;
      continue;
    }
    if (s.rows.empty()) {
      for (const Parameter& p : learned->parameters) s.rows.push_back({p.label});
      widths.resize(s.rows.size());
    }
    for (std::size_t i = 0; i < s.rows.size(); ++i) {
      const Parameter& p = learned->parameters[i];
      const double is = truth_of(p, kind, truth);
      Row& row = s.rows[i];
      ++row.shops;
      row.covered += p.p05 <= is && is <= p.p95;
      const double error = std::log(p.value / is);
      row.bias += error;
      row.rms += error * error;
      row.rms_prior += std::pow(std::log(p.prior / is), 2);
      widths[i].push_back(std::abs((p.p95 - p.p05) / 2 / p.value));
    }
    s.false_suspects += static_cast<double>(learned->suspects.size());
    s.rms_by_policy += learned->rms_by_policy;
    s.rms_learned += learned->rms_learned;
  }
  const double n = std::max(1, shops - s.failed);
  for (std::size_t i = 0; i < s.rows.size(); ++i) {
    Row& row = s.rows[i];
    row.bias /= n;
    row.rms = std::sqrt(row.rms / n);
    row.rms_prior = std::sqrt(row.rms_prior / n);
    const auto middle = widths[i].begin() + static_cast<std::ptrdiff_t>(widths[i].size() / 2);
    std::ranges::nth_element(widths[i], middle);
    row.half_width = *middle;
  }
  s.false_suspects /= n, s.rms_by_policy /= n, s.rms_learned /= n;
  s.seconds = learning_s / n;
  return s;
}

Named named(const Kind& kind, const Bench& bench, int weeks, int shops, unsigned seed, Fault fault) {
  Named result;
  for (int shop = 0; shop < shops; ++shop) {
    auto random = random_of(seed, shop);
    const Truth truth = draw_truth(kind, random);
    const Log log = run_shop(kind, truth, weeks, random, fault);
    if (!log.fault_happened) continue;
    const auto learned = learn(bench.tank, bench.chemistry, kind.policy(), log.history);
    if (!learned) continue;
    ++result.planted;
    bool right = false, there = false;
    for (const Suspect& suspect : learned->suspects) {
      const double day_h = 24;
      // A change of a figure is told from the analyses of weeks around it.
      const double slack_h = fault == Fault::meter_changes ? 14 * day_h : 3.2 * day_h;
      const bool near =
          log.fault_at_h >= suspect.from_h - slack_h && log.fault_at_h <= suspect.when.at_h + slack_h;
      there |= near;
      switch (fault) {
        case Fault::addition_not_logged:
          right |=
              near && suspect.kind == SuspectKind::addition_extra && suspect.subject == log.fault_subject;
          break;
        case Fault::addition_not_made:
          right |=
              near && suspect.kind == SuspectKind::addition_missing && suspect.subject == log.fault_subject;
          break;
        case Fault::titration_wrong:
          right |= near && suspect.kind == SuspectKind::analysis && suspect.subject == log.fault_subject;
          break;
        case Fault::meter_changes:
          right |= near && suspect.kind == SuspectKind::change && suspect.subject.starts_with("work");
          break;
        case Fault::none:
          break;
      }
    }
    result.named += right;
    result.otherwise += there && !right;
    result.share += log.fault_share;
  }
  if (result.planted > 0) result.share /= result.planted;
  return result;
}

}  // namespace simulated_shops
