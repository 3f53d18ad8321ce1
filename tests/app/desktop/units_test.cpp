#include <unistd.h>

#include <bathwright/units/read.hpp>
#include <catch2/catch.hpp>
#include <filesystem>
#include <fstream>

#include "model/reading_draft.hpp"
#include "model/units.hpp"

using namespace bathwright;
using namespace bathwright::desktop;

namespace {

bath::Quantity quantity(const std::string& formula, speciation::Composition counts) {
  return {formula, formula, *matter::Formula::parse(formula), std::move(counts)};
}

Units in(const std::string& concentration) {
  Settings settings;
  settings.concentration = concentration;
  return Units(settings);
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

TEST_CASE("a level is told in every unit of the settings", "[unit][desktop]") {
  const bath::TankView view = solution();
  const double level = 70;
  const auto told = [&](const char* unit) { return in(unit).level(nickel(), &view).of(level); };
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
  CHECK(in("N").level(nickel(), &view).symbol == "N (2 eq/mol)");
  CHECK(in("ppm by mass").level(nickel(), &view).symbol == "ppm by mass");
}

TEST_CASE("what cannot be told in the chosen unit is told in g/L", "[unit][desktop]") {
  const bath::TankView view = solution();
  for (const char* unit : {"% w/w", "ppm by mass", "mol/kg water"}) {
    CHECK(in(unit).level(nickel(), nullptr).symbol == "g/L");
    CHECK(in(unit).level(nickel(), nullptr).of(70) == 70);
    CHECK(in(unit).only_for_now());
    CHECK(in(unit).typed(nickel()) == "g/L");
  }
  CHECK(in("N").level(quantity("H3BO3", {{"H3BO3", 1}}), &view).symbol == "g/L");
  CHECK(in("N").level(quantity("H2SO4", {{"H^+", 0.5}}), &view).symbol == "N (2 eq/mol)");
  CHECK(in("N").level(quantity("NaOH", {{"H^+", -1}, {"Zn^2+", -4}}), &view).symbol == "N (1 eq/mol)");
}

TEST_CASE("what a bare number means can be read", "[unit][desktop]") {
  for (const std::string& unit : unit_choices().front().all) {
    INFO(unit);
    CHECK(units::read_concentration("0,2 " + in(unit).typed(nickel())));
  }
}

TEST_CASE("amounts and densities in the units of the settings", "[unit][desktop]") {
  Settings settings;
  CHECK(Units(settings).amount(0.062, "kg") == "62.00 g");
  settings.mass = "lb";
  settings.liquid = "US gal";
  CHECK(Units(settings).amount(14, "kg") == "30.86 lb");
  CHECK(Units(settings).amount(0.2, "kg") == "7.055 oz");
  CHECK(Units(settings).amount(1, "L") == "33.81 fl oz");
  CHECK_FALSE(Units(settings).as_on_paper("kg"));
  settings.mass = "g";
  CHECK(Units(settings).mass(1.5) == "1500 g");
  const double kg_per_L = 1.183;  // over 0.99904 kg/L, water at 60 degF: SG 1.18414
  CHECK(Units(settings).density(kg_per_L) == "1.183 kg/L");
  settings.density = "SG";
  CHECK(Units(settings).density(kg_per_L) == "1.184 SG");
  settings.density = "°Bé";  // 145 - 145/SG
  CHECK(Units(settings).density(kg_per_L) == "22.5 °Bé");
  settings.density = "°Tw";  // 200 (SG - 1)
  CHECK(Units(settings).density(kg_per_L) == "36.8 °Tw");
}

TEST_CASE("settings of before are read, unknown units become the usual ones", "[unit][desktop]") {
  const auto file =
      std::filesystem::temp_directory_path() / ("desktop-" + std::to_string(::getpid()) + ".json");
  std::ofstream(file) << R"({"shop": "/shop", "scale": 1.5, "concentration": "oz/gal", "volume": "barrel"})";
  const Settings settings = kept_settings(file);
  CHECK(settings.concentration == "oz/US gal");
  CHECK(settings.mass == "kg");
  CHECK(Units(settings).volume(2340) == "2340 L");
  Settings changed = settings;
  changed.mass = "lb", changed.liquid = "fl oz", changed.density = "°Tw";
  REQUIRE(keep(file, changed));
  const Settings again = kept_settings(file);
  CHECK(again.mass == "lb");
  CHECK(again.liquid == "fl oz");
  CHECK(again.density == "°Tw");
  std::filesystem::remove(file);
}

TEST_CASE("a bare number keeps its meaning when another unit is chosen", "[unit][desktop]") {
  Draft draft;
  draft.volume = "620";
  draft.temperature = "130";
  draft.rows = {{"Ni^2+", {""}, 0, "", "", "", "9.4"}, {"Cl^-", {""}, 0, "", "", "", "14.3 g/L"}};
  DraftHistory history(draft);
  history.type({0, Field::value, "9,5"}, "");
  const HeadUnits heads{"US gal", "°F", {{"Ni^2+", "oz/US gal"}}};
  history.write_out(heads);
  CHECK(history.now().volume == "620 US gal");
  CHECK(history.now().temperature == "130 °F");
  CHECK(history.now().rows[0].value == "9,5 oz/US gal");
  CHECK(history.now().rows[1].value == "14.3 g/L");
  history.undo();
  CHECK(history.now().rows[0].value == "9.4 oz/US gal");
  draft.volume = "3 cm";
  CHECK(with_units(draft, heads).volume == "3 cm");
}
