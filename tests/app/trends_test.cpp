// Trends from the command line, out of a log of analyses written for it.
#include <catch2/catch.hpp>
#include <cmath>

#include "program.hpp"

using app_test::Bench;
using nlohmann::json;

namespace {

const std::string log_option = " --log shift.sqlite";

/// An analysis of day 1, 2, ... with boric acid as found and as predicted.
void log_analysis(const Bench& bench, int day, double found, double predicted, double kg_per_L = 0) {
  json body = {{"pH", 4.1},
               {"results",
                {{{"quantity", "H3BO3"}, {"value", found}, {"unit", "g/L"}, {"from", "titration"}},
                 {{"quantity", "SO4^2-"}, {"value", 150.0}, {"unit", "g/L"}, {"from", "electroneutrality"}}}},
               {"book", {{{"quantity", "H3BO3"}, {"value", predicted}, {"unit", "g/L"}, {"from", "book"}}}}};
  if (kg_per_L > 0) body["density"] = {{"predicted", kg_per_L}, {"measured", nullptr}};
  const std::string date = "2026-03-" + std::string(day < 10 ? "0" : "") + std::to_string(day) + " 05:40";
  const auto run = bench.run("log add analysis --tank 'N-07 Watts nickel' --happened '" + date +
                             "' --body '" + body.dump() + "'" + log_option);
  INFO(run.err);
  REQUIRE(run.status == 0);
}

}  // namespace

TEST_CASE("trends tell a run of the tank's analyses, and none where there is none", "[unit][command]") {
  const Bench bench;
  const std::string trends = "trends " + app_test::tank + log_option;
  for (int day = 1; day <= 7; ++day) log_analysis(bench, day, day % 2 ? 41.5 : 42.5, 42);
  const auto few = bench.run(trends);
  INFO(few.err);
  CHECK(few.status == 0);
  CHECK_THAT(few.out, Catch::Contains("7 analyses, too few for limits"));
  log_analysis(bench, 8, 42.5, 42);
  const auto quiet = bench.run(trends);
  CHECK(quiet.status == 0);
  CHECK_THAT(quiet.out, Catch::Contains("no rule is tripped") && Catch::Contains("provisional"));
  for (int day = 9; day <= 12; ++day) log_analysis(bench, day, day % 2 ? 41.5 : 42.5, 42);
  log_analysis(bench, 13, 47, 42);
  const auto told = bench.run(trends + " --chart trends.svg --pdf trends.pdf");
  CHECK(told.status == 1);
  CHECK(app_test::widest_line(told.out) <= 80);
  CHECK_THAT(told.out, Catch::Contains("entry 13 (2026-03-13"));
  CHECK(bench.read("trends.svg").find("<svg") != std::string::npos);
  CHECK(bench.read("trends.pdf").starts_with("%PDF-"));

  const json doc = bench.run(trends + " --quantity H3BO3 --json").json();
  REQUIRE(doc.at("quantities").size() == 1);
  const json& boric = doc.at("quantities").at(0);
  CHECK(boric.at("values").size() == 13);
  CHECK(boric.at("found").at("mean").get<double>() == Approx((6 * 41.5 + 6 * 42.5 + 47) / 13));
  CHECK(boric.at("residual").at("mean").get<double>() == Approx(5.0 / 13));
  REQUIRE_FALSE(boric.at("findings").empty());
  CHECK(boric.at("findings").at(0).at("entries") == json({13}));
  // Somebody says that entry is wrong: it no longer counts.
  REQUIRE(bench.run("log correct 13 --reason 'other tank'" + log_option).status == 0);
  CHECK(bench.run(trends).status == 0);
}

