#include <bathwright/matter/concentration.hpp>
#include <bathwright/matter/formula.hpp>
#include <bathwright/units/read.hpp>
#include <catch2/catch.hpp>
#include <string>

using namespace bathwright;
using namespace bathwright::matter;
using units::Concentration;
using units::ConcentrationUnit;

namespace {

units::GramsPerMole molar_mass(const std::string& formula) { return Formula::parse(formula)->molar_mass(); }

Concentration typed(const std::string& text) { return *units::read_concentration(text); }

double grams(const std::string& text, const ConcentrationBasis& basis) {
  const auto c = grams_per_litre(typed(text), basis);
  INFO(text);
  REQUIRE(c);
  return c->v;
}

}  // namespace

TEST_CASE("a metal counted as its hydrate, and back", "[reference][matter]") {
  // Trade worked example "hydrate conversions": 22.5 g/L Cu, 85 g/L Zn, 60 g/L NiCl2.6H2O.
  const auto counted = [](double c, const std::string& from, double n_from, const std::string& to,
                          double n_to) {
    return counted_as({c}, molar_mass(from), n_from, molar_mass(to), n_to).v;
  };
  CHECK(counted(22.5, "Cu", 1, "CuSO4.5H2O", 1) == Approx(88.4042).margin(0.044).epsilon(0));
  CHECK(counted(85, "Zn", 1, "ZnSO4.7H2O", 1) == Approx(373.83).margin(0.19).epsilon(0));
  CHECK(counted(60, "NiCl2.6H2O", 1, "Ni", 1) == Approx(14.8164).margin(0.0074).epsilon(0));
  CHECK(counted(60, "NiCl2.6H2O", 2, "Cl", 1) == Approx(17.8978).margin(0.0089).epsilon(0));
}

TEST_CASE("strength of commercial acid", "[reference][matter]") {
  // Trade worked example: 37.0 mass % HCl of 1.184 kg/L is 438.08 g/L, 12.016 mol/L.
  const ConcentrationBasis basis{.molar_mass = molar_mass("HCl"),
                                 .solution_density = units::KilogramsPerLitre{1.184}};
  CHECK(grams("37 % w/w", basis) == Approx(438.08).margin(0.22).epsilon(0));
  const auto molarity = moles_per_litre(typed("37 % w/w"), basis);
  REQUIRE(molarity);
  CHECK(molarity->v == Approx(12.016).margin(0.006).epsilon(0));
  CHECK(1000 / molarity->v == Approx(83.2222).margin(0.083).epsilon(0));  // mL for 1 L of 1 mol/L
}

TEST_CASE("salt of a given purity to raise a metal", "[reference][matter]") {
  // Trade worked example: ZnSO4.H2O, 98 %, to raise zinc by 7.5 g/L in 1200 L takes 25.2068 kg.
  const auto salt = counted_as({7.5}, molar_mass("Zn"), 1, molar_mass("ZnSO4.H2O"), 1);
  CHECK(salt.v * 1200 / 0.98 / 1000 == Approx(25.2068).margin(0.013).epsilon(0));
}

TEST_CASE("a percentage of acid counted as the bottle or as the substance", "[reference][matter]") {
  // Trade worked example after Products Finishing: 142 g/L of 36 % acid, 1.19 kg/L, is 119.328 mL/L and 51.12
  // g/L HCl.
  const ConcentrationBasis bottle{.product_density = units::KilogramsPerLitre{1.19}, .product_assay = 0.36};
  CHECK(grams("119.328 mL/L", bottle) == Approx(51.12).margin(0.026).epsilon(0));
  const auto volume = in_unit({51.12}, ConcentrationUnit::millilitres_per_litre, bottle);
  REQUIRE(volume);
  CHECK(volume->value == Approx(119.328).margin(0.06).epsilon(0));
}

TEST_CASE("molal, normal and ppm concentrations", "[unit][matter]") {
  const ConcentrationBasis basis{.molar_mass = units::GramsPerMole{100},
                                 .solution_density = units::KilogramsPerLitre{1.2},
                                 .water_kg_per_L = 0.9};
  CHECK(grams("2 mol/kg", basis) == Approx(180).epsilon(1e-14));
  CHECK(grams("0.2 N (2 eq/mol)", basis) == Approx(10).epsilon(1e-14));
  CHECK(grams("50 ppm w/w", basis) == Approx(0.06).epsilon(1e-14));
  CHECK(grams("50 ppm w/v", basis) == Approx(0.05).epsilon(1e-14));
  CHECK(grams("10 g/L", {}) == 10);
}

TEST_CASE("every unit comes back as it went", "[property][matter]") {
  const ConcentrationBasis basis{units::GramsPerMole{61.83}, units::KilogramsPerLitre{1.2},
                                 units::KilogramsPerLitre{1.84}, 0.96, 0.85};
  for (int u = 0; u <= static_cast<int>(ConcentrationUnit::ppm_mass_per_volume); ++u) {
    const Concentration c{3.7, static_cast<ConcentrationUnit>(u), 2};
    INFO(units::symbol(c.unit));
    const auto there = grams_per_litre(c, basis);
    REQUIRE(there);
    const auto back = in_unit(*there, c.unit, basis, c.equivalents);
    REQUIRE(back);
    CHECK(back->value == Approx(3.7).epsilon(1e-13));
  }
}

TEST_CASE("what a conversion lacks is named", "[failure][matter]") {
  const auto lacks = [](const std::string& text) {
    const auto c = grams_per_litre(typed(text), {}, "tank.toml:7");
    return c ? "nothing" : bathwright::text(c.problems());
  };
  CHECK(lacks("37 % w/w").find("density of the solution") != std::string::npos);
  CHECK(lacks("3 mL/L").find("density of the liquid product") != std::string::npos);
  CHECK(lacks("3 mL/L").find("assay") != std::string::npos);  // both at once
  CHECK(lacks("1 mol/L").find("molar mass") != std::string::npos);
  CHECK(lacks("1 mol/kg").find("water content") != std::string::npos);
  CHECK(lacks("1 mol/kg").find("tank.toml:7") != std::string::npos);
  CHECK_FALSE(moles_per_litre(typed("10 g/L"), {}));
}
