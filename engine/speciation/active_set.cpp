#include "active_set.hpp"

#include <array>
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
  std::array<std::size_t, most_rows> active{};
  Index count = 0;
  const Vector wanted = condition_of(w.phases[entering], water);
  for (std::size_t k = 0; k < w.phases.size(); ++k)
    if (w.phases[k].active) {
      if (count == wanted.size()) return false;  // more conditions than unknowns
      active[static_cast<std::size_t>(count++)] = k;
    }
  if (count > 0) {
    Table S(wanted.size(), count);
    for (Index c = 0; c < count; ++c)
      S.col(c) = condition_of(w.phases[active[static_cast<std::size_t>(c)]], water);
    const Vector mix = S.colPivHouseholderQr().solve(wanted);
    if (Vector(S.lazyProduct(mix) - wanted).lpNorm<Eigen::Infinity>() < negligible) {
      // One mol of the entering phase takes `mix` mol of the active ones.
      std::size_t leaving = w.phases.size();
      double least = 0;
      for (Index c = 0; c < count; ++c) {
        const Phase& phase = w.phases[active[static_cast<std::size_t>(c)]];
        const double used = mix(c);
        if (used < negligible || phase.kind != Phase::Kind::precipitate) continue;
        const double lasts = phase.mol / used;
        if (leaving == w.phases.size() || lasts < least)
          leaving = active[static_cast<std::size_t>(c)], least = lasts;
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
