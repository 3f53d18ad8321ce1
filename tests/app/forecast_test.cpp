// The forecast as a script sees it.
#include <fmt/format.h>

#include <catch2/catch.hpp>
#include <chrono>

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
  REQUIRE(bench.run(files + "--samples 0 --pdf days.pdf --paper letter --html days.html").status == 1);
  CHECK(bench.read("days.pdf").starts_with("%PDF-"));
  const std::string html = bench.read("days.html");
  for (const char* part :
       {"Limits met", "aluminium above", "Cost and waste, a day", "<svg", "licensed practice decide"})
    CHECK(html.find(part) != std::string::npos);
  CHECK(doc.at("series").size() == 121);
  for (const auto& [what, residual] : doc.at("balance").items()) {
    INFO(what);
    CHECK(std::abs(residual.get<double>()) < 1e-10);
  }
  CHECK(bench.run(files + "--samples 20 --json").out == bench.run(files + "--samples 20 --json").out);
}

TEST_CASE("a forecast from readings counts its days from the day of the sample", "[unit][app]") {
  const Bench bench;
  const std::string baths = PROJECT_DIR "/baths/";
  CHECK(bench.read(baths + "policies/n-07.toml").find("starts = \"2026-01-05\"") != std::string::npos);
  CHECK(bench.read(baths + "readings/n-07-morning.toml").find("sampled = 2026-03-02") != std::string::npos);
  const std::string line = "forecast " + baths + "n-07.toml " + baths + "policies/n-07.toml --samples 0 ";
  const std::string readings = "--readings " + baths + "readings/n-07-morning.toml";
  CHECK(bench.run(line).out.find("days from 5 Jan 2026") != std::string::npos);
  CHECK(bench.run(line + readings).out.find("days from 2 Mar 2026") != std::string::npos);
  int dated = 0;
  const auto doc = bench.run(line + readings + " --json").json();
  for (const auto& limit : doc.at("limits")) {
    if (!limit.at("day").is_number()) continue;
    const auto day = std::chrono::days(static_cast<int>(limit.at("day").get<double>()));
    const std::chrono::year_month_day date = std::chrono::sys_days(std::chrono::year(2026) / 3 / 2) + day;
    CHECK(limit.at("date").get<std::string>() == fmt::format("{}-{:02}-{:02}", static_cast<int>(date.year()),
                                                             static_cast<unsigned>(date.month()),
                                                             static_cast<unsigned>(date.day())));
    ++dated;
  }
  CHECK(dated > 0);
}

TEST_CASE("a policy that is none is told where", "[failure][app]") {
  const Bench bench;
  bench.write("policy.toml", "[work]\nplating = { per_shift = \"1 Ah\" }\n");
  const auto run = bench.run("forecast " PROJECT_DIR "/baths/al-1.toml policy.toml");
  CHECK(run.status == 2);
  CHECK(run.err.find("policy.toml:2") != std::string::npos);
}

TEST_CASE("policies are set side by side and the cheapest that holds is named", "[unit][app]") {
  const Bench bench;
  const std::string baths = PROJECT_DIR "/baths/";
  bench.write("bled.toml", bench.read(baths + "policies/al-1.toml") + "\n[bleed]\nrate = \"250 L/d\"\n");
  bench.write("lavish.toml", bench.read(baths + "policies/al-1.toml") + "\n[bleed]\nrate = \"320 L/d\"\n");
  const std::string line = "forecast " + baths + "al-1.toml " + baths +
                           "policies/al-1.toml --samples 0 --against bled.toml --against lavish.toml ";
  const auto run = bench.run(line + "--json");
  INFO(run.err);
  const auto policies = run.json().at("policies");
  REQUIRE(policies.size() == 3);
  CHECK_FALSE(policies[0].at("holds").get<bool>());
  CHECK(policies[1].at("holds").get<bool>());
  CHECK(policies[1].at("cheapest_that_holds").get<bool>());
  CHECK_FALSE(policies[2].at("cheapest_that_holds").get<bool>());
  CHECK(policies[2].at("cost_per_day").get<double>() > policies[1].at("cost_per_day").get<double>());
  const auto sheet = bench.run(line);
  CHECK(sheet.out.find("Cheapest that holds every limit: bled.toml") != std::string::npos);
  CHECK(app_test::widest_line(sheet.out) <= 80);
}

TEST_CASE("a policy with what the tank does not have is told with its file", "[failure][app]") {
  const Bench bench;
  bench.write("policy.toml", "[[replenish]]\nchemical = \"nickel-sulfate\"\nper_day = \"1 kg\"\n");
  const auto run = bench.run("forecast " PROJECT_DIR "/baths/al-1.toml policy.toml");
  CHECK(run.status == 2);
  CHECK(run.err.find("policy.toml") != std::string::npos);
  CHECK(run.err.find("not on the shelf") != std::string::npos);
}
