#include <algorithm>
#include <bathwright/data/tables.hpp>
#include <bathwright/matter/stock.hpp>
#include <cassert>

namespace bathwright::matter {
namespace {

StockChemical chemical_of(const data::CsvRow& row) {
  StockChemical c;
  c.id = row["id"];
  c.aliases = row.list("aliases");
  c.name = row["name"];
  c.formula = row["formula"];
  c.cas = row["cas"];
  c.liquid = row["liquid"] == "yes";
  c.assay = row.number("assay");
  c.kg_per_L = row.number("kg_per_L");
  c.hazard_statements = row.list("hazard_statements");
  c.incompatible_with = row.list("incompatible_with");
  c.cautions = row.list("cautions");
  c.storage = row["storage"];
  c.note = row["note"];
  c.source = row["source"];
  return c;
}

}  // namespace

double StockChemical::mol_per_kg() const {
  const auto parsed = Formula::parse(formula);
  assert(parsed);  // a test reads every formula of the catalogue
  return assay * 1000 / parsed->molar_mass().v;
}

double StockChemical::water_kg_per_kg() const {
  if (!liquid) return 0;
  double water = 1 - assay;
  for (const Impurity& impurity : contains) water -= impurity.fraction;
  return water;
}

const StockCatalogue& StockCatalogue::built_in() {
  static const StockCatalogue catalogue = [] {
    StockCatalogue c;
    const auto chemicals = data::built_in_table("matter/stock_chemicals.csv", {"assay", "kg_per_L"});
    for (std::size_t i = 0; i < chemicals.size(); ++i) c.chemicals_.push_back(chemical_of(chemicals[i]));
    std::ranges::sort(c.chemicals_, {}, &StockChemical::id);
    const auto hazards = data::built_in_table("matter/hazard_statements.csv", {});
    for (std::size_t i = 0; i < hazards.size(); ++i)
      c.hazards_.emplace_back(hazards[i]["code"], hazards[i]["text"]);
    const auto pairs = data::built_in_table("matter/incompatibility.csv", {});
    for (std::size_t i = 0; i < pairs.size(); ++i) {
      const auto row = pairs[i];
      const auto text = [&](std::string_view column) { return std::string(row[column]); };
      c.incompatibilities_.push_back({text("id"), text("a"), text("b"), text("result"), text("severity"),
                                      row.list("kinds_a"), row.list("kinds_b"), row["always"] == "yes",
                                      text("practice"), text("source")});
    }
    return c;
  }();
  return catalogue;
}

const StockChemical* StockCatalogue::find(std::string_view id) const {
  const auto found = std::ranges::find_if(chemicals_, [&](const StockChemical& c) {
    return c.id == id || std::ranges::count(c.aliases, id) > 0;
  });
  return found == chemicals_.end() ? nullptr : &*found;
}

std::vector<std::string> StockCatalogue::ids() const {
  std::vector<std::string> all;
  for (const StockChemical& c : chemicals_) all.push_back(c.id);
  return all;
}

std::string StockCatalogue::hazard_text(std::string_view code) const {
  for (const auto& [known, text] : hazards_) {
    if (known == code) return text;
  }
  return "";
}

const Incompatibility* StockCatalogue::incompatibility(std::string_view id) const {
  const auto found = std::ranges::find(incompatibilities_, id, &Incompatibility::id);
  return found == incompatibilities_.end() ? nullptr : &*found;
}

}  // namespace bathwright::matter
