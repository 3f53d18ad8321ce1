// --units: what is printed for people in the units of their shop.
#include <catch2/catch.hpp>
#include <regex>

#include "program.hpp"

using app_test::Bench;

namespace {

const std::string us_units = " --units 'oz/US gal, lb, US gal, degF'";
const std::string dose = "dose " + app_test::tank + " " + app_test::readings;
const std::string forecast =
    "forecast " PROJECT_DIR "/baths/al-1.toml " PROJECT_DIR "/baths/policies/al-1.toml --samples 8";

}  // namespace

TEST_CASE("a slip in US units", "[unit][command]") {
  const Bench bench;
  const auto run = bench.run(dose + us_units);
  INFO(run.err);
  // 1 lb is 0.45359237 kg, 1 US gal 3.785411784 L, 1 oz/US gal 7.48915 g/L (NIST Special Publication 811,
  // 2008).
  CHECK_THAT(run.out, Catch::Contains("tank at 129 degF"));               // 54 degC
  CHECK_THAT(run.out, Catch::Contains("Volume  618.2 US gal"));           // 2340 L
  CHECK_THAT(run.out, Catch::Contains("37.4   40.1   35.2 ± 0.6"));       // 280, 300, 263.4 ± 4.2 g/L
  CHECK_THAT(run.out, Catch::Contains("31.64 lb boric acid, 2 x 15.8"));  // 14.35 kg, 7.175 kg
  CHECK_THAT(run.out, Catch::Contains("2 x 55.12 lb and 13.23 lb"));      // bags of 25 kg, 6 kg
  CHECK_THAT(run.out, Catch::Contains("At most 0.6676 oz/US gal"));       // 5 g/L
  CHECK_THAT(run.out, Catch::Contains("Each in 47.7 US gal of bath"));    // 180.5 L
  CHECK_THAT(run.out, Catch::Contains("Units: oz/US gal, lb, US gal, degF. The log, checks and notes keep"));
  CHECK(app_test::widest_line(run.out) <= 80);
  CHECK_FALSE(std::regex_search(run.out, std::regex("[0-9] kg (boric|nickel)")));
  CHECK(bench.run(dose).out.find("Units:") == std::string::npos);
}

TEST_CASE("documents know nothing of the units that are shown", "[property][command]") {
  const Bench bench;
  for (const std::string& verb :
       {dose, "tank " + app_test::tank, "analyse " + app_test::tank + " " + app_test::readings, forecast,
        "path " + app_test::tank + " --add '400 kg nickel-sulfate'"})
    CHECK(bench.run(verb + " --json" + us_units).out == bench.run(verb + " --json").out);
}

TEST_CASE("a forecast by mass has the density of each day", "[unit][command]") {
  const Bench bench;
  const auto run = bench.run(forecast + " --units '% w/w' --chart days.svg");
  INFO(run.err);
  const auto days = bench.run(forecast + " --json").json().at("series");
  const auto row = [&](const std::string& day) {
    std::smatch found;
    REQUIRE(std::regex_search(run.out, found, std::regex("\n +" + day + " +([0-9.]+) +([0-9.]+) ")));
    return std::pair{std::stod(found[1]), std::stod(found[2])};
  };
  // Both levels of a day stand by the one density, which grows as aluminium builds up.
  double before = 1.1;  // kg/L, of the bath as it is made up
  for (const int day : {0, 20, 40}) {
    const auto [aluminium, acid] = row(std::to_string(day));
    const auto& levels = days.at(static_cast<std::size_t>(day)).at("concentrations");
    const double density = levels.at("Al^3+").get<double>() / aluminium / 10;
    CHECK(levels.at("H2SO4").get<double>() / acid / 10 == Approx(density).epsilon(0.01));
    CHECK(density > before + 0.02);
    before = density;
  }
  // Its limit, 15 g/L, by the density of the day it is met.
  CHECK_THAT(run.out, Catch::Contains("Levels by day, % w/w") && Catch::Contains("aluminium above 1.2"));
  CHECK(app_test::widest_line(run.out) <= 80);
}

