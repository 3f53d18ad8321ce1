#include <bathwright/shifts/pattern.hpp>

#include <catch2/catch.hpp>

#include "moments.hpp"

using namespace bathwright::shifts;

TEST_CASE("the ready-made patterns cover the day", "[unit][shifts]") {
  for (const std::string& name : ready_made_names()) {
    INFO(name);
    const auto pattern = ready_made(name, "Europe/Berlin");
    REQUIRE(pattern);
    CHECK(Calendar::of(*pattern));
  }
  const auto unknown = ready_made("2x21", "Europe/Berlin");
  REQUIRE_FALSE(unknown);
  CHECK(unknown.problems().front().text().find("Did you mean 2x12?") != std::string::npos);
}

TEST_CASE("a pattern survives its JSON", "[unit][shifts]") {
  const ShiftPattern pattern{"Europe/Berlin",
                             {{"früh", "06:00", "14:00", {"Mon", "Tue"}}, {"\"late\"", "14:00"}}};
  const std::string json = to_json(pattern);
  CHECK(json == R"({"shifts":[{"days":["Mon","Tue"],"ends":"14:00","name":"früh","starts":"06:00"},)"
                R"({"name":"\"late\"","starts":"14:00"}],"zone":"Europe/Berlin"})");
  const auto back = pattern_from_json(json);
  REQUIRE(back);
  CHECK(*back == pattern);
}

TEST_CASE("JSON that is no pattern is answered with everything that is wrong", "[failure][shifts]") {
  const auto told = [](const char* json) {
    const auto pattern = pattern_from_json(json, "setting");
    REQUIRE_FALSE(pattern);
    return bathwright::text(pattern.problems());
  };
  CHECK(told("").find("setting: is not JSON") == 0);
  CHECK(told("[1]").find("setting: is no JSON object") == 0);
  CHECK(told(R"({"zone":3,"shifts":[{"nane":"night","starts":"22:00","days":"Mon"},{}],"extra":1})") ==
        "setting: zone: is no text; expected a text in double quotes\n"
        "setting: shifts, number 1: name: is missing; expected a text\n"
        "setting: shifts, number 1: days: is no list of texts; expected a list such as [\"Mon\",\"Tue\"]\n"
        "setting: shifts, number 1: nane: is not a key known here. Did you mean name?\n"
        "setting: shifts, number 2: name: is missing; expected a text\n"
        "setting: shifts, number 2: starts: is missing; expected a text\n"
        "setting: extra: is not a key known here. Remove it.\n");
  CHECK(told(R"({"zone":"UTC","shifts":{"a":1}})").find("shifts: is no list of objects") !=
        std::string::npos);
}
