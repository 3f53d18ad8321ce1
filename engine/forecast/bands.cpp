#include <algorithm>
#include <atomic>
#include <bathwright/base/normal.hpp>
#include <cmath>
#include <mutex>
#include <thread>

#include "block.hpp"
#include "inputs.hpp"
#include "limits.hpp"

namespace bathwright::forecast {
namespace {

/// A factor of mean 1 and relative standard deviation u, lognormal.
double factor(double deviate, double u) {
  const double s2 = std::log1p(u * u);
  return std::exp(std::sqrt(s2) * deviate - s2 / 2);
}

Draw drawn(const Prepared& p, const std::vector<Input>& inputs, const Eigen::MatrixXd& root,
           std::uint64_t seed) {
  Normal normal(seed);
  Eigen::VectorXd deviates(root.rows());
  for (double& one : deviates) one = normal();
  if (!p.policy.correlations.empty()) deviates = root * deviates;
  Draw draw = as_it_stands(p);
  for (std::size_t i = 0; i < inputs.size(); ++i)
    inputs[i].in(draw) = factor(deviates(static_cast<Eigen::Index>(i)), inputs[i].u_rel);
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
Band band(const std::vector<Run>& runs, std::size_t days, const Value& value) {
  Band band;
  for (std::size_t d = 0; d < days; ++d) {
    std::vector<double> all;
    for (const Run& run : runs) {
      if (d >= run.days.size()) continue;
      if (const double v = value(run.days[d]); !std::isnan(v)) all.push_back(v);
    }
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
  const auto stands = run(start);
  if (!stands) return stands.problems();
  // Blocks of a fixed size, so that the figures do not hang on the number of threads; large enough that what
  // a block does once a day does not count, small enough that stopping is quick.
  constexpr std::size_t block_size = 32;
  const std::size_t blocks = (count + block_size - 1) / block_size;
  const std::vector<Input> inputs = uncertain_inputs(*prepared_, sampling.u_level_rel);
  const auto root = correlation_root(prepared_->policy, inputs);
  if (!root) return root.problems();
  const int horizon = prepared_->policy.horizon_days;
  std::vector<Run> runs(count);
  std::atomic<std::size_t> next{0};
  std::atomic<std::uint64_t> done{0};
  std::atomic<bool> stopped{false};
  std::mutex telling;
  const auto tell = [&](std::uint64_t more) {
    done += more;
    if (!progress) return;
    const std::scoped_lock lock(telling);
    const double all = static_cast<double>(count) * (horizon + 1);
    if (!stopped && !progress(static_cast<double>(done) / all)) stopped = true;
  };
  const auto work = [&] {
    for (std::size_t b; !stopped && (b = next++) < blocks;) {
      const std::size_t first = b * block_size, paths = std::min(block_size, count - first);
      std::vector<Draw> draws;
      for (std::size_t i = first; i < first + paths; ++i)
        draws.push_back(drawn(*prepared_, inputs, *root, sampling.seed * 0x9E3779B97F4A7C15u + i));
      Block block(*prepared_, start, draws);
      block.run(
          horizon, [&](std::size_t path, Day day) { runs[first + path].days.push_back(std::move(day)); },
          [&](int) {
            tell(paths);
            return !stopped;
          });
    }
  };
  {
    std::vector<std::jthread> others;
    for (unsigned t = 1; t < sampling.threads; ++t) others.emplace_back(work);
    work();
  }
  if (stopped) return Problem{Fault::refused, "forecast", "stopped before it was done", "", ""};
  Bands bands;
  bands.samples = sampling.samples;
  for (const Run& run : runs)  // some may end before the others
    if (run.days.size() > bands.day.size()) {
      bands.day.clear();
      for (const Day& day : run.days) bands.day.push_back(day.day);
    }
  for (std::size_t q = 0; q < stands->days.front().quantity_g_per_L.size(); ++q)
    bands.quantity.push_back(
        band(runs, bands.day.size(), [&](const Day& d) { return d.quantity_g_per_L[q]; }));
  for (std::size_t s = 0; s < prepared_->watched.size(); ++s) {
    bands.working.push_back(band(runs, bands.day.size(), [&](const Day& d) { return d.working_log10[s]; }));
    bands.idle.push_back(band(runs, bands.day.size(), [&](const Day& d) { return d.idle_log10[s]; }));
  }
  bands.pH = band(runs, bands.day.size(), [](const Day& d) { return d.pH; });
  bands.cost = band(runs, bands.day.size(), [](const Day& d) { return d.cost; });
  bands.waste_L = band(runs, bands.day.size(), [](const Day& d) { return d.waste_L; });
  for (const Limit& limit : limits_of(*prepared_)) {
    std::vector<double> days;
    std::size_t met = 0;
    for (const Run& run : runs) {
      const auto day = day_met(limit, run.days);
      days.push_back(day.value_or(HUGE_VAL));
      met += day.has_value();
    }
    LimitMet sampled = as_met(*prepared_, limit, day_met(limit, stands->days));
    sampled.day_p05 = finite(percentile(days, 0.05));
    sampled.day_p50 = finite(percentile(days, 0.50));
    sampled.day_p95 = finite(percentile(days, 0.95));
    sampled.share = static_cast<double>(met) / static_cast<double>(count);
    bands.limits.push_back(std::move(sampled));
  }
  return bands;
}

}  // namespace bathwright::forecast