TEST_CASE("tank, analysis and path in other units", "[unit][command]") {
  const Bench bench;
  const auto tank = bench.run("tank " + app_test::tank + us_units);
  CHECK_THAT(tank.out, Catch::Contains("634.0 US gal, 131 degF"));                  // 2400 L, 55 degC
  CHECK_THAT(tank.out, Catch::Contains("boric acid                        5.61"));  // 42 g/L
  CHECK_THAT(tank.out, Catch::Contains("room for 212 ± 80 lb"));                    // 96 kg
  const auto analysis =
      bench.run("analyse " + app_test::tank + " " + app_test::readings + " --units '% w/w, degF'");
  CHECK_THAT(analysis.out, Catch::Contains("H₃BO₃        3.148  0.033"));  // 36.98 g/L in 1.1745 kg/L
  const auto molal =
      bench.run("analyse " + app_test::tank + " " + app_test::readings + " --units 'mol/kg water'");
  CHECK_THAT(molal.out, Catch::Contains("quantity    mol/kg water"));
  const auto path = bench.run("path " + app_test::tank + us_units + " --add '400 kg nickel-sulfate'");
  CHECK_THAT(path.out, Catch::Contains("added lb") && Catch::Contains("volume US gal"));
  CHECK_THAT(path.out, Catch::Contains(" 882 "));  // 400 kg
  CHECK_THAT(path.out, Catch::Contains("leaves its window of 30.04 to 40.06 oz/US"));
  for (const auto* run : {&tank, &analysis, &path}) CHECK(app_test::widest_line(run->out) <= 80);
}

TEST_CASE("a unit nobody knows is told with those to choose from", "[failure][command]") {
  const Bench bench;
  const auto run = bench.run(dose + " --units 'lb, stone'");
  CHECK(run.status == 2);
  CHECK_THAT(run.err, Catch::Contains("\"stone\"") && Catch::Contains("masses in kg, g, lb, oz"));
  CHECK(bench.run("tank " + app_test::tank + " --units 'lb, kg'").status == 2);
}

TEST_CASE("a hand-over in other units says which", "[unit][command]") {
  const Bench bench;
  const std::string log = " --log shift.sqlite";
  REQUIRE(bench.run("log shifts 3x8 --zone UTC" + log).status == 0);
  REQUIRE(bench.run("analyse " + app_test::tank + " " + app_test::readings + log).status == 1);
  const std::string hand_over = "log hand-over " + app_test::tank + log;
  const auto us = bench.run(hand_over + us_units);
  INFO(us.err);
  CHECK_THAT(us.out, Catch::Contains("H₃BO₃  oz/US gal  4.937"));  // 36.97 g/L
  CHECK_THAT(us.out, Catch::Contains("Units: oz/US gal, lb, US gal, degF."));
  const auto by_mass = bench.run(hand_over + " --units '% w/w'");
  CHECK_THAT(by_mass.out, Catch::Contains("H₃BO₃  g/L"));
  CHECK(bench.run(hand_over).out.find("g/L") == std::string::npos);
}

TEST_CASE("earlier results stand by the density logged with them", "[unit][command]") {
  const Bench bench;
  const std::string log = " --log shift.sqlite";
  std::string earlier = app_test::content_of(app_test::readings);
  earlier.replace(earlier.find("11.90 mL"), 8, "11.80 mL");
  bench.write("earlier.toml", earlier);
  REQUIRE(bench.run("analyse " + app_test::tank + " earlier.toml" + log).status == 1);
  const std::string again = dose + log;
  const auto row = std::regex("before +NiSO₄·6H₂O  NiCl₂·6H₂O  H₃BO₃ +pH\n.* 22\\.4 +4\\.09 +3\\.12 ");
  const auto by_mass = bench.run(again + " --units '% w/w'").out;
  INFO(by_mass);
  CHECK(std::regex_search(by_mass, row));  // 263.4, 48.0 and 36.66 g/L in 1.1744 kg/L
  // The log has no water of a solution, so that they are in g/L, and say so.
  CHECK_THAT(bench.run(again + " --units 'mol/kg water'").out, Catch::Contains("H₃BO₃ g/L    pH"));
}
