#include <bathwright/sheets/shown_units.hpp>
#include <bathwright/units/read.hpp>
#include <catch2/catch.hpp>

using namespace bathwright;
using namespace bathwright::sheets;

namespace {

bath::Quantity quantity(const std::string& formula, speciation::Composition counts) {
  return {formula, formula, *matter::Formula::parse(formula), std::move(counts)};
}

Units in(const std::string& concentration) {
  UnitNames chosen;
  chosen.concentration = concentration;
  return Units(chosen);
}

/// Nickel sulfate, 2 mol/kg, with a density that was invented for it.
bath::TankView solution() {
  bath::TankView view;
  view.density_kg_per_L = 1.25;
  view.species = {{"Ni^2+", 2, 1, 0}, {"SO4^2-", 2, 1, 0}};
  return view;
}

bath::Quantity nickel() { return quantity("Ni^2+", {{"Ni^2+", 1}}); }
constexpr double nickel_g_per_mol = 58.693;

}  // namespace

TEST_CASE("a level is told in every unit that may be chosen", "[unit][sheets]") {
  const bath::TankView view = solution();
  const double level = 70;
  const auto told = [&](const char* unit) {
    return in(unit).level(nickel(), in(unit).medium_of(view)).of(level);
  };
  CHECK(told("g/L") == level);
  CHECK(told("mg/L") == Approx(70000));
  CHECK(told("oz/US gal") == Approx(9.3475).epsilon(1e-4));    // 1 oz/US gal is 7.4892 g/L
  CHECK(told("oz/imp gal") == Approx(11.2257).epsilon(1e-4));  // 1 oz/imp gal is 6.2357 g/L
  CHECK(told("mol/L") == Approx(level / nickel_g_per_mol).epsilon(1e-4));
  CHECK(told("N") == Approx(2 * level / nickel_g_per_mol).epsilon(1e-4));
  CHECK(told("% w/w") == Approx(100 * level / 1250));
  CHECK(told("ppm by mass") == Approx(1e6 * level / 1250));
  // 1.25 kg in a litre: for each kg of water 2 mol of 58.693 and of 96.06 g/mol.
  const double water = 1.25 / (1 + 2 * (58.693 + 96.06) / 1000);
  CHECK(*water_kg_per_L(view) == Approx(water).epsilon(1e-4));
  CHECK(told("mol/kg water") == Approx(level / nickel_g_per_mol / water).epsilon(1e-4));
  CHECK(in("N").level(nickel()).symbol == "N (2 eq/mol)");
  CHECK(in("ppm by mass").level(nickel(), in("ppm by mass").medium_of(view)).symbol == "ppm by mass");
}

TEST_CASE("what cannot be told in the chosen unit is told in g/L", "[unit][sheets]") {
  const bath::TankView view = solution();
  for (const char* unit : {"% w/w", "ppm by mass", "mol/kg water"}) {
    CHECK(in(unit).level(nickel()).symbol == "g/L");
    CHECK(in(unit).level(nickel()).of(70) == 70);
    CHECK(in(unit).needs_medium());
    CHECK(in(unit).typed(nickel()) == "g/L");
  }
  CHECK(in("N").level(quantity("H3BO3", {{"H3BO3", 1}})).symbol == "g/L");
  CHECK(in("N").level(quantity("H2SO4", {{"H^+", 0.5}})).symbol == "N (2 eq/mol)");
  CHECK(in("N").level(quantity("NaOH", {{"H^+", -1}, {"Zn^2+", -4}})).symbol == "N (1 eq/mol)");
}

TEST_CASE("what a bare number means can be read", "[unit][sheets]") {
  for (const std::string& unit : unit_choices().front().all) {
    INFO(unit);
    CHECK(units::read_concentration("0,2 " + in(unit).typed(nickel())));
  }
}

TEST_CASE("amounts and densities in the chosen units", "[unit][sheets]") {
  UnitNames chosen;
  CHECK(Units(chosen).amount(0.062, "kg") == "62.00 g");
  chosen.mass = "lb";
  chosen.liquid = "US gal";
  CHECK(Units(chosen).amount(14, "kg") == "30.86 lb");
  CHECK(Units(chosen).amount(0.2, "kg") == "7.055 oz");
  CHECK(Units(chosen).amount(1, "L") == "33.81 fl oz");
  chosen.mass = "g";
  CHECK(Units(chosen).mass(1.5) == "1500 g");
  const double kg_per_L = 1.183;  // over 0.99904 kg/L, water at 60 degF: SG 1.18414
  CHECK(Units(chosen).density(kg_per_L) == "1.183 kg/L");
  chosen.density = "SG";
  CHECK(Units(chosen).density(kg_per_L) == "1.184 SG");
  chosen.density = "°Bé";  // 145 - 145/SG
  CHECK(Units(chosen).density(kg_per_L) == "22.5 °Bé");
  chosen.density = "°Tw";  // 200 (SG - 1)
  CHECK(Units(chosen).density(kg_per_L) == "36.8 °Tw");
}
