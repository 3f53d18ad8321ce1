#include <algorithm>
#include <atomic>
#include <cmath>
#include <mutex>
#include <random>
#include <thread>

#include "limits.hpp"

namespace bathwright::forecast {
namespace {

/// Normal deviates that are the same on every platform: std::normal_distribution is not.
class Normal {
 public:
  explicit Normal(std::uint64_t seed) : random_(seed) {}
  double operator()() {
    const double u = uniform(), v = uniform();
    return std::sqrt(-2 * std::log(u)) * std::cos(2 * 3.14159265358979323846 * v);  // Box and Muller, 1958
  }
  /// A factor of mean 1 and relative standard deviation u, lognormal.
  double factor(double u) {
    const double s2 = std::log1p(u * u), deviate = (*this)();
    return u > 0 ? std::exp(std::sqrt(s2) * deviate - s2 / 2) : 1;
  }

 private:
  double uniform() { return (static_cast<double>(random_() >> 11) + 0.5) * 0x1p-53; }
  std::mt19937_64 random_;
};

double or_zero(double u) { return std::isnan(u) ? 0 : u; }

Draw drawn(const Prepared& p, std::uint64_t seed, double u_level) {
  Normal normal(seed);
  const Policy& policy = p.policy;
  Draw draw;
  draw.area = normal.factor(policy.area_m2_per_shift.u_rel);
  draw.drag_out = normal.factor(policy.drag_out_L_per_m2.u_rel);
  draw.drag_in = normal.factor(policy.drag_in_L_per_m2.u_rel);
  draw.evaporation = normal.factor(policy.evaporation_L_per_h.u_rel);
  draw.water = normal.factor(policy.u_water_rel);
  for (const Work& work : policy.work) draw.work.push_back(normal.factor(work.per_shift.u_rel));
  for (const bath::Use& use : p.chemistry.type().uses) {
    draw.effects.push_back(normal.factor(or_zero(use.effects_u_rel)));
    draw.efficiency.push_back(
        normal.factor(or_zero(use.u_cathode_efficiency) / std::max(use.cathode_efficiency, 1e-9)));
  }
  for (std::size_t i = 0; i < p.chemistry.components().size(); ++i)
    draw.level.push_back(normal.factor(u_level));
  return draw;
}

/// Percentile of sorted values by linear interpolation; unbounded ones count as large.
double percentile(std::vector<double>& values, double share) {
  std::ranges::sort(values);
  const double at = share * static_cast<double>(values.size() - 1);
  const auto low = static_cast<std::size_t>(at);
  const std::size_t high = std::min(low + 1, values.size() - 1);
  if (!std::isfinite(values[high])) return at > static_cast<double>(low) ? values[high] : values[low];
  return values[low] + (at - static_cast<double>(low)) * (values[high] - values[low]);
}

template <class Value>
Band band(const std::vector<Run>& runs, const Value& value) {
  Band band;
  for (std::size_t d = 0; d < runs.front().days.size(); ++d) {
    std::vector<double> all;
    for (const Run& run : runs)
      if (const double v = value(run.days[d]); !std::isnan(v)) all.push_back(v);
    const bool none = all.empty();
    band.p05.push_back(none ? bath::not_given : percentile(all, 0.05));
    band.p50.push_back(none ? bath::not_given : percentile(all, 0.50));
    band.p95.push_back(none ? bath::not_given : percentile(all, 0.95));
  }
  return band;
}

std::optional<double> finite(double day) { return std::isfinite(day) ? std::optional(day) : std::nullopt; }

}  // namespace

Result<Bands> Forecast::sample(const bath::TankState& start, const Sampling& sampling,
                               const std::function<bool(double)>& progress) const {
  if (sampling.samples < 1)
    return Problem{Fault::bad_input, "samples", std::to_string(sampling.samples), "1 or more", ""};
  const auto count = static_cast<std::size_t>(sampling.samples);
  std::vector<Run> runs(count);
  std::vector<Problems> failed(count);
  std::atomic<std::size_t> next{0}, done{0};
  std::atomic<bool> stopped{false};
  std::mutex telling;
  const auto work = [&] {
    for (std::size_t i; !stopped && (i = next++) < count;) {
      const Draw draw = drawn(*prepared_, sampling.seed * 0x9E3779B97F4A7C15u + i, sampling.u_level_rel);
      auto one = run(start, &draw);
      if (one)
        runs[i] = *std::move(one);
      else
        failed[i] = one.problems();
      const double share = static_cast<double>(++done) / static_cast<double>(count);
      if (!progress) continue;
      const std::scoped_lock lock(telling);
      if (!progress(share)) stopped = true;
    }
  };
  {
    std::vector<std::jthread> others;
    for (unsigned t = 1; t < sampling.threads; ++t) others.emplace_back(work);
    work();
  }
  if (stopped) return Problem{Fault::refused, "forecast", "stopped before it was done", "", ""};
  for (const Problems& problems : failed)
    if (!problems.empty()) return problems;

  Bands bands;
  bands.samples = sampling.samples;
  for (const Day& day : runs.front().days) bands.day.push_back(day.day);
  for (std::size_t q = 0; q < runs.front().days.front().quantity_g_per_L.size(); ++q)
    bands.quantity.push_back(band(runs, [&](const Day& d) { return d.quantity_g_per_L[q]; }));
  for (std::size_t s = 0; s < prepared_->watched.size(); ++s) {
    bands.working.push_back(band(runs, [&](const Day& d) { return d.working_log10[s]; }));
    bands.idle.push_back(band(runs, [&](const Day& d) { return d.idle_log10[s]; }));
  }
  bands.pH = band(runs, [](const Day& d) { return d.pH; });
  bands.cost = band(runs, [](const Day& d) { return d.cost; });
  bands.waste_L = band(runs, [](const Day& d) { return d.waste_L; });
  for (const Limit& limit : limits_of(*prepared_)) {
    std::vector<double> days;
    std::size_t met = 0;
    for (const Run& run : runs) {
      const auto day = day_met(limit, run.days);
      days.push_back(day.value_or(HUGE_VAL));
      met += day.has_value();
    }
    bands.limits.push_back(as_met(*prepared_, limit, finite(percentile(days, 0.05)),
                                  finite(percentile(days, 0.50)), finite(percentile(days, 0.95)),
                                  static_cast<double>(met) / static_cast<double>(count)));
  }
  return bands;
}

}  // namespace bathwright::forecast
