// Each way of stating an indicator, against values worked out by hand.
#include <cmath>

#include "small_bath.hpp"

using namespace bathwright;

namespace {

/// 1000 L with 900 kg of water; 63.546 g/L copper is 1 mol/L, H2SO4 is 98.072 g/mol with the atomic weights
/// 1.008, 15.999 and 32.06 rounded as printed.
struct Solved {
  std::vector<double> levels = {50, 200};
  std::vector<std::string> species = {"H^+", "Cu^2+", "SO4^2-", "HSO4^-"}, solids = {"CuSO4.5H2O"};
  std::vector<double> molality = {1.5, 0.8, 0.4, 1.2}, activity = {1, 0.01, 0.004, 0.6}, saturation = {-0.5};
  bath::IndicatorView view() const {
    return {25, 1000, 0.1, 3.5, levels, molality, activity, species, 900, solids, saturation};
  }
};

Result<double> value_of(const std::string& declared, const Solved& solved = {}) {
  const auto type =
      read_small(small_bath + "\n[[indicator]]\nid = \"x\"\nlabel = \"x\"\nmeaning = \"x\"\n" + declared);
  INFO((type ? "" : text(type.problems())));
  REQUIRE(type);
  return type->indicators.at(1).evaluate(solved.view());
}

const double copper = 63.546, sulfuric_acid = 2 * 1.008 + 32.06 + 4 * 15.999;

}  // namespace

TEST_CASE("an indicator is what its file declares", "[unit][described]") {
  struct Row {
    const char* declared;
    double value;
  };
  const Row rows[] = {
      {R"(value = { g_per_L = { "H2SO4" = 1 } })", 200},
      {R"(value = { g_per_L = { "H2SO4" = 1, "Cu^2+" = -2 } })", 100},
      {R"(value = { g_per_L = { "H2SO4" = 1 } }
over = { g_per_L = { "Cu^2+" = 1 } })",
       4},
      {R"(value = { mol_per_L = { "Cu^2+" = 1 } }
factor = 1000)",
       1000 * 50 / copper},
      {R"(value = { mol_per_L = { "H2SO4" = 2 } }
over = { mol_per_L = { "Cu^2+" = 1 } })",
       2 * 200 / sulfuric_acid / (50 / copper)},
      // 1.5 + 1.2 mol/kg of protons, 0.9 kg of water a litre, two to a molecule
      {R"(value = { species_mol_per_L = { "H^+" = 0.5, "HSO4^-" = 0.5 }, as = "H2SO4" })",
       0.5 * (1.5 + 1.2) * 0.9 * sulfuric_acid},
      {R"(value = { species_mol_per_kg = { "SO4^2-" = 1 } })", 0.4},
      {R"(value = { species_activity = { "Cu^2+" = 1 } }
log10 = true
factor = -1)",
       2},
      {R"(value = { saturation = { "CuSO4.5H2O" = 1 } })", std::pow(10, -0.5)},
      {"value = { pH = 1 }", 0.1},
      {"value = { ionic_strength_mol_per_kg = 1 }", 3.5},
      {"value = { temperature_C = 1 }", 25},
      // a mixture of totals and species: 100 mL of normal alkali a litre and mol/L
      {R"(value = { mol_per_L = { "Cu^2+" = 2 }, species_mol_per_L = { "H^+" = 1 } }
factor = 100)",
       100 * (2 * 50 / copper + 1.5 * 0.9)},
  };
  for (const Row& row : rows) {
    INFO(row.declared);
    const auto value = value_of(row.declared);
    REQUIRE(value);
    CHECK(*value == Approx(row.value).epsilon(1e-6));  // atomic weights as printed above
  }
}

TEST_CASE("an indicator without a value says why", "[failure][described]") {
  struct Row {
    const char* declared;
    void (*spoil)(Solved&);
    Fault kind;
    const char* what;
  };
  const Row rows[] = {
      {R"(value = { g_per_L = { "Cu^2+" = 1 } })", [](Solved& s) { s.levels[0] = bath::not_given; },
       Fault::bad_input, "Cu^2+ is not known"},
      {R"(value = { species_activity = { "HSO4^-" = 1 } })", [](Solved& s) { s.species[3] = "other"; },
       Fault::bad_input, "HSO4^- is not known"},
      {R"(value = { saturation = { "CuSO4.5H2O" = 1 } })", [](Solved& s) { s.solids.clear(); },
       Fault::bad_input, "CuSO4.5H2O is not known"},
      {R"(value = { pH = 1 }
over = { g_per_L = { "Cu^2+" = 1 } })",
       [](Solved& s) { s.levels[0] = 0; }, Fault::out_of_range, "what it is divided by is not above zero"},
      {R"(value = { g_per_L = { "Cu^2+" = 1 } }
log10 = true)",
       [](Solved& s) { s.levels[0] = 0; }, Fault::out_of_range, "the logarithm of what is not"},
  };
  for (const Row& row : rows) {
    INFO(row.declared);
    Solved solved;
    row.spoil(solved);
    const auto value = value_of(row.declared, solved);
    REQUIRE_FALSE(value);
    CHECK(value.problems().front().kind == row.kind);
    CHECK(value.problems().front().where == "test-bath x");
    CHECK(value.problems().front().what.find(row.what) != std::string::npos);
  }
}
