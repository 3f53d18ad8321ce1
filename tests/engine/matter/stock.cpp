#include <algorithm>
#include <bathwright/data/csv.hpp>
#include <bathwright/matter/stock.hpp>
#include <catch2/catch.hpp>
#include <cmath>
#include <fstream>
#include <iterator>

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

/// The last digit of a CAS number is the sum of the others, each times its place from the right, modulo 10.
bool check_digit_holds(const std::string& cas) {
  std::string digits;
  std::ranges::copy_if(cas, std::back_inserter(digits), [](char c) { return c != '-'; });
  int sum = 0;
  for (std::size_t place = 1; place < digits.size(); ++place)
    sum += static_cast<int>(place) * (digits[digits.size() - 1 - place] - '0');
  return sum % 10 == digits.back() - '0';
}
}  // namespace

TEST_CASE("every chemical of the catalogue is complete", "[property][matter]") {
  const StockCatalogue& stock = StockCatalogue::built_in();
  REQUIRE(stock.ids().size() == 156);
  for (const std::string& id : stock.ids()) {
    INFO(id);
    const StockChemical& c = chemical(id);
    CHECK(matter::Formula::parse(c.formula));
    CHECK(c.assay > 0);
    CHECK(c.assay <= 1);
    CHECK(c.liquid == std::isfinite(c.kg_per_L));
    CHECK(check_digit_holds(c.cas));
    CHECK_FALSE(c.name.empty());
    CHECK_FALSE(c.source.empty());
    for (const std::string& code : c.hazard_statements) CHECK_FALSE(stock.hazard_text(code).empty());
    for (const std::string& rule : c.incompatible_with) CHECK(stock.incompatibility(rule));
  }
}

TEST_CASE("a check digit finds a slip in a CAS number", "[unit][matter]") {
  CHECK(check_digit_holds("7732-18-5"));  // water: 1*8 + 2*1 + 3*2 + 4*3 + 5*7 + 6*7 = 105
  CHECK_FALSE(check_digit_holds("7732-81-5"));
}

TEST_CASE("molar masses of the stock chemicals", "[reference][matter]") {
  std::ifstream file(TEST_DIR "/stock_molar_masses.csv");
  const std::string content{std::istreambuf_iterator<char>(file), {}};
  constexpr std::string_view numeric[] = {"g_per_mol"};
  const auto table = data::CsvTable::read("stock_molar_masses.csv", content, numeric);
  REQUIRE(table);
  CHECK(table->size() == 133);
  for (std::size_t i = 0; i < table->size(); ++i) {
    const auto row = (*table)[i];
    INFO(row.where());
    const auto formula = matter::Formula::parse(chemical(row["id"]).formula);
    CHECK(formula->molar_mass().v == Approx(row.number("g_per_mol")).margin(0.01).epsilon(0));
  }
}

TEST_CASE("a chemical answers to its other ids, and no id is used twice", "[unit][matter]") {
  CHECK(chemical("nickel_sulfate_7").id == "nickel-sulfate-heptahydrate");
  std::vector<std::string> all;
  for (const std::string& id : StockCatalogue::built_in().ids()) {
    all.push_back(id);
    std::ranges::copy(chemical(id).aliases, std::back_inserter(all));
  }
  std::ranges::sort(all);
  CHECK(std::ranges::adjacent_find(all) == all.end());
}

TEST_CASE("trade strengths of liquids, mol/L at 20 degC", "[reference][matter]") {
  // 1000 * assay * kg_per_L / molar mass, by hand: sodium hydroxide 50 % of 1.525 kg/L: 762.5 g/L / 39.997
  struct Row {
    const char* id;
    double mol_per_L;
  };
  for (const Row& row :
       {Row{"sodium-hydroxide-solution", 19.064}, Row{"nitric-acid", 14.983}, Row{"phosphoric-acid", 14.650},
        Row{"ammonia-solution", 14.764}, Row{"hydrogen-peroxide", 11.648}, Row{"sulfuric-acid-35", 4.4967}}) {
    const StockChemical& c = chemical(row.id);
    CHECK(c.mol_per_kg() * c.kg_per_L == Approx(row.mol_per_L).margin(1e-3).epsilon(0));
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

TEST_CASE("chloride of an acid copper bath from a spoon of acid", "[reference][matter]") {
  // 10 mL of 37 % hydrochloric acid in 100 US gal: 11.3 mg/L (computed elsewhere; the published rule says 12)
  const StockChemical& acid = chemical("hydrochloric-acid");
  CHECK(acid.mol_per_kg() * acid.kg_per_L * 0.010 * 35.45 / 378.5412 * 1000 ==
        Approx(11.3).margin(0.06).epsilon(0));
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
