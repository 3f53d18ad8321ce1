#include <cmath>

#include "watts_tank.hpp"

using namespace watts;

namespace {

std::string only_suspect(const analysis::Readings& readings) {
  const auto a = evaluated(readings);
  REQUIRE(a.suspects.size() == 1);
  CHECK_FALSE(a.suspects[0].reason.empty());
  CHECK_FALSE(a.suspects[0].try_this.empty());
  return a.suspects[0].what;
}

}  // namespace

TEST_CASE("a hydrometer one per cent off is a suspect, half a per cent is not", "[unit]") {
  auto readings = morning();
  const double predicted = evaluated(readings).density_predicted.v;
  readings.density = units::KilogramsPerLitre{1.005 * predicted};
  const auto fits = evaluated(readings);
  CHECK(fits.suspects.empty());
  CHECK(fits.density_measured->v == 1.005 * predicted);
  readings.density = units::KilogramsPerLitre{0.985 * predicted};
  CHECK(only_suspect(readings) == "density");
}

TEST_CASE("a level more than half away from its aim is a suspect", "[unit]") {
  auto readings = morning();
  readings.titrations[2].sample = {5e-3};  // 5 mL in the flask worked out as such: 14.8 g/L of 42
  CHECK(only_suspect(readings) == "H3BO3");
}

TEST_CASE("a pH outside 0 to 14 is a suspect", "[unit]") {
  auto readings = morning();
  readings.pH = -0.1;
  CHECK(evaluated(readings).suspects.at(0).what == "pH");
}

TEST_CASE("a volume above the brim is a suspect", "[unit]") {
  auto readings = morning();
  readings.level_below_mark.reset();
  readings.volume = units::Litres{2560};
  CHECK(only_suspect(readings) == "volume");
}

TEST_CASE("more chloride than nickel can hold is a suspect", "[unit]") {
  // Sodium chloride in the bath leaves room for sulfate, but nickel sulfate works out negative.
  auto readings = morning();
  readings.titrations = {boric_acid()};
  readings.found = {found("Ni^2+", 40, 0.4), found("Cl^-", 52, 0.5), found("Na^+", 10, 0.1)};
  const auto a = evaluated(readings);
  CHECK(level(a, "NiSO4.6H2O").value.v < 0);
  CHECK(std::any_of(a.suspects.begin(), a.suspects.end(),
                    [](const auto& s) { return s.what == "NiSO4.6H2O"; }));
}

TEST_CASE("levels without room for the counter-ion end with what made them suspect", "[failure]") {
  auto readings = morning();
  readings.found = {found("Cl^-", 60, 0.5)};
  readings.titrations = {titration("Ni^2+", "edta-nickel", 2, 0.1, 14), boric_acid()};
  const auto result = analysis::evaluate(readings, tank(), chemistry());
  REQUIRE_FALSE(result);
  const std::string all = text(result.problems());
  INFO(all);
  CHECK(all.find("SO4^2-") != std::string::npos);
  CHECK(all.find("NiSO4.6H2O: works out to -") != std::string::npos);
}

TEST_CASE("a refused analysis names the place and the mend", "[failure]") {
  struct Row {
    const char *where, *what, *mend;
    void (*spoil)(analysis::Readings&);
  };
  const Row rows[] = {
      {"morning.toml:7", "\"Ni2+\" is not a quantity of Watts nickel", "Did you mean Ni^2+?",
       [](auto& r) { r.titrations[0].quantity = "Ni2+"; }},
      {"morning.toml:7", "there is no method \"edta-nikel\"", "Did you mean edta-nickel?",
       [](auto& r) { r.titrations[0].method = "edta-nikel"; }},
      {"morning.toml:7", "there is no method \"weighing\"", "Use edta-nickel or edta-nickel-electroless.",
       [](auto& r) { r.titrations[0].method = "weighing"; }},
      {"morning.toml:7", "mohr-chloride does not find Ni^2+", "Use edta-nickel or edta-nickel-electroless.",
       [](auto& r) { r.titrations[0].method = "mohr-chloride"; }},
      {"morning.toml:7", "burette reading is 0 mL", "Enter the burette reading",
       [](auto& r) { r.titrations[0].burette = {0}; }},
      {"morning.toml: Ni^2+", "no level is given", "Titrate it (edta-nickel, edta-nickel-electroless)",
       [](auto& r) { r.titrations.erase(r.titrations.begin()); }},
      {"morning.toml: pH", "no pH is given", "Measure the pH", [](auto& r) { r.pH.reset(); }},
      {"morning.toml: pH", "is not a number", "Enter the pH", [](auto& r) { r.pH = std::nan(""); }},
      {"morning.toml: volume", "both a volume and a level", "Leave one out",
       [](auto& r) { r.volume = units::Litres{2340}; }},
      {"morning.toml: level_below_mark", "leaves -", "Check the figure",
       [](auto& r) { r.level_below_mark = units::Decimetres{30}; }},
      {"morning.toml:12", "the concentration is -3.000 g/L", "as it was reported",
       [](auto& r) { r.found = {found("Cl^-", -3)}; }},
      {"morning.toml:12", "needs the density of the solution", "Give it",
       [](auto& r) {
         r.found = {{"Cl^-", {1.2, units::ConcentrationUnit::percent_by_mass}, {}, "morning.toml:12"}};
       }},
  };
  for (const Row& row : rows) {
    INFO(row.what);
    auto readings = morning();
    row.spoil(readings);
    const Problem problem = refusal(readings);
    INFO(problem.text());
    CHECK(problem.where == row.where);
    CHECK(problem.what.find(row.what) != std::string::npos);
    CHECK(problem.try_this.find(row.mend) != std::string::npos);
  }
}

TEST_CASE("a level needs a tank with a surface", "[failure]") {
  auto no_surface = tank();
  no_surface.surface.reset();
  const Problem problem = refusal(morning(), no_surface);
  CHECK(problem.where == "morning.toml: level_below_mark");
  CHECK(problem.try_this == "Give the volume, or the liquid surface in the tank file.");
}

TEST_CASE("a book that cannot be is refused", "[failure]") {
  auto readings = morning();
  readings.titrations.pop_back();
  const Problem problem = refusal(readings, tank(), analysis::Book{{{"H3BO3", -1}}, 4.0, "log entry 12"});
  CHECK(problem.where == "morning.toml: H3BO3");
  CHECK(problem.what == "log entry 12 has -1.000 g/L");
}

TEST_CASE("all problems are told at once", "[failure]") {
  analysis::Readings empty;
  const auto result = analysis::evaluate(empty, tank(), chemistry());
  REQUIRE_FALSE(result);
  CHECK(result.problems().size() == 4);  // pH, nickel, chloride, boric acid
}
