#include "active_set.hpp"

#include <cmath>

namespace bathwright::speciation {
namespace {

Vector condition_of(const Phase& phase, WaterActivity water) {
  if (water == WaterActivity::fixed) return phase.condition;
  Vector extended(phase.condition.size() + 1);
  extended << phase.condition, phase.water;
  return extended;
}

}  // namespace

double ln_saturation(const Workspace& w, const Phase& phase) {
  return phase.condition.dot(w.x) + phase.water * w.ln_aw - phase.ln_K;
}

bool let_in(Workspace& w, std::size_t entering, WaterActivity water) {
  constexpr double negligible = 1e-9;
  std::vector<std::size_t> active;
  for (std::size_t k = 0; k < w.phases.size(); ++k)
    if (w.phases[k].active) active.push_back(k);
  const Vector wanted = condition_of(w.phases[entering], water);
  Matrix S(wanted.size(), static_cast<Index>(active.size()));
  for (std::size_t c = 0; c < active.size(); ++c)
    S.col(static_cast<Index>(c)) = condition_of(w.phases[active[c]], water);
  if (!active.empty()) {
    const Vector mix = S.colPivHouseholderQr().solve(wanted);
    if ((S * mix - wanted).lpNorm<Eigen::Infinity>() < negligible) {
      // One mol of the entering phase takes `mix` mol of the active ones.
      std::size_t leaving = w.phases.size();
      double least = 0;
      for (std::size_t c = 0; c < active.size(); ++c) {
        const Phase& phase = w.phases[active[c]];
        const double used = mix(static_cast<Index>(c));
        if (used < negligible || phase.kind != Phase::Kind::precipitate) continue;
        const double lasts = phase.mol / used;
        if (leaving == w.phases.size() || lasts < least) leaving = active[c], least = lasts;
      }
      if (leaving == w.phases.size()) return false;
      w.phases[leaving].active = false;
      w.phases[leaving].mol = 0;
    }
  }
  w.phases[entering].active = true;
  w.phases[entering].mol = 0;
  return true;
}

}  // namespace bathwright::speciation
