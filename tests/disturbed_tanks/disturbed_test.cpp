// Two of the tanks, so that an ordinary run sees a planner that goes astray.
#include <catch2/catch.hpp>
#include <cmath>

#include "disturbed_tanks.hpp"

using disturbed::Case;
using disturbed::Outcome;

TEST_CASE("a disturbed tank is planned back, as another hand finds", "[property][dosing]") {
  const auto cases = disturbed::push_all({"n-07.toml", "g-03.toml"});
  REQUIRE(cases.size() == 20);  // four aims each: down, up; all down, all up
  for (const Case& one : cases) {
    INFO(one.tank << ", " << one.push << ": " << disturbed::words(one.best.outcome) << ", " << one.best.worst
                  << " " << one.best.worst_per_cent << " %, " << one.best.why);
    for (const disturbed::Ended* end : {&one.best, &one.nearest}) {
      CHECK(end->against_own_prediction < 1e-4);
      CHECK(end->element_defect < 1e-9);
    }
    if (one.push != "all high") CHECK(std::abs(one.best.pH_error.value_or(0)) < 0.02);  // gold: REPORT.md
    // What is too weak comes to its aim; what is too strong, where bath may be taken out.
    const bool weak =
        one.push.find("-15") != std::string::npos || one.push == "pH -0.3" || one.push == "all low";
    CHECK((!weak || one.best.outcome == Outcome::met));
    CHECK(one.nearest.outcome == Outcome::met);
    CHECK(one.best.outcome < Outcome::infeasible);
  }
}

TEST_CASE("what the other tanks have taught", "[property][dosing]") {
  const auto cases = disturbed::push_all({"w-1.toml", "z-01.toml"});
  const auto outcome = [&](const std::string& tank, const std::string& push) {
    for (const Case& one : cases)
      if (one.tank == "baths/" + tank && one.push == push) return one.best.outcome;
    FAIL("no case " << tank << ", " << push);
    return Outcome::refused;
  };
  // Boric acid lowers the pH out of its limits: some of the alkali goes in before it.
  CHECK(outcome("z-01.toml", "all low") == Outcome::met);
  // A treatment tank is there to hold hydroxides, and nobody adds the metals it takes out.
  CHECK(outcome("w-1.toml", "pH -0.3") == Outcome::met);
  CHECK(outcome("w-1.toml", "all low") == Outcome::thinner);
  CHECK(outcome("w-1.toml", "SO4^2- -15 %") == Outcome::thinner);
}
