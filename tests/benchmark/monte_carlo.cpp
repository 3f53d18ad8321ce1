#include "monte_carlo.hpp"

#include <algorithm>
#include <optional>
#include <thread>

#include <time.h>

#include "judge.hpp"

namespace bathwright::benchmark {

namespace {

double thread_seconds() {
  timespec now{};
  clock_gettime(CLOCK_THREAD_CPUTIME_ID, &now);
  return static_cast<double>(now.tv_sec) + 1e-9 * static_cast<double>(now.tv_nsec);
}

}  // namespace

SampledRun run_samples(const NamedMethod& method, const speciation::Solver& solver,
                       const std::vector<Sample>& samples, std::size_t threads) {
  std::vector<std::unique_ptr<Method>> methods;
  for (std::size_t t = 0; t < threads; ++t) methods.push_back(method.make(solver, samples.front().task));
  std::vector<std::optional<Answer>> answers(samples.size());
  std::vector<double> seconds(threads);
  const auto share_of = [&](std::size_t t) {
    const double start = thread_seconds();
    Method& own = *methods[t];
    const std::size_t begin = samples.size() * t / threads, end = samples.size() * (t + 1) / threads;
    own.solve_all(std::span(samples).subspan(begin, end - begin),
                  [&](std::size_t n) { answers[begin + n] = own.answer(); });
    seconds[t] = thread_seconds() - start;
  };
  {
    std::vector<std::jthread> running;
    for (std::size_t t = 0; t < threads; ++t) running.emplace_back(share_of, t);
  }
  SampledRun result;
  result.seconds = *std::max_element(seconds.begin(), seconds.end());
  for (std::size_t i = 0; i < samples.size(); ++i) {
    const double residual =
        answers[i] ? worst_residual(solver, samples[i].ln_K, samples[i].task, *answers[i]) : 2 * accepted;
    if (residual <= accepted)
      result.worst_residual = std::max(result.worst_residual, residual);
    else
      ++result.failures;
  }
  return result;
}

}  // namespace bathwright::benchmark
