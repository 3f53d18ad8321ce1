#include <bathwright/shopfiles/tank_file.hpp>
#include <catch2/catch.hpp>
#include <string>

using namespace bathwright;
using bath::ShelfItem;
using bath::Tank;

namespace {

const matter::StockCatalogue& stock() { return matter::StockCatalogue::built_in(); }

Tank demonstration() {
  const auto tank = shopfiles::read_tank(PROJECT_DIR "/baths/n-07.toml", stock());
  INFO((tank ? "" : text(tank.problems())));
  REQUIRE(tank);
  return *tank;
}

/// A tank with these lines for its target and shelf.
Tank tank_with(const std::string& target, const std::string& shelf) {
  const std::string written =
      "bath_type = \"b\"\nname = \"t\"\nvessel = { working_volume = \"100 L\", freeboard = \"5 L\" }\n"
      "operating = { temperature = \"131 degF\", idle_temperature = \"18 degC\" }\n[target]\n" +
      target + "\n[shelf]\n" + shelf + "\n";
  const auto tank = shopfiles::read_tank_text("t.toml", written, stock());
  INFO((tank ? "" : text(tank.problems())));
  REQUIRE(tank);
  return *tank;
}

ShelfItem only_item(const std::string& shelf) {
  const Tank tank = tank_with("pH = { aim = 4, low = 3, high = 5 }", shelf);
  REQUIRE(tank.shelf.size() == 1);
  return tank.shelf[0];
}

}  // namespace

TEST_CASE("the demonstration tank is read as it stands", "[unit][shopfiles]") {
  const Tank tank = demonstration();
  CHECK(tank.bath_type == "watts-nickel");
  CHECK(tank.shop == "Brindlewick Surface Works");
  CHECK(tank.working_volume.v == 2400);
  CHECK(tank.freeboard.v == 150);
  CHECK(tank.surface->v == 200);
  CHECK(tank.temperature.v == 55);
  CHECK(tank.idle_temperature.v == 18);
  REQUIRE(tank.aims.size() == 4);
  CHECK(tank.aim("NiSO4.6H2O")->aim == 280);
  CHECK(tank.aim("NiSO4.6H2O")->low == 225);
  CHECK(tank.aim("NiCl2.6H2O")->aim == 50);
  CHECK(tank.aim("H3BO3")->high == 45);
  CHECK(tank.aim("pH")->aim == 4.2);
  REQUIRE(tank.shelf.size() == 6);
  CHECK(tank.on_shelf("nickel-sulfate")->stock.assay == Approx(0.99).epsilon(1e-15));
  CHECK(tank.on_shelf("nickel-chloride")->stock.assay == Approx(0.985).epsilon(1e-15));
  CHECK(tank.on_shelf("boric-acid")->stock.assay == Approx(0.995).epsilon(1e-15));
  CHECK(tank.on_shelf("nickel-sulfate")->largest_rise_g_per_L == 10.0);
  CHECK(tank.on_shelf("nickel-sulfate")->package == 25.0);
  CHECK(tank.on_shelf("sulfuric-acid")->priced_per == ShelfItem::Per::litre);
}

TEST_CASE("a vessel measured by its walls holds what stands in it does not take", "[unit][shopfiles]") {
  const auto tank = shopfiles::read_tank_text(
      "t.toml",
      "bath_type = \"b\"\nname = \"t\"\nvessel = { inner_volume = \"2500 L\", displacement = \"4 %\", "
      "freeboard = \"5 L\", surface = \"200 dm2\" }\n"
      "operating = { temperature = \"55 degC\", idle_temperature = \"18 degC\" }\n"
      "[target]\npH = { aim = 4, low = 3, high = 5 }\n",
      stock());
  INFO((tank ? "" : text(tank.problems())));
  REQUIRE(tank);
  CHECK(tank->working_volume.v == Approx(2400).epsilon(1e-14));
  CHECK(tank->surface->v == 200);
}

