// Learning from a log as a script sees it.
#include <catch2/catch.hpp>

#include "program.hpp"

using app_test::Bench;

namespace {

const std::string files = PROJECT_DIR "/baths/al-1.toml " PROJECT_DIR "/baths/policies/al-1.toml";

/// Three weeks of an anodizing tank of 8000 L that loses twice the film of its policy: 112 L of each working
/// day, against 42000 Ah that dissolve 4933 g Al and take 26886 g H2SO4 (the bath type's figures); one level
/// 15 % high.
void log_three_weeks(const Bench& bench) {
  double al = 10.1 * 8000, acid = 190.0 * 8000;
  const auto add = [&](const std::string& kind, int day, const char* time, const std::string& body) {
    const std::string date = "2026-03-" + std::string(day < 10 ? "0" : "") + std::to_string(day);
    REQUIRE(bench
                .run("log add " + kind +
                     " --tank \"AL-1 sulfuric anodizing\" --log log.sqlite --happened \"" + date + " " +
                     time + "\" --body '" + body + "'")
                .status == 0);
  };
  for (int day = 2; day < 23; ++day) {  // 2 March 2026 is a Monday
    if ((day - 2) % 7 >= 5) continue;
    const double wrong = day == 12 ? 1.15 : 1;
    add("analysis", day, "06:00",
        R"({"volume_L":8000,"results":[{"quantity":"Al^3+","unit":"g/L","from":"titration","standard_uncertainty":0.1,"value":)" +
            std::to_string(al / 8000 * wrong) +
            R"(},{"quantity":"H2SO4","unit":"g/L","from":"titration","standard_uncertainty":1.5,"value":)" +
            std::to_string(acid / 8000) + "}]}");
    al += 4933 - 112 * al / 8000;
    acid += -26886 - 112 * acid / 8000;
    add("ampere-hours", day, "22:00", R"({"use":"anodizing","amount":42000,"area_dm2":56000})");
  }
}

}  // namespace

TEST_CASE("a log teaches the drag-out and names a wrong titration", "[unit][app]") {
  const Bench bench;
  log_three_weeks(bench);
  const auto run = bench.run("learn " + files + " --log log.sqlite --json");
  INFO(run.err);
  REQUIRE(run.status == 1);  // something does not fit
  const auto doc = run.json();
  CHECK(doc.at("analyses") == 15);
  bool drag_out = false;
  for (const auto& p : doc.at("parameters"))
    if (p.at("what") == "drag-out") {
      drag_out = true;
      CHECK(p.at("stated").get<double>() == Approx(1));
      CHECK(p.at("learned_p05").get<double>() < 2);
      CHECK(p.at("learned_p95").get<double>() > 2);
      CHECK(p.at("learned").get<double>() > 1.3);
    }
  CHECK(drag_out);
  REQUIRE(doc.at("suspects").size() == 1);
  CHECK(doc["suspects"][0].at("kind") == "analysis");
  CHECK(doc["suspects"][0].at("subject") == "Al^3+");
  CHECK(doc["suspects"][0].at("when").get<std::string>().starts_with("2026-03-12 06:00"));
  CHECK(doc.at("covariance_ln").size() == doc["parameters"].size() * doc["parameters"].size());
  const auto written = bench.run("learn " + files + " --log log.sqlite --write learned.toml");
  INFO(written.err);
  CHECK(written.status == 1);
  const std::string policy = bench.read("learned.toml");
  CHECK(policy.find("film = \"1.0 mL/dm2\"") == std::string::npos);
  CHECK(policy.find("closed = [{ first_day = 60, days = 10 }]      # a summer shutdown") !=
        std::string::npos);
  // Its bands are of what the log told: narrower than those of what was stated, and of what belongs together.
  CHECK(policy.find("effects_uncertainty") != std::string::npos);
  CHECK(policy.find("[[correlated]]") != std::string::npos);
  const auto width = [&](const std::string& of) {
    const auto forecast =
        bench.run("forecast " PROJECT_DIR "/baths/al-1.toml " + of + " --samples 60 --json");
    INFO(forecast.err);
    REQUIRE(forecast.status < 2);
    const auto band = forecast.json().at("bands").at("Al^3+");
    return band.at("p95")[30].get<double>() - band.at("p05")[30].get<double>();
  };
  CHECK(width("learned.toml") < 0.8 * width(PROJECT_DIR "/baths/policies/al-1.toml"));
  // Learned once more it stays a policy.
  CHECK(bench.run("learn " PROJECT_DIR "/baths/al-1.toml learned.toml --log log.sqlite --write again.toml")
            .status < 2);
  CHECK(bench.run("forecast " PROJECT_DIR "/baths/al-1.toml again.toml --samples 0").status < 2);
  CHECK(bench.run("learn " + files + " --log log.sqlite --write learned.toml").status !=
        0);  // never over a file
  CHECK(bench.read("learned.toml") == policy);
  CHECK(app_test::widest_line(bench.run("learn " + files + " --log log.sqlite").out) <= 80);
}

TEST_CASE("a log that cannot teach says why", "[failure][app]") {
  const Bench bench;
  CHECK(bench.run("learn " + files + " --log none.sqlite").status == 2);
  REQUIRE(bench.run("log add note --tank T --note hello --log log.sqlite").status == 0);
  const auto run = bench.run("learn " + files + " --log log.sqlite");
  CHECK(run.status == 2);
  CHECK(run.err.find("no analysis") != std::string::npos);
}
