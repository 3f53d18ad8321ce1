#include <catch2/catch.hpp>

#include "../app/program.hpp"
#include "interlock_table.hpp"

TEST_CASE("every interlock catches its case and lets the near one pass", "[failure][interlocks]") {
  for (const auto& one : interlock_table::read_cases()) {
    std::string what = one.tank + ":";
    for (const auto& [id, kg] : one.additions) what += " " + id;
    const auto got = interlock_table::try_case(one);
    INFO(one.rule << ", " << what << ": expected " << one.expect << " " << one.by << ", got " << got.got
                  << " " << got.said);
    CHECK(got.as_expected);
  }
}

TEST_CASE("no interlock stands in the way of a demonstration tank's own chemicals", "[unit][interlocks]") {
  for (const std::string& tank : interlock_table::demonstration_tanks())
    for (const auto& one : interlock_table::own_additions(tank)) {
      INFO(one.tank << ", " << one.kg << " kg " << one.chemical << ": " << one.stopped_by);
      CHECK(one.stopped_by.empty());
    }
}

TEST_CASE("what is refused is refused by every verb", "[failure][interlocks]") {
  const app_test::Bench bench;
  for (const auto& one : interlock_table::read_cases()) {
    if (one.expect != "refused" || !one.levels.empty() || one.additions.size() > 1) continue;
    const auto& [id, kg] = one.additions.front();
    if (one.tank != "c-04" && one.tank != "cr-5") continue;
    INFO(one.tank << " " << id);
    const auto path = bench.run("path " PROJECT_DIR "/baths/" + one.tank + ".toml --add '" +
                                std::to_string(kg) + " kg " + id + "'");
    CHECK(path.status == 2);
    CHECK(path.err.find(one.by) != std::string::npos);
    CHECK(path.out.empty());
  }
}
