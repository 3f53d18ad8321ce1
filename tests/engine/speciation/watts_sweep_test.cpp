// Cold starts of a nickel bath; BATHWRIGHT_SWEEP says how many (3000). A seed on which nothing was tuned.
#include <cstdlib>
#include <iostream>

#include "systems.hpp"
#include "watts_sweep.hpp"

using namespace bathwright::speciation;

TEST_CASE("a nickel bath with wild totals reaches equilibrium or says why not", "[property][.long]") {
  const char* wanted = std::getenv("BATHWRIGHT_SWEEP");
  const int count = wanted ? std::atoi(wanted) : 3000;
  REQUIRE(count > 0);
  const SweepReport report = sweep_watts_bath(20260731, count);
  constexpr std::size_t shown = 20;
  for (std::size_t i = 0; i < std::min(shown, report.failures.size()); ++i)
    std::cout << report.failures[i] << "\n";
  for (std::size_t i = 0; i < std::min(shown, report.refusals.size()); ++i)
    std::cout << report.refusals[i] << "\n";
  std::cout << count << " solves, " << report.failures.size() << " failures, " << report.refusals.size()
            << " refused with a reason; worst mass balance " << report.worst_mass_balance
            << ", worst charge balance " << report.worst_charge << " mol/kg; median "
            << report.median_microseconds << " us, slowest " << report.slowest_microseconds << " us\n";
  CHECK(report.failures.empty());
  // Slurries of calcium borate at an ionic strength above 10 mol/kg, where the parameters end: 2 in 100 000
  // as measured.
  CHECK(report.refusals.size() <= 1 + static_cast<std::size_t>(count) / 10000);
  CHECK(report.worst_mass_balance < 1e-12);
  CHECK(report.worst_charge < 1e-10);
}