TEST_CASE("trends by mass stand by the density of each analysis", "[unit][command]") {
  const Bench bench;
  // The density differs from day to day, so that 41.5 and 42.5 g/L come to the same by mass.
  for (int day = 1; day <= 12; ++day)
    log_analysis(bench, day, day % 2 ? 41.5 : 42.5, 42, day % 2 ? 1.1787 : 1.2071);
  const std::string trends = "trends " + app_test::tank + log_option;
  const auto by_mass = bench.run(trends + " --units '% w/w' --quantity H3BO3");
  INFO(by_mass.err);
  CHECK_THAT(by_mass.out, Catch::Contains("H₃BO₃ % w/w"));
  CHECK_THAT(by_mass.out, Catch::Contains("12  3.521"));  // 42 g/L in the mean of both
  CHECK_THAT(by_mass.out, Catch::Contains("by the density logged with it"));
  const auto us = bench.run(trends + " --units 'oz/US gal' --quantity H3BO3");
  CHECK_THAT(us.out, Catch::Contains("H₃BO₃ oz/US gal") && Catch::Contains("12  5.608"));
  // No water in the log: nobody is told mol/kg.
  const auto molal = bench.run(trends + " --units 'mol/kg water' --quantity H3BO3");
  CHECK_THAT(molal.out, Catch::Contains("H₃BO₃ g/L") && Catch::Contains("needs the water of each solution"));
  // One analysis without a density, and all are in g/L.
  log_analysis(bench, 13, 42, 42);
  CHECK_THAT(bench.run(trends + " --units '% w/w' --quantity H3BO3").out,
             Catch::Contains("H₃BO₃ g/L") && Catch::Contains("of analyses that have none"));
}

TEST_CASE("a quantity that was never found is told, with the nearest", "[failure][command]") {
  const Bench bench;
  log_analysis(bench, 1, 42, 42);
  const auto run = bench.run("trends " + app_test::tank + " --quantity H3BO" + log_option);
  CHECK(run.status == 2);
  CHECK_THAT(run.err, Catch::Contains("Did you mean \"H3BO3\"?"));
  CHECK(bench.run("trends " + app_test::tank + " --quantity 'SO4^2-'" + log_option).status ==
        2);  // only reckoned
  CHECK(bench.run("trends " + app_test::tank + " --log none.sqlite").status == 2);
}

TEST_CASE("samples that were titrated twice show how well that repeats", "[unit][command]") {
  const Bench bench;
  std::string readings = app_test::content_of(app_test::readings);
  const auto at = readings.find("[[titration]]");
  const std::string nickel = readings.substr(at, readings.find("[[titration]]", at + 1) - at);
  std::string again = nickel;
  again.replace(again.find("23.80"), 5, "23.90");
  bench.write("twice.toml", readings + "\n" + again);
  REQUIRE(bench.run("analyse " + app_test::tank + " twice.toml" + log_option).status <= 1);
  const json doc = bench.run("trends " + app_test::tank + " --json" + log_option).json();
  REQUIRE(doc.at("titrated_twice").size() == 1);
  const json& one = doc.at("titrated_twice").at(0);
  CHECK(one.at("quantity") == "Ni^2+");
  CHECK(one.at("pairs") == 1);
  // 0.1012 mol/L on 2 mL: 0.10 mL are 0.297 g/L of nickel, over sqrt 2.
  CHECK(one.at("standard_deviation_g_per_L").get<double>() == Approx(0.297 / std::sqrt(2)).epsilon(0.01));
}

TEST_CASE("dose and hand-over print PDF and HTML", "[unit][command]") {
  const Bench bench;
  const std::string files = app_test::tank + " " + app_test::readings + log_option;
  CHECK(bench.run("dose " + files + " --pdf slip.pdf --paper letter --html slip.html").status == 1);
  CHECK_THAT(bench.read("slip.pdf"), Catch::StartsWith("%PDF-") && Catch::Contains("612 792"));
  CHECK_THAT(bench.read("slip.html"), Catch::Contains("In this order"));
  REQUIRE(bench.run("log shifts 3x8 --zone Europe/Berlin" + log_option).status == 0);
  const auto told =
      bench.run("log hand-over " + app_test::tank + log_option + " --pdf over.pdf --html over.html");
  CHECK(told.status == 1);
  CHECK(app_test::widest_line(told.out) <= 80);
  CHECK_THAT(bench.read("over.pdf"), Catch::StartsWith("%PDF-") && Catch::Contains("595.2"));
  CHECK_THAT(bench.read("over.html"), Catch::Contains("taken over by"));
  CHECK(bench.run("dose " + files + " --pdf slip.pdf --paper a5").status == 2);
  CHECK(bench.run("dose " + files + " --pdf /proc/slip.pdf").status == 3);
}
