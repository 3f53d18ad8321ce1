// The forecast as a script sees it.
#include <catch2/catch.hpp>

#include "program.hpp"

using app_test::Bench;

TEST_CASE("a forecast says when each limit is met, and keeps its balance", "[unit][app]") {
  const Bench bench;
  const std::string files =
      "forecast " PROJECT_DIR "/baths/al-1.toml " PROJECT_DIR "/baths/policies/al-1.toml ";
  const auto run = bench.run(files + "--samples 20 --csv days.csv --chart days.svg --json");
  INFO(run.err);
  REQUIRE(run.status == 1);  // a limit is met
  const auto doc = run.json();
  bool aluminium = false;
  for (const auto& limit : doc.at("limits"))
    if (limit.at("name").get<std::string>().starts_with("aluminium above")) {
      aluminium = true;
      CHECK(limit.at("kind").get<std::string>() == "level");
      CHECK(limit.at("cause").get<std::string>() == "by-product");
      CHECK(limit.at("day_p05").get<double>() <= limit.at("day_p50").get<double>());
      CHECK(limit.at("day_p50").get<double>() <= limit.at("day_p95").get<double>());
    }
  CHECK(aluminium);
  CHECK_FALSE(doc.at("bleed_to_hold").empty());
  CHECK(bench.read("days.svg").find("<svg") != std::string::npos);
  CHECK(doc.at("series").size() == 121);
  for (const auto& [what, residual] : doc.at("balance").items()) {
    INFO(what);
    CHECK(std::abs(residual.get<double>()) < 1e-10);
  }
  CHECK(bench.run(files + "--samples 20 --json").out == bench.run(files + "--samples 20 --json").out);
}

TEST_CASE("a policy that is none is told where", "[failure][app]") {
  const Bench bench;
  bench.write("policy.toml", "[work]\nplating = { per_shift = \"1 Ah\" }\n");
  const auto run = bench.run("forecast " PROJECT_DIR "/baths/al-1.toml policy.toml");
  CHECK(run.status == 2);
  CHECK(run.err.find("policy.toml:2") != std::string::npos);
}
