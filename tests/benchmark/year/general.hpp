// A year of a tank with general solvers: CVODE carries the amounts through each shift, KINSOL finds what is
// put in at its end and the equilibria. What a user who knows both the trade and such solvers would write.
// Shares with the engine the amounts a policy comes to (forecast/compiled.hpp), the chemical system and the
// activity model; not its steps, its bookkeeping or its solver.
#pragma once

#include <bathwright/forecast/compiled.hpp>
#include <bathwright/forecast/forecast.hpp>
#include <memory>

namespace bathwright::benchmark {

/// Of tanks that work every day, whose policy bleeds, evaporates and replaces by analysis; every component
/// there from the start.
class GeneralYear {
 public:
  /// All three must outlive it.
  GeneralYear(const bath::Tank& tank, const bath::Chemistry& chemistry, const forecast::Policy& policy);
  ~GeneralYear();

  /// The days as Forecast::run has them: levels, pH and headroom. Ends the program where a solver fails.
  std::vector<forecast::Day> run(const bath::TankState& start, const forecast::Draw& draw);

 private:
  struct Parts;
  std::unique_ptr<Parts> parts_;
};

}  // namespace bathwright::benchmark
