// The scenarios through the program, and the report of them as it stands in the tree.
#include <catch2/catch.hpp>
#include <cmath>

#include "../app/program.hpp"
#include "scenario_table.hpp"

using scenario_table::Figure;

TEST_CASE("the program finds every figure of the scenarios", "[reference][scenarios]") {
  int told = 0;
  for (const Figure& figure : scenario_table::figures()) {
    if (figure.run.empty()) continue;
    INFO(figure.scenario << ", " << figure.label << ": " << figure.found << " " << figure.unit << ", by hand "
                         << figure.by_hand << ", better " << figure.better);
    CHECK(figure.ok());
    ++told;
  }
  CHECK(told >= 75);
}

TEST_CASE("a place in a document is found, or nothing is", "[unit][scenarios]") {
  const auto document = nlohmann::json::parse(R"({"a": [{"id": "x", "v": 1}, {"id": "y", "v": [2, 3]}]})");
  CHECK(scenario_table::at(document, "a/id=x/v") == 1);
  CHECK(scenario_table::at(document, "a/id=y/v/last") == 3);
  CHECK(scenario_table::at(document, "a/#") == 2);
  CHECK(scenario_table::at(document, "a/id=z/v").is_null());
  CHECK(scenario_table::at(document, "a/7").is_null());
  CHECK(scenario_table::at(nlohmann::json::parse(R"({"at 12 g/L": 3})"), "at 12 g~1L") == 3);
}

TEST_CASE("a slip of the pen is told with its line and its mend", "[failure][scenarios]") {
  const app_test::Bench bench;
  const std::string files = SCENARIO_FILES;
  const auto changed = [&](const std::string& file, const std::string& from, const std::string& to) {
    std::string text = app_test::content_of(files + file);
    const std::size_t at = text.find(from);
    REQUIRE(at != std::string::npos);
    bench.write("changed.toml", text.replace(at, from.size(), to));
  };
  struct Slip {
    const char *from, *to, *line, *mend;
  };
  for (const Slip& slip : {Slip{"\"Ni^2+\"", "\"nickel\"", "changed.toml:6", "Did you mean Ni^2+?"},
                           Slip{"\"Ni^2+\"", "\"Ni\"", "changed.toml:6", "Did you mean Ni^2+?"},
                           Slip{"\"Cl^-\"", "\"Cl-\"", "changed.toml:12", "Did you mean Cl^-?"},
                           Slip{"\"23.80 mL\"", "\"23.80\"", "changed.toml:10", "a volume in L, mL"},
                           Slip{"\"23.80 mL\"", "23,80", "changed.toml:10", "a decimal point and no unit"},
                           Slip{"burette = \"23.80 mL\"\n", "", "changed.toml:5", "burette = \"23.80 mL\""},
                           Slip{"\"23.80 mL\"", "\"238.0 mL\"", "changed.toml:10", "one filling"},
                           Slip{"edta-nickel", "edta-copper", "changed.toml:7", "Use edta-nickel"},
                           Slip{"\"0.1012 mol/L\"", "\"0.1012 N\"", "changed.toml:9", "equivalents"},
                           Slip{"\"0.3 dm\"", "\"0.3\"", "changed.toml:2", "a length in dm"}}) {
    INFO(slip.to);
    changed("d1-readings.toml", slip.from, slip.to);
    const auto run = bench.run("analyse " + files + "d1-tank.toml changed.toml");
    CHECK(run.status == 2);
    CHECK_THAT(run.err, Catch::Contains(slip.line) && Catch::Contains(slip.mend));
  }
  changed("d4-policy.toml", "\"CuSO4.5H2O\"", "\"copper\"");
  CHECK_THAT(bench.run("forecast " + files + "d4-tank.toml changed.toml --samples 0").err,
             Catch::Contains("Did you mean Cu^2+?"));
  changed("d4-policy.toml", "copper-oxide", "copper-oxid");
  CHECK_THAT(bench.run("forecast " + files + "d4-tank.toml changed.toml --samples 0").err,
             Catch::Contains("one of copper-oxide, sulfuric-acid"));
  changed("d4-policy.toml", "copper-oxide", "copper_oxide");  // its other id
  CHECK(bench.run("forecast " + files + "d4-tank.toml changed.toml --samples 0").status < 2);
}

TEST_CASE("the titrations of a morning have an end point, or say why not", "[unit][scenarios]") {
  const app_test::Bench bench;
  const auto of = [&](const std::string& tank) {
    return bench
        .run("analyse " PROJECT_DIR "/baths/" + tank + ".toml " PROJECT_DIR "/baths/readings/" + tank +
             "-morning.toml --json")
        .json();
  };
  // Iron as Fe(CN)6^4-, of which this bath has none, once kept the flask from being solved.
  const auto copper = of("c-04");
  const auto cyanide = scenario_table::at(copper, "end_points/quantity=free NaCN/bias_percent");
  REQUIRE(cyanide.is_number());
  CHECK(cyanide > 0);  // silver takes some of the cyanide that copper holds
  CHECK(cyanide < 10);
  CHECK_FALSE(scenario_table::at(copper, "end_points_unknown/quantity=Cu^+/why").is_null());
  // Free caustic is what the acid finds at the sulfo-orange change, to a few per cent.
  const auto caustic = scenario_table::at(of("z-02"), "end_points/quantity=NaOH/bias_percent");
  REQUIRE(caustic.is_number());
  CHECK(std::abs(caustic.get<double>()) < 5);
}