TEST_CASE("deionised water is on the shelf without being in the catalogue", "[unit][shopfiles]") {
  const ShelfItem water = only_item(R"(water = { price = 0, unit = "L" })");
  CHECK(water.stock.formula == "H2O");
  CHECK(water.stock.liquid);
  CHECK(water.stock.kg_per_L == Approx(0.9982).margin(5e-5).epsilon(0));  // at 20 degC; Kell 1975
}

TEST_CASE("an aim is in g/L of its quantity whatever unit it was written in", "[unit][shopfiles]") {
  // 1 oz (av)/US gal = 7.48915 g/L (printed trade table); M(H3BO3) = 61.831 g/mol (worked example D1's
  // figure).
  const Tank tank = tank_with(
      "\"H3BO3\" = { aim = \"0.7 mol/L\", low = \"38 g/L\", high = \"45000 mg/L\" }\n"
      "\"NiCl2.6H2O\" = { aim = \"6,5 oz/US gal\", low = \"4 % w/v\", high = \"60 g/L\" }",
      "");
  CHECK(tank.aim("H3BO3")->aim == Approx(0.7 * 61.831).margin(0.001).epsilon(0));
  CHECK(tank.aim("H3BO3")->high == Approx(45).margin(1e-9).epsilon(0));
  CHECK(tank.aim("NiCl2.6H2O")->aim == Approx(6.5 * 7.48915).margin(1e-4).epsilon(0));
  CHECK(tank.aim("NiCl2.6H2O")->low == Approx(40).margin(1e-9).epsilon(0));
  CHECK(tank.temperature.v == Approx(55).margin(1e-9).epsilon(0));
}

TEST_CASE("the uncertainty of an assay is stated as the assay is", "[unit][shopfiles]") {
  const auto u = [](const std::string& keys) {
    return only_item("nickel-sulfate = { " + keys + R"(, price = 5, unit = "kg" })").u_assay_rel;
  };
  CHECK(u(R"(assay = "99 %", assay_uncertainty = "0.3 %")").value() == Approx(0.3 / 99));
  CHECK(u(R"(assay = "22.2 %w/w Ni", assay_uncertainty = "0.1 %w/w Ni")").value() == Approx(0.1 / 22.2));
  CHECK_FALSE(u(R"(assay = "99 %")"));
}

TEST_CASE("an assay may be the content of an element", "[unit][shopfiles]") {
  // D1's molar masses: Ni 58.693, NiSO4.6H2O 262.839 g/mol: 22.2 % Ni is 0.222 * 262.839 / 58.693 = 0.99416.
  const ShelfItem by_metal =
      only_item(R"(nickel-sulfate = { assay = "22.2 %w/w Ni", price = 5, unit = "kg" })");
  CHECK(by_metal.stock.assay == Approx(0.99416).margin(1e-5).epsilon(0));
  // Three nickel atoms in a formula unit of the basic carbonate.
  const ShelfItem carbonate =
      only_item(R"(nickel-carbonate = { assay = "45 %w/w Ni", price = 5, unit = "kg" })");
  const auto formula = matter::Formula::parse(carbonate.stock.formula);
  REQUIRE(formula);
  CHECK(carbonate.stock.assay ==
        Approx(0.45 * formula->molar_mass().v / (3 * 58.693)).margin(1e-5).epsilon(0));
}

TEST_CASE("a shelf entry overrides what the catalogue says of the chemical", "[unit][shopfiles]") {
  const ShelfItem bag = only_item(R"(nickel-sulfate = { formula = "NiSO4.7H2O", price = 5, unit = "kg" })");
  CHECK(bag.stock.formula == "NiSO4.7H2O");
  CHECK(bag.stock.name == "nickel(II) sulfate heptahydrate");
  CHECK(only_item(R"(nickel-sulfate = { formula = "NiSO4", price = 5, unit = "kg" })").stock.name ==
        "nickel(II) sulfate, anhydrous");
  CHECK(only_item(R"(nickel-sulfate = { formula = "NiSO4.7H2O", name = "own", price = 5, unit = "kg" })")
            .stock.name == "own");
  CHECK(bag.stock.assay == stock().find("nickel-sulfate")->assay);
  const ShelfItem drum = only_item(
      R"(brightener-a = { formula = "C7H5NO3S", assay = "20 %", density = "1,05 kg/L", price = 3, unit = "L", )"
      R"(largest_rise = "2 mL/L", package = "21 kg" })");
  CHECK(drum.stock.name == "brightener-a");
  CHECK(drum.stock.liquid);
  CHECK(*drum.package == Approx(20).margin(1e-9).epsilon(0));  // 21 kg / 1.05 kg/L
  CHECK(*drum.largest_rise_g_per_L == Approx(2 * 1.05 * 0.2).margin(1e-9).epsilon(0));
}

