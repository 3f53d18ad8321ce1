#include "sweep.hpp"

#include <algorithm>
#include <bathwright/speciation/components.hpp>
#include <bathwright/speciation/coverage.hpp>
#include <bathwright/speciation/session.hpp>
#include <chrono>
#include <cstdio>
#include <cstdlib>
#include <iostream>
#include <sstream>
#include <thread>

namespace bathwright::speciation {
namespace {

constexpr double warm_agreement = 1e-9, told_molality = 1e-12;  // relative; mol/kg
constexpr double charge_tolerance = 1e-10;                      // mol/kg

template <class T>
T value_of(Result<T> result) {
  if (result) return *std::move(result);
  std::cerr << text(result.problems()) << "\n";
  std::abort();
}

const char* words(Totals totals) {
  switch (totals) {
    case Totals::near_usual:
      return "near usual";
    case Totals::wild_own_solids:
      return "wild, own solids";
    case Totals::wild_all_solids:
      return "wild, every solid";
  }
  return "";
}

struct Case {
  Totals totals;
  Task task, moved;
};

/// Each case from a generator of its own, so that it can be seen again without those before it.
Case make_case(const BathSystem& bath, const ChemicalSystem& system, unsigned seed, std::size_t number) {
  std::mt19937_64 random(seed * std::uint64_t{1'000'003} + number);
  const Totals totals = all_totals[number / sweep_temperatures_C.size() % all_totals.size()];
  Task task =
      totals == Totals::near_usual ? near_usual(bath, system, 2, random) : wild_totals(system, random);
  if (totals == Totals::wild_own_solids) let_precipitate(task, system, bath);
  if (totals == Totals::wild_all_solids) let_precipitate(task, system);
  Task moved = task;
  std::uniform_int_distribution<std::size_t> any(1, system.components().size() - 1);
  moved.component_mol[any(random)] *= 1.02;
  moved.component_mol[0] = neutral_protons(system, moved.component_mol);
  return {totals, std::move(task), std::move(moved)};
}

double relative_difference(const Equilibrium& a, const Equilibrium& b) {
  double worst = 0;
  for (std::size_t j = 0; j < a.molality.size(); ++j)
    if (b.molality[j] > told_molality) worst = std::max(worst, std::abs(a.molality[j] / b.molality[j] - 1));
  return worst;
}

/// One thread's share of a row.
class Sweeper {
 public:
  Sweeper(const BathSystem& bath, const std::vector<Solver>& solvers, unsigned seed)
      : bath_(bath), solvers_(solvers), seed_(seed) {
    for (const Solver& solver : solvers) {
      paths_.emplace_back(solver);
      fresh_.emplace_back(solver);
    }
  }

  void take(std::size_t number) {
    const std::size_t t = number % solvers_.size();
    const Case drawn = make_case(bath_, solvers_[t].system(), seed_, number);
    ++row.cases;
    const Outcome cold = timed(cold_us, [&] { return paths_[t].solve(drawn.task, answer_); });
    if (!judge(cold, answer_, drawn, drawn.task, number, "cold")) return;
    const Outcome warm = timed(warm_us, [&] { return paths_[t].solve_near_last(drawn.moved, answer_); });
    const Outcome again = fresh_[t].solve(drawn.moved, compared_);
    // One refused and one answered is as bad as two answers.
    if (bool(warm) != bool(again))
      return fail(drawn, drawn.moved, number, warm ? "cold, moved" : "warm",
                  (warm ? again : warm).problems());
    if (!judge(warm, answer_, drawn, drawn.moved, number, "warm")) return;
    ++row.warm_compared;
    const double difference = relative_difference(answer_, compared_);
    if (difference <= warm_agreement) {
      row.worst_warm_difference = std::max(row.worst_warm_difference, difference);
    } else if (!coverage(solvers_[t], answer_).valid && !coverage(solvers_[t], compared_).valid) {
      ++row.several_equilibria;
    } else {
      char text[80];
      std::snprintf(text, sizeof text, "differs by %.2g from the cold solve", difference);
      fail(drawn, drawn.moved, number, "warm", {{Fault::not_converged, "", text, "", ""}});
    }
  }

