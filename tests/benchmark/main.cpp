// The engine and general solvers on the same baths, in one run.
//   bathwright_benchmark [--results=FILE] [--cases=N] [options of Google Benchmark]
// Status 1: the engine failed on a bath that a shop could run, or a file could not be written.
#include <benchmark/benchmark.h>

#include <algorithm>
#include <array>
#include <charconv>
#include <chrono>
#include <cmath>
#include <iostream>
#include <limits>
#include <memory>
#include <numbers>
#include <optional>
#include <random>
#include <sstream>
#include <string>
#include <string_view>
#include <vector>

#include "../support/bath_systems.hpp"
#include "judge.hpp"
#include "method.hpp"
#include "monte_carlo.hpp"
#include "results.hpp"

namespace {

using namespace bathwright;
using namespace bathwright::benchmark;
using activity::ModelKind;
using speciation::BathSystem;
using speciation::ChemicalSystem;
using speciation::Solver;
using speciation::Task;

constexpr double spread = 2, sampled_spread = 1.03;
constexpr unsigned seed = 20261201;
constexpr units::Celsius temperature{25};
constexpr int runs = 3;  // the best one counts
constexpr std::size_t usual_cases = 500, samples_per_case = 20, sampling_threads = 2;

/// One solve to time: `next` from nothing, or from the answer of `before`.
struct Case {
  std::optional<Task> before;
  Task next;
};

/// One bath under one model.
struct Bench {
  const BathSystem* bath;
  std::shared_ptr<const ChemicalSystem> system;
  Solver solver;
};

std::shared_ptr<const Bench> bench(const BathSystem& bath, ModelKind kind) {
  auto made = ChemicalSystem::make(speciation::equilibria_for(kind), bath.components());
  if (!made) {
    std::cerr << text(made.problems()) << "\n";
    std::exit(1);
  }
  auto system = std::make_shared<const ChemicalSystem>(*std::move(made));
  auto solver = Solver::prepare(system, kind, temperature);
  if (!solver) {
    std::cerr << text(solver.problems()) << "\n";
    std::exit(1);
  }
  return std::make_shared<const Bench>(Bench{&bath, system, *std::move(solver)});
}

constexpr std::string_view cold = "cold", warm = "warm", wild = "cold, wild", sampled = "Monte Carlo";

std::vector<Case> make_cases(const Bench& bench, std::string_view from, std::size_t count) {
  std::vector<Case> cases;
  std::mt19937 random(seed);
  while (cases.size() < count) {
    if (from == wild) {
      Task task = wild_totals(*bench.system, random, 0);
      let_precipitate(task, *bench.system, *bench.bath);
      cases.push_back({std::nullopt, std::move(task)});
      continue;
    }
    Task task = near_usual(*bench.bath, *bench.system, spread, random);
    if (from == cold) {
      cases.push_back({std::nullopt, std::move(task)});
    } else {
      Task next = task;
      for (const auto& [component, mol] : bench.bath->addition)
        next.component_mol[*bench.system->component(component)] += mol;
      cases.push_back({std::move(task), std::move(next)});
    }
  }
  return cases;
}

/// Amounts as an analysis leaves them, constants within their uncertainties.
std::vector<Sample> make_samples(const Bench& bench, std::size_t count) {
  std::vector<Sample> samples;
  std::mt19937 random(seed);
  std::normal_distribution<double> normal;
  const auto move = [&](std::vector<double>& ln_K, const auto& rows) {
    for (std::size_t k = 0; k < rows.size(); ++k)
      ln_K[k] += std::numbers::ln10 * rows[k].constant.uncertainty * normal(random);
  };
  while (samples.size() < count) {
    Sample sample{near_usual(*bench.bath, *bench.system, sampled_spread, random), bench.solver.ln_K()};
    move(sample.ln_K.species, bench.system->species());
    move(sample.ln_K.solids, bench.system->solids());
    samples.push_back(std::move(sample));
  }
  return samples;
}

double median(std::vector<double> values) {
  if (values.empty()) return std::numeric_limits<double>::quiet_NaN();
  const auto middle = values.begin() + static_cast<std::ptrdiff_t>(values.size() / 2);
  std::nth_element(values.begin(), middle, values.end());
  return *middle;
}

void show(::benchmark::State& state, const Row& row) {
  state.counters["us"] = row.time_us;
  state.counters["failures"] = static_cast<double>(row.failures);
}

/// Times one method over all cases: one iteration of Google Benchmark is one case.
void measure_cases(::benchmark::State& state, const Bench& bench, const std::vector<Case>& cases,
                   const NamedMethod& named, Row& row) {
  const auto method = named.make(bench.solver, cases.front().next);
  std::vector<double> solved_us;
  row.failures = row.cases = 0;
  row.worst_residual = 0;
  for (auto _ : state) {
    const Case& one = cases[row.cases++];
    double best = std::numeric_limits<double>::infinity();
    bool solved = true;
    for (int i = 0; i < runs && solved; ++i) {
      if (one.before) solved = method->solve(*one.before);
      const auto start = std::chrono::steady_clock::now();
      solved = solved && (one.before ? method->solve_near_last(one.next) : method->solve(one.next));
      best = std::min(best, std::chrono::duration<double>(std::chrono::steady_clock::now() - start).count());
    }
    state.SetIterationTime(best);
    const double residual =
        solved ? worst_residual(bench.solver, bench.solver.ln_K(), one.next, method->answer()) : 2 * accepted;
    if (residual <= accepted) {
      solved_us.push_back(1e6 * best);
      row.worst_residual = std::max(row.worst_residual, residual);
    } else {
      ++row.failures;
    }
  }
  row.time_us = median(std::move(solved_us));
  show(state, row);
}

void measure_samples(::benchmark::State& state, const Bench& bench, const std::vector<Sample>& samples,
                     const NamedMethod& named, Row& row) {
  for (auto _ : state) {
    SampledRun run = run_samples(named, bench.solver, samples, sampling_threads);
    for (int again = 1; again < runs; ++again)
      if (const SampledRun next = run_samples(named, bench.solver, samples, sampling_threads);
          next.seconds < run.seconds)
        run = next;
    state.SetIterationTime(run.seconds);
    row.cases = samples.size();
    row.failures = run.failures;
    row.worst_residual = run.worst_residual;
    row.time_us = 1e6 * run.seconds / static_cast<double>(samples.size());
  }
  show(state, row);
}

/// Hands one measurement to Google Benchmark; the row is filled when it has run.
template <class Measure>
std::unique_ptr<Row> enroll(const Bench& bench, std::string_view from, const NamedMethod& method,
                            std::size_t iterations, Measure measure) {
  auto row = std::make_unique<Row>();
  row->system = bench.bath->name;
  row->model = activity::name(bench.solver.model().kind());
  row->cases_from = from;
  row->method = method.name;
  row->components = bench.system->components().size();
  row->species = bench.system->species().size();
  row->solids = bench.bath->solids.size();
  const std::string title = row->system + "/" + row->model + "/" + row->cases_from + "/" + row->method;
  ::benchmark::RegisterBenchmark(
      title.c_str(), [measure, into = row.get()](::benchmark::State& state) { measure(state, *into); })
      ->UseManualTime()
      ->Iterations(static_cast<::benchmark::IterationCount>(iterations))
      ->Unit(::benchmark::kMicrosecond);
  return row;
}

/// Takes "--name=value" out of the arguments.
std::optional<std::string> take(std::vector<char*>& arguments, std::string_view option) {
  for (auto at = arguments.begin(); at != arguments.end(); ++at)
    if (std::string_view(*at).starts_with(option)) {
      std::string value(std::string_view(*at).substr(option.size()));
      arguments.erase(at);
      return value;
    }
  return std::nullopt;
}

std::string how_the_cases_are_made(std::size_t cases) {
  std::ostringstream how;
  how << "- cold: the usual bath at " << temperature.v
      << " degC, every amount times a random factor between 1/" << spread << " and " << spread << " (seed "
      << seed << "), from nothing\n"
      << "- warm: the same, and one portion more of the salt that is added most, from the answer before\n"
      << "- cold, wild: every amount at random between 1e-12 and 8 mol/kg, even in its logarithm\n"
      << "- Monte Carlo: " << samples_per_case * cases << " samples, every amount within a factor "
      << sampled_spread << ", every constant moved by its uncertainty, " << sampling_threads << " threads\n\n"
      << "us: median over the cases a method solved, of each the best of " << runs
      << " runs, one thread; of a Monte Carlo, processor time of the slower thread "
         "over all samples.\n"
         "ratio: of the times, to the engine. failures: not converged, refused, or further off than "
      << accepted << " by one judge for all.\nworst residual: by that judge, among the answers that count.\n";
  return how.str();
}

}  // namespace

