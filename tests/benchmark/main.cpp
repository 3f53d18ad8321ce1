// The engine and general solvers on the same baths, in one run.
//   bathwright_benchmark [--results=FILE] [--cases=N] [options of Google Benchmark]
// Status 1: the engine itself failed on a case, or a file could not be written.
#include <benchmark/benchmark.h>

#include <algorithm>
#include <charconv>
#include <chrono>
#include <cmath>
#include <functional>
#include <iostream>
#include <limits>
#include <memory>
#include <optional>
#include <random>
#include <string>
#include <string_view>
#include <vector>

#include "../support/bath_systems.hpp"
#include "fixed_point.hpp"
#include "judge.hpp"
#include "results.hpp"

namespace {

using namespace bathwright;
using namespace bathwright::benchmark;
using activity::ModelKind;
using speciation::ChemicalSystem;
using speciation::Solver;
using speciation::Task;

constexpr double spread = 2;
constexpr unsigned seed = 20261201;
constexpr units::Celsius temperature{25};
constexpr std::size_t usual_cases = 500;

/// Where the totals of the cases come from.
enum class Totals { usual, wild };

std::string_view name(Totals totals) { return totals == Totals::usual ? "usual" : "wild"; }

/// One bath under one model, with its cases.
struct Bench {
  std::string system;
  Solver solver;
  std::vector<Task> tasks;
  std::size_t solids;
};

/// What is timed: made ready for one case beforehand, then run any number of times.
using Run = std::function<std::optional<Answer>()>;
struct Method {
  std::string name;
  std::function<Run(const Solver&, const Task&)> prepare;
};

Method engine_cold() {
  return {"engine", [](const Solver& solver, const Task& task) -> Run {
            return [&solver, &task]() -> std::optional<Answer> {
              auto found = solver.solve(task);
              if (!found) return std::nullopt;
              return Answer{std::move(found->molality), found->water_kg, std::move(found->solid_mol)};
            };
          }};
}

Method general(std::shared_ptr<RootFinder> finder) {
  std::string name = finder->name();
  return {std::move(name), [finder](const Solver& solver, const Task& task) -> Run {
            auto equations = std::make_shared<Equations>(solver, task);
            return [finder, equations] { return solve(*finder, *equations); };
          }};
}

std::shared_ptr<const Bench> bench(const speciation::BathSystem& bath, ModelKind kind, Totals totals,
                                   std::size_t cases) {
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
  std::vector<Task> tasks;
  std::mt19937 random(seed);
  while (tasks.size() < cases) {
    if (totals == Totals::usual) {
      tasks.push_back(near_usual(bath, *system, spread, random));
    } else {
      tasks.push_back(wild_totals(*system, random, 0));
      let_precipitate(tasks.back(), *system, bath);
    }
  }
  const auto solids = static_cast<std::size_t>(
      std::count(tasks[0].solids.begin(), tasks[0].solids.end(), speciation::SolidRule::may_precipitate));
  return std::make_shared<const Bench>(Bench{bath.name, *std::move(solver), std::move(tasks), solids});
}

double median(std::vector<double> values) {
  if (values.empty()) return std::numeric_limits<double>::quiet_NaN();
  const auto middle = values.begin() + static_cast<std::ptrdiff_t>(values.size() / 2);
  std::nth_element(values.begin(), middle, values.end());
  return *middle;
}

/// Times one method over all cases of a bench: one iteration of Google Benchmark is one case.
void measure(::benchmark::State& state, const Bench& bench, const Method& method, Row& row) {
  constexpr int runs = 3;
  std::vector<double> solved_us;
  row.failures = row.cases = 0;
  row.worst_residual = 0;
  for (auto _ : state) {
    const Task& task = bench.tasks[row.cases++];
    const Run run = method.prepare(bench.solver, task);
    double best = std::numeric_limits<double>::infinity();
    std::optional<Answer> answer;
    for (int i = 0; i < runs; ++i) {
      const auto start = std::chrono::steady_clock::now();
      answer = run();
      best = std::min(best, std::chrono::duration<double>(std::chrono::steady_clock::now() - start).count());
    }
    state.SetIterationTime(best);
    const double residual =
        answer ? worst_residual(bench.solver, task, *answer) : std::numeric_limits<double>::infinity();
    if (residual <= accepted) {
      solved_us.push_back(1e6 * best);
      row.worst_residual = std::max(row.worst_residual, residual);
    } else {
      ++row.failures;
    }
  }
  row.median_us = median(std::move(solved_us));
  state.counters["median_us"] = row.median_us;
  state.counters["failures"] = static_cast<double>(row.failures);
}

/// Hands one method on one bench to Google Benchmark; the row is filled when it has run.
std::unique_ptr<Row> enroll(const std::shared_ptr<const Bench>& on, Totals totals, const Method& method) {
  auto row = std::make_unique<Row>();
  row->system = on->system;
  row->model = activity::name(on->solver.model().kind());
  row->totals = name(totals);
  row->method = method.name;
  row->components = on->solver.system().components().size();
  row->species = on->solver.system().species().size();
  row->solids = on->solids;
  const std::string title = row->system + "/" + row->model + "/" + row->totals + "/cold/" + row->method;
  ::benchmark::RegisterBenchmark(
      title.c_str(),
      [on, method, into = row.get()](::benchmark::State& state) { measure(state, *on, method, *into); })
      ->UseManualTime()
      ->Iterations(static_cast<::benchmark::IterationCount>(on->tasks.size()))
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

}  // namespace

int main(int argc, char** argv) {
  std::vector<char*> arguments(argv, argv + argc);
  const auto results = take(arguments, "--results="), wanted = take(arguments, "--cases=");
  std::size_t cases = usual_cases;
  if (wanted && (std::from_chars(wanted->data(), wanted->data() + wanted->size(), cases).ec != std::errc{} ||
                 cases == 0)) {
    std::cerr << "--cases=" << *wanted << ": expected a number above 0\n";
    return 2;
  }
  int count = static_cast<int>(arguments.size());
  ::benchmark::Initialize(&count, arguments.data());
  if (::benchmark::ReportUnrecognizedArguments(count, arguments.data())) return 2;

  const std::vector<Method> methods{engine_cold(),
                                    general(kinsol()),
                                    general(cminpack()),
                                    general(gsl()),
                                    general(ceres_trust_region()),
                                    general(ceres_tiny())};
  std::vector<std::unique_ptr<Row>> rows;
  for (const speciation::BathSystem& bath : speciation::bath_systems())
    for (const ModelKind kind : {ModelKind::davies, ModelKind::debye_huckel, ModelKind::pitzer})
      for (const Totals totals : {Totals::usual, Totals::wild}) {
        const auto on = bench(bath, kind, totals, cases);
        for (const Method& method : methods) rows.push_back(enroll(on, totals, method));
      }
  ::benchmark::RunSpecifiedBenchmarks();

  std::vector<Row> page;
  bool sound = true;
  const Row* engine = nullptr;
  for (const auto& row : rows) {
    if (row->method == "engine") engine = row.get();
    row->ratio = row->median_us / engine->median_us;
    if (row->method == "engine" && row->totals == name(Totals::usual) && row->failures > 0) {
      std::cerr << row->system << ", " << row->model << ": the engine failed on " << row->failures
                << " cases\n";
      sound = false;
    }
    if (row->cases > 0) page.push_back(*row);
  }
  if (results)
    if (const std::string problem = write_results(*results, page, spread, seed); !problem.empty()) {
      std::cerr << problem << "\n";
      return 1;
    }
  return sound ? 0 : 1;
}
