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

// Factors: NIST Special Publication 811 (2008), appendix B.8: 1 oz (avoirdupois) = 28.349523125 g, 1 lb =
// 453.59237 g, 1 US gal = 3.785411784 L, 1 imp gal = 4.54609 L, 1 US fl oz = 29.5735295625 mL.
TEST_CASE("factors are those of the published tables", "[reference][sheets]") {
  const Units us(*unit_names("oz/US gal, lb, US gal, degF"));
  CHECK(1 / us.level(nickel()).per_g_per_L ==
        Approx(28.349523125 / 3.785411784).epsilon(1e-12));  // 7.489 g/L
  CHECK(1 / Units(*unit_names("oz/imp gal")).any_level().per_g_per_L ==
        Approx(28.349523125 / 4.54609).epsilon(1e-12));
  CHECK(us.amount_unit("kg").per_one == Approx(1 / 0.45359237).epsilon(1e-12));
  CHECK(us.amount_unit("L").per_one == Approx(1 / 3.785411784).epsilon(1e-12));
  CHECK(us.small_mass().per_one == Approx(1000 / 28.349523125).epsilon(1e-12));
  CHECK(us.volume(2400) == "634.0 US gal");
  CHECK(us.liquid(0.31, 3) == "10.5 fl oz");
  CHECK(Units().liquid(0.31, 3) == "0.310 L");
  CHECK(us.degrees({55}) == "131 degF");
  CHECK(us.warming(2) == "3.6 degF");  // a difference has no 32
  CHECK(Units().degrees({55}) == "55.0 degC");
  CHECK(Units().warming(2) == "2.0 degC");
}

TEST_CASE("a list of units says which kind each is of", "[unit][sheets]") {
  const auto us = unit_names("degF, US gal,lb ,OZ/us gal");
  REQUIRE(us);
  CHECK(us->concentration == "oz/US gal");
  CHECK(us->mass == "lb");
  CHECK(us->volume == "US gal");
  CHECK(us->liquid == "US gal");
  CHECK(us->temperature == "°F");
  CHECK(us->density == "kg/L");
  CHECK(unit_names("fl oz, US gal")->volume == "US gal");
  CHECK(unit_names("US gal, fl oz")->liquid == "fl oz");
  CHECK(unit_names("L, m3")->volume == "m3");
  CHECK(unit_names("L, m3")->liquid == "L");
  CHECK(unit_names("%w/w, °Bé")->concentration == "% w/w");
  CHECK(unit_names("degBe")->density == "°Bé");
  for (const UnitChoice& choice : unit_choices())
    for (const std::string& unit : choice.all) CHECK((*unit_names(unit)).*choice.kept == unit);
}

TEST_CASE("a list with a word nobody knows, or two of a kind, is refused", "[failure][sheets]") {
  const auto unknown = unit_names("kg, oz/gall");
  REQUIRE_FALSE(unknown);
  CHECK(unknown.problems().size() == 1);
  const std::string told = text(unknown.problems());
  CHECK_THAT(told, Catch::Contains("\"oz/gall\"") && Catch::Contains("volumes in L, US gal, imp gal, m3") &&
                       Catch::Contains("temperatures in °C, °F"));
  CHECK_THAT(text(unit_names("lb, degC, kg").problems()),
             Catch::Contains("\"lb\" and \"kg\" are both for masses"));
  CHECK_FALSE(unit_names("US gal, imp gal"));
  CHECK_FALSE(unit_names(""));
  CHECK_FALSE(unit_names("lb,"));
}

TEST_CASE("a sheet says which units it has, where they are not the log's", "[unit][sheets]") {
  CHECK(Units().note().empty());
  CHECK(Units(*unit_names("SG")).note().empty());
  CHECK_THAT(Units(*unit_names("lb, US gal, degF")).note(),
             Catch::StartsWith("Units: lb, US gal, degF.") && Catch::Contains("g/L, kg, L, degC"));
}
