// Functions that fail again and again.
#include "parking.hpp"

#include <catch2/catch.hpp>

using namespace bathwright;
using namespace bathwright::plugin_host;

namespace {

using Answer = std::function<Result<double>(const bath::IndicatorView&)>;

std::vector<bath::BathType> types_with(const std::vector<Answer>& answers) {
  bath::BathType type;
  type.id = "tin";
  for (const Answer& answer : answers) type.indicators.push_back({"i", "", "", "", answer});
  return {type};
}

Result<double> sound(const bath::IndicatorView&) { return 1.0; }
Result<double> unknown(const bath::IndicatorView&) {
  return Problem{Fault::bad_input, "", "not known", "", ""};
}
Result<double> at_fault(const bath::IndicatorView&) {
  return Problem{Fault::inconsistent_data, "", "NaN", "", ""};
}
Result<double> late(const bath::IndicatorView&) {
  const double begun_s = thread_time_s();
  while (thread_time_s() - begun_s < 1.5 * longest_call_s) {
  }
  return 1.0;
}

}  // namespace

TEST_CASE("three faults park every function of a plugin", "[failure][plugin_host]") {
  for (const Answer& faulty : {Answer(at_fault), Answer(late)}) {
    auto types = types_with({sound, faulty});
    park_after_faults(types);
    const bath::IndicatorView view{};
    for (int i = 0; i < most_faults; ++i) {
      CHECK(types[0].indicators[0].evaluate(view));
      (void)types[0].indicators[1].evaluate(view);
    }
    const auto parked = types[0].indicators[0].evaluate(view);
    REQUIRE_FALSE(parked);
    CHECK(parked.problems().front().where == "tin i");
    CHECK(parked.problems().front().what == "the plugin is parked after 3 faults");
  }
}

TEST_CASE("not to know is no fault", "[unit][plugin_host]") {
  auto types = types_with({sound, unknown});
  park_after_faults(types);
  const bath::IndicatorView view{};
  for (int i = 0; i < 10 * most_faults; ++i) (void)types[0].indicators[1].evaluate(view);
  CHECK(types[0].indicators[0].evaluate(view));
}
