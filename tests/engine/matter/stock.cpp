#include <bathwright/matter/stock.hpp>
#include <catch2/catch.hpp>
#include <cmath>

using namespace bathwright;
using matter::StockCatalogue;
using matter::StockChemical;

namespace {
const StockChemical& chemical(std::string_view id) {
  const StockChemical* found = StockCatalogue::built_in().find(id);
  INFO(id);
  REQUIRE(found);
  return *found;
}
}  // namespace

TEST_CASE("every chemical of the catalogue is complete", "[property][matter]") {
  const StockCatalogue& stock = StockCatalogue::built_in();
  REQUIRE(stock.ids().size() > 20);
  for (const std::string& id : stock.ids()) {
    INFO(id);
    const StockChemical& c = chemical(id);
    CHECK(matter::Formula::parse(c.formula));
    CHECK(c.assay > 0);
    CHECK(c.assay <= 1);
    CHECK(c.liquid == std::isfinite(c.kg_per_L));
    CHECK_FALSE(c.name.empty());
    CHECK_FALSE(c.source.empty());
    for (const std::string& code : c.hazard_statements) CHECK_FALSE(stock.hazard_text(code).empty());
    for (const std::string& rule : c.incompatible_with) CHECK(stock.incompatibility(rule));
  }
}

TEST_CASE("every incompatibility says what happens and how grave it is", "[property][matter]") {
  for (const auto& rule : StockCatalogue::built_in().incompatibilities()) {
    INFO(rule.id);
    CHECK((rule.severity == "stop" || rule.severity == "warn" || rule.severity == "info"));
    CHECK_FALSE(rule.a.empty());
    CHECK_FALSE(rule.b.empty());
    CHECK_FALSE(rule.result.empty());
    CHECK_FALSE(rule.source.empty());
  }
}

TEST_CASE("a kilogram of product holds its assay of substance", "[reference][matter]") {
  // Sulfuric acid 96 %, 1.836 kg/L: 17.972 mol/L, hydrochloric acid 37 %, 1.184 kg/L: 12.016 mol/L (trade
  // strengths).
  const StockChemical& sulfuric = chemical("sulfuric-acid");
  CHECK(sulfuric.mol_per_kg() * sulfuric.kg_per_L == Approx(17.972).margin(5e-4).epsilon(0));
  CHECK(sulfuric.water_kg_per_kg() == Approx(0.04).margin(1e-12).epsilon(0));
  const StockChemical& hydrochloric = chemical("hydrochloric-acid");
  CHECK(hydrochloric.mol_per_kg() * hydrochloric.kg_per_L == Approx(12.016).margin(5e-4).epsilon(0));
  // 1000 g * 0.99 / 262.839 g/mol; the rest of a solid is inert
  CHECK(chemical("nickel-sulfate").mol_per_kg() == Approx(3.76656).margin(5e-5).epsilon(0));
  CHECK(chemical("nickel-sulfate").water_kg_per_kg() == 0);
}

TEST_CASE("hexahydrate and heptahydrate cannot be confused", "[unit][matter]") {
  CHECK(chemical("nickel-sulfate").formula == "NiSO4.6H2O");
  CHECK(chemical("nickel-sulfate-heptahydrate").formula == "NiSO4.7H2O");
}

TEST_CASE("what is not in the store is not found", "[failure][matter]") {
  CHECK(StockCatalogue::built_in().find("unobtainium") == nullptr);
  CHECK(StockCatalogue::built_in().hazard_text("H999").empty());
  CHECK(StockCatalogue::built_in().incompatibility("") == nullptr);
}