  SweepRow row;
  std::vector<double> cold_us, warm_us;

 private:
  template <class Solve>
  static Outcome timed(std::vector<double>& us, Solve solve) {
    const auto start = std::chrono::steady_clock::now();
    Outcome outcome = solve();
    us.push_back(std::chrono::duration<double, std::micro>(std::chrono::steady_clock::now() - start).count());
    return outcome;
  }

  /// Whether there is an answer that holds.
  bool judge(const Outcome& outcome, const Equilibrium& answer, const Case& drawn, const Task& task,
             std::size_t number, const char* how) {
    if (!outcome) {
      const Problem& problem = outcome.problems().front();
      if (problem.kind == Fault::out_of_range && !problem.what.empty()) {
        ++row.refusals[problem.what.substr(0, problem.what.find(':'))];
        row.refused_near_usual += drawn.totals == Totals::near_usual;
      } else {
        fail(drawn, task, number, how, outcome.problems());
      }
      return false;
    }
    ++row.answers;
    row.not_stable += !answer.stable;
    row.not_stable_near_usual += !answer.stable && drawn.totals == Totals::near_usual;
    const Residuals& r = answer.residuals;
    Residuals& worst = row.worst;
    worst.mass_balance = std::max(worst.mass_balance, r.mass_balance);
    worst.mass_action = std::max(worst.mass_action, r.mass_action);
    worst.saturation = std::max(worst.saturation, r.saturation);
    worst.charge_mol_per_kg = std::max(worst.charge_mol_per_kg, r.charge_mol_per_kg);
    worst.negative_solid = std::max(worst.negative_solid, r.negative_solid);
    bool finite = true;
    for (const double m : answer.molality) finite = finite && std::isfinite(m) && m >= 0;
    if (finite && r.charge_mol_per_kg <= charge_tolerance) return true;
    fail(drawn, task, number, how,
         {{Fault::not_converged, "", finite ? "charge is not balanced" : "a molality is no number", "", ""}});
    return false;
  }

  void fail(const Case& drawn, const Task& task, std::size_t number, const char* how,
            const Problems& problems) {
    const Solver& solver = solvers_[number % solvers_.size()];
    std::ostringstream line;
    line.precision(17);
    line << bath_.name << ", " << activity::name(solver.model().kind()) << ", seed " << seed_ << ", case "
         << number << " (" << words(drawn.totals) << ", " << solver.temperature().v << " degC), " << how
         << ": " << text(problems) << "\n   ";
    for (std::size_t i = 0; i < task.component_mol.size(); ++i)
      if (task.component_mol[i] != 0)
        line << " " << solver.system().components()[i] << " " << task.component_mol[i];
    row.failures.push_back(line.str());
  }