int main(int argc, char** argv) {
  std::vector<char*> arguments(argv, argv + argc);
  const auto results = take(arguments, "--results="), wanted = take(arguments, "--cases=");
  std::size_t count = usual_cases;
  if (wanted) {
    const char* end = wanted->data() + wanted->size();
    if (const auto read = std::from_chars(wanted->data(), end, count);
        read.ec != std::errc{} || read.ptr != end || count == 0) {
      std::cerr << "--cases=" << *wanted << ": expected a number above 0\n";
      return 2;
    }
  }
  int left = static_cast<int>(arguments.size());
  ::benchmark::Initialize(&left, arguments.data());
  if (::benchmark::ReportUnrecognizedArguments(left, arguments.data())) return 2;

  std::vector<std::unique_ptr<Row>> rows;
  for (const BathSystem& bath : speciation::bath_systems())
    for (const ModelKind kind : {ModelKind::davies, ModelKind::debye_huckel, ModelKind::sit,
                               ModelKind::pitzer}) {
      const auto on = bench(bath, kind);
      for (const std::string_view from : {cold, warm, wild}) {
        const auto cases = std::make_shared<const std::vector<Case>>(make_cases(*on, from, count));
        for (const NamedMethod& method : methods())
          rows.push_back(enroll(*on, from, method, count, [on, cases, &method](auto& state, Row& row) {
            measure_cases(state, *on, *cases, method, row);
          }));
      }
      const auto samples =
          std::make_shared<const std::vector<Sample>>(make_samples(*on, samples_per_case * count));
      for (const NamedMethod& method : methods())
        rows.push_back(enroll(*on, sampled, method, 1, [on, samples, &method](auto& state, Row& row) {
          measure_samples(state, *on, *samples, method, row);
        }));
    }
  ::benchmark::RunSpecifiedBenchmarks();

  std::vector<Row> page;
  bool sound = true;
  const Row* engine = nullptr;
  for (const auto& row : rows) {
    if (row->method == methods().front().name) engine = row.get();
    row->ratio = row->time_us / engine->time_us;
    if (row.get() == engine && row->cases_from != wild && row->failures > 0) {
      std::cerr << row->system << ", " << row->model << ", " << row->cases_from << ": the engine failed on "
                << row->failures << " of " << row->cases << "\n";
      sound = false;
    }
    if (row->cases > 0) page.push_back(*row);
  }
  if (results)
    if (const std::string problem = write_results(*results, page, how_the_cases_are_made(count));
        !problem.empty()) {
      std::cerr << problem << "\n";
      return 1;
    }
  return sound ? 0 : 1;
}
