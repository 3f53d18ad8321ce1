// The book at the command line: an analysis against what the log says the tank should hold.
#include <catch2/catch.hpp>

#include "program.hpp"

using app_test::Bench;
using nlohmann::json;

namespace {

/// Readings of N-07 like those of the morning, 8 h later, with this much titrant for boric acid.
std::string afternoon(const char* boric_acid_mL) {
  return std::string(R"(sampled = 2026-03-02T13:40:00
level_below_mark = "3 cm"
temperature = "54 degC"
pH = 4.1
[[titration]]
quantity = "Ni^2+"
method = "edta-nickel"
sample = "2.00 mL"
titrant = "0.1012 mol/L"
burette = "23.75 mL"
[[titration]]
quantity = "Cl^-"
method = "mohr-chloride"
sample = "2.00 mL"
titrant = "0.0998 mol/L"
burette = "8.05 mL"
[[titration]]
quantity = "H3BO3"
method = "mannitol-boric-acid"
sample = "2.00 mL"
titrant = "0.1005 mol/L"
burette = ")") +
         boric_acid_mL + " mL\"\n";
}

double value(const json& levels, const std::string& quantity) {
  for (const json& level : levels)
    if (level.at("quantity") == quantity) return level.at("value");
  FAIL("no " << quantity);
  return 0;
}

}  // namespace

TEST_CASE("an analysis is weighed against what the log says, and a missing addition shows",
          "[unit][command]") {
  const Bench bench;
  const std::string log = " --log shift.sqlite", tank = app_test::tank;
  (void)bench.run("analyse " + tank + " " + app_test::readings + log);
  REQUIRE(bench
              .run("log add addition --note '14 kg boric acid' --tank 'N-07 Watts nickel' --happened "
                   "'2026-03-02 08:00'" +
                   log)
              .status == 0);
  // 36.97 g/L and 14 kg of 99.5 % in 2340 L: 42.9 g/L, 13.8 mL.
  bench.write("made.toml", afternoon("13.80"));
  const auto made = bench.run("analyse " + tank + " made.toml --json" + log);
  INFO(made.out << made.err);
  const json fits = made.json();
  CHECK(value(fits.at("book"), "H3BO3") == Approx(42.9).margin(0.5));
  CHECK(fits.at("suspects").empty());
  CHECK(fits.at("misfit").at("alarm") == false);
  CHECK(fits.at("misfit").at("degrees_of_freedom") == 4);
  CHECK_THAT(fits.at("warnings").dump(), Catch::Contains("14 kg boric-acid (entry 2)"));
  const double lab = value(fits.at("results"), "H3BO3"), taken = value(fits.at("reconciled"), "H3BO3");
  CHECK(std::abs(taken - lab) < 0.5);

  const Bench other;
  (void)other.run("analyse " + tank + " " + app_test::readings + log);
  REQUIRE(other
              .run("log add addition --note '14 kg boric acid' --tank 'N-07 Watts nickel' --happened "
                   "'2026-03-02 08:00'" +
                   log)
              .status == 0);
  other.write("missing.toml", afternoon("11.85"));
  const auto missing = other.run("analyse " + tank + " missing.toml --json" + log);
  INFO(missing.out << missing.err);
  CHECK(missing.status == 1);
  CHECK(missing.json().at("misfit").at("alarm") == true);
  CHECK_THAT(missing.json().at("suspects").dump(), Catch::Contains("entry 2"));
  const auto sheet = other.run("dose " + tank + " missing.toml" + log);
  CHECK(sheet.status == 1);
  CHECK_THAT(sheet.out, Catch::Contains("not in the tank"));
}

TEST_CASE("tank and forecast start from the book of a log", "[unit][app]") {
  const Bench bench;
  const std::string tank = "--tank \"AL-1 sulfuric anodizing\" --log log.sqlite ";
  const auto add = [&](const std::string& kind, const std::string& body) {
    const auto run = bench.run("log add " + kind + " " + tank + "--body '" + body + "'");
    INFO(run.err);
    REQUIRE(run.status == 0);
  };
  add("analysis",
      R"({"volume_L":8000,"temperature_C":20,"pH":0,"results":[{"quantity":"Al^3+","unit":"g/L","value":10},)"
      R"({"quantity":"H2SO4","unit":"g/L","value":180},{"quantity":"Cl^-","unit":"g/L","value":0}]})");
  add("addition", R"({"chemical":"sulfuric-acid","amount":80,"unit":"kg"})");
  const auto state = bench.run("tank " PROJECT_DIR "/baths/al-1.toml --log log.sqlite --json");
  INFO(state.err);
  REQUIRE(state.status < 2);
  CHECK(state.json().at("state_from").get<std::string>().find("carried through 1 entry logged since") !=
        std::string::npos);
  const double acid = state.json().at("concentrations").at("H2SO4").get<double>();
  CHECK(acid > 188);  // 80 kg into 8000 L
  const auto forecast = bench.run("forecast " PROJECT_DIR "/baths/al-1.toml " PROJECT_DIR
                                  "/baths/policies/al-1.toml --samples 0 --log log.sqlite --json");
  INFO(forecast.err);
  REQUIRE(forecast.status < 2);
  CHECK(forecast.json().at("series")[0].at("concentrations").at("H2SO4").get<double>() ==
        Approx(acid).epsilon(1e-3));
}