  const BathSystem& bath_;
  const std::vector<Solver>& solvers_;
  unsigned seed_;
  std::vector<Session> paths_, fresh_;
  Equilibrium answer_, compared_;
};

double median(std::vector<double>& numbers) {
  if (numbers.empty()) return 0;
  const auto middle = numbers.begin() + static_cast<std::ptrdiff_t>(numbers.size() / 2);
  std::nth_element(numbers.begin(), middle, numbers.end());
  return *middle;
}

void add(SweepRow& sum, const SweepRow& part) {
  sum.cases += part.cases;
  sum.answers += part.answers;
  sum.warm_compared += part.warm_compared;
  sum.failures.insert(sum.failures.end(), part.failures.begin(), part.failures.end());
  for (const auto& [reason, times] : part.refusals) sum.refusals[reason] += times;
  sum.refused_near_usual += part.refused_near_usual;
  sum.not_stable += part.not_stable;
  sum.not_stable_near_usual += part.not_stable_near_usual;
  sum.several_equilibria += part.several_equilibria;
  sum.worst.mass_balance = std::max(sum.worst.mass_balance, part.worst.mass_balance);
  sum.worst.mass_action = std::max(sum.worst.mass_action, part.worst.mass_action);
  sum.worst.saturation = std::max(sum.worst.saturation, part.worst.saturation);
  sum.worst.charge_mol_per_kg = std::max(sum.worst.charge_mol_per_kg, part.worst.charge_mol_per_kg);
  sum.worst.negative_solid = std::max(sum.worst.negative_solid, part.worst.negative_solid);
  sum.worst_warm_difference = std::max(sum.worst_warm_difference, part.worst_warm_difference);
}

}  // namespace

SweepRow sweep(const BathSystem& bath, activity::ModelKind model, unsigned seed, std::size_t cases,
               unsigned threads) {
  const auto system = std::make_shared<const ChemicalSystem>(
      value_of(ChemicalSystem::make(equilibria_for(model), bath.components())));
  std::vector<Solver> solvers;
  for (const double t : sweep_temperatures_C)
    solvers.push_back(value_of(Solver::prepare(system, model, {t})));
  std::vector<Sweeper> parts;
  for (unsigned k = 0; k < threads; ++k) parts.emplace_back(bath, solvers, seed);
  std::vector<std::thread> running;
  for (unsigned k = 0; k < threads; ++k)
    running.emplace_back([&parts, k, cases, threads] {
      for (std::size_t number = cases * k / threads; number < cases * (k + 1) / threads; ++number)
        parts[k].take(number);
    });
  for (std::thread& thread : running) thread.join();

  SweepRow row;
  row.system = bath.name;
  row.model = activity::name(model);
  std::vector<double> cold_us, warm_us;
  for (const Sweeper& part : parts) {
    add(row, part.row);
    cold_us.insert(cold_us.end(), part.cold_us.begin(), part.cold_us.end());
    warm_us.insert(warm_us.end(), part.warm_us.begin(), part.warm_us.end());
  }
  row.median_cold_us = median(cold_us);
  row.median_warm_us = median(warm_us);
  return row;
}

std::vector<SweepRow> sweep_all(unsigned seed, std::size_t cases, unsigned threads) {
  std::vector<SweepRow> rows;
  for (const BathSystem& bath : bath_systems())
    for (const activity::ModelKind model : sweep_models)
      rows.push_back(sweep(bath, model, seed, cases, threads));
  return rows;
}

std::string markdown(const std::vector<SweepRow>& rows) {
  std::ostringstream out;
  char line[256];
  out << "| system | model | cases | answers | failures | refused | not stable | several equilibria | cold, us | "
         "warm, us |\n|---|---|---:|---:|---:|---:|---:|---:|---:|---:|\n";
  for (const SweepRow& row : rows) {
    std::size_t refused = 0;
    for (const auto& [reason, times] : row.refusals) refused += times;
    std::snprintf(line, sizeof line,
                  "| %s | %s | %zu | %zu | %zu | %zu (%zu) | %zu (%zu) | %zu | %.0f | %.0f |\n",
                  row.system.c_str(), row.model.c_str(), row.cases, row.answers, row.failures.size(), refused,
                  row.refused_near_usual, row.not_stable, row.not_stable_near_usual, row.several_equilibria,
                  row.median_cold_us, row.median_warm_us);
    out << line;
  }
  out << "\nThe worst of all answers:\n\n"
         "| system | model | mass balance, relative | mass action, ln | saturation, ln | charge, mol/kg | warm "
         "against cold, relative |\n|---|---|---:|---:|---:|---:|---:|\n";
  for (const SweepRow& row : rows) {
    std::snprintf(line, sizeof line, "| %s | %s | %.1e | %.1e | %.1e | %.1e | %.1e |\n", row.system.c_str(),
                  row.model.c_str(), row.worst.mass_balance, row.worst.mass_action, row.worst.saturation,
                  row.worst.charge_mol_per_kg, row.worst_warm_difference);
    out << line;
  }
  out << "\nRefused, by reason:\n\n";
  bool any = false;
  for (const SweepRow& row : rows)
    for (const auto& [reason, times] : row.refusals) {
      out << "- " << row.system << ", " << row.model << ": " << reason << ", " << times << " times\n";
      any = true;
    }
  if (!any) out << "None.\n";
  return out.str();
}

}  // namespace bathwright::speciation