TEST_CASE("a price per pound or gallon becomes one per kg or L", "[unit][shopfiles]") {
  CHECK(only_item(R"(boric-acid = { price = 1, unit = "lb" })").price ==
        Approx(1 / 0.45359237).epsilon(1e-12));
  CHECK(only_item(R"(water = { price = 1, unit = "US gal" })").price ==
        Approx(1 / 3.785411784).epsilon(1e-12));
}

TEST_CASE("how a tank is dosed is read, and usual where nothing is said", "[unit][shopfiles]") {
  const std::string rest = "pH = { aim = 4, low = 3, high = 5 }";
  const bath::DosingHabits usual = tank_with(rest, "").dosing;
  CHECK(usual.fill == bath::DosingHabits::Fill::to_mark);
  CHECK(usual.dead_band);
  CHECK(usual.dead_band_share == 0.02);
  CHECK_FALSE(usual.whole_packages);
  const bath::DosingHabits said =
      tank_with(rest,
                "[dosing]\nfill = \"as is\"\nwhole_packages = true\ndead_band = \"1.5 %\"\n"
                "dead_band_pH = 0.1\nwaste_price = 0.12")
          .dosing;
  CHECK(said.fill == bath::DosingHabits::Fill::as_is);
  CHECK(said.whole_packages);
  CHECK(said.dead_band_share == Approx(0.015).epsilon(1e-12));
  CHECK(said.dead_band_pH == 0.1);
  CHECK(said.waste_price_per_L == 0.12);
  CHECK_FALSE(tank_with(rest, "[dosing]\ndead_band = \"off\"").dosing.dead_band);
}

TEST_CASE("a lot has its label, its last day and what its certificate finds", "[unit][shopfiles]") {
  const ShelfItem lot = only_item(
      R"(boric-acid = { price = 1, unit = "kg", grade = "technical", lot = "24-0815", expires = 2027-06-30, )"
      R"(contains = { "SO4^2-" = "0,05 %" } })");
  CHECK(lot.grade == "technical");
  CHECK(lot.lot == "24-0815");
  CHECK(lot.expires == "2027-06-30");
  CHECK_FALSE(lot.expired_on("2027-06-30T22:00:00"));
  CHECK(lot.expired_on("2027-07-01"));
  CHECK_FALSE(lot.expired_on(""));
  REQUIRE(lot.stock.contains.size() == 1);
  CHECK(lot.stock.contains[0].formula == "SO4^2-");
  CHECK(lot.stock.contains[0].fraction == Approx(0.0005).epsilon(1e-12));
  CHECK(only_item(R"(boric-acid = { price = 1, unit = "kg", expires = "2027-06-30" })").expires ==
        "2027-06-30");
}

TEST_CASE("the limits of a tank have their revision", "[unit][shopfiles]") {
  const auto tank = shopfiles::read_tank_text("t.toml", R"(bath_type = "b"
name = "t"
line = "line 2"
vessel = { working_volume = "100 L", freeboard = "5 L" }
operating = { temperature = "55 degC", idle_temperature = "18 degC" }
target = { pH = { aim = 4, low = 3, high = 5 } }
limits = { revision = "C", from = 2026-01-15, owner = "process chemist", source = "supplier sheet" }
)",
                                              stock());
  REQUIRE(tank);
  CHECK(tank->line == "line 2");
  CHECK(tank->limits.revision == "C");
  CHECK(tank->limits.from == "2026-01-15");
  CHECK(tank->limits.owner == "process chemist");
  CHECK(tank->limits.source == "supplier sheet");
}
