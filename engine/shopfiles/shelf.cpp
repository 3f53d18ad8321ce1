#include "shelf.hpp"

#include <array>
#include <bathwright/base/nearest.hpp>
#include <bathwright/matter/concentration.hpp>
#include <bathwright/matter/water.hpp>
#include <bathwright/units/read.hpp>

#include "assay.hpp"
#include "local_date.hpp"

namespace bathwright::shopfiles {
namespace {

using bath::ShelfItem;
using matter::StockChemical;
using Per = ShelfItem::Per;

constexpr Range possible_prices{0, 1e6};
constexpr units::Celsius store_temperature{20};  // at which StockChemical states densities

StockChemical named(const std::string& id) {
  StockChemical chemical;
  chemical.id = chemical.name = id;
  return chemical;
}

/// Deionised water is on every shelf and in no catalogue of chemicals.
StockChemical deionised_water() {
  StockChemical water = named("water");
  water.name = "deionised water";
  water.formula = "H2O";
  water.liquid = true;
  water.kg_per_L = matter::water_density(store_temperature).v;
  return water;
}

std::optional<StockChemical> known_chemical(const std::string& id, const matter::StockCatalogue& catalogue) {
  if (id == "water") return deionised_water();
  if (const StockChemical* known = catalogue.find(id)) return *known;
  return std::nullopt;
}

void report_unknown(Table& shelf, const std::string& id, const matter::StockCatalogue& catalogue) {
  std::vector<std::string> known = catalogue.ids();
  known.emplace_back("water");
  const auto meant = nearest(id, known);
  shelf.report(id, "is not a stock chemical known here", "a known id, or a formula and an assay of its own",
               meant ? "Did you mean " + *meant + '?' : "");
}

/// A share of the substance at `key`; nothing where it is left out, or reported.
std::optional<double> read_share(Table& entry, const Key& key, const matter::Formula& formula) {
  const std::string written = entry.text(key);
  if (written.empty()) return std::nullopt;
  const auto share = read_assay(written, formula, entry.where(key.name));
  if (share) return *share;
  entry.report(key.name, share.problems());
  return std::nullopt;
}

void read_assay_of_lot(Table& entry, ShelfItem& item, const matter::Formula& formula, Need need) {
  const auto assay = read_share(entry, {"assay", need, R"("99 %" or "22.2 %w/w Ni")"}, formula);
  const auto u = read_share(entry, {"assay_uncertainty", optional, R"("0.3 %")"}, formula);
  if (assay) item.stock.assay = *assay;
  if (u && *u < item.stock.assay)
    item.u_assay_rel = *u / item.stock.assay;
  else if (u)
    entry.report("assay_uncertainty", "is as large as the assay", R"(one standard uncertainty, as "0.3 %")");
}

/// kg or L in one of the unit that a price is for: 0.4536 kg for "lb".
struct PricedAmount {
  Per per;
  double amount;
};
std::optional<PricedAmount> priced_amount(const std::string& unit) {
  if (const auto mass = units::read_mass("1 " + unit)) return PricedAmount{Per::kilogram, mass->v};
  if (const auto volume = units::read_volume("1 " + unit)) return PricedAmount{Per::litre, volume->v};
  return std::nullopt;
}

void read_price(Table& entry, ShelfItem& item) {
  const auto price = entry.number({"price", required, "5.10"}, possible_prices);
  const std::string unit = entry.text({"unit", required, R"("kg")"});
  if (!price || unit.empty()) return;
  const auto priced = priced_amount(unit);
  if (!priced) {
    entry.report("unit", '"' + printable(unit) + "\" is not a unit a price can be for", R"("kg" or "L")");
  } else if (priced->per == Per::litre && !item.stock.liquid) {
    entry.report("unit", "is a volume, but the chemical is a solid", R"("kg", or the density of the liquid)");
  } else {
    item.priced_per = priced->per;
    item.price = *price / priced->amount;
  }
}

/// A bag or drum, in the unit of the price.
std::optional<double> read_package(Table& entry, const ShelfItem& item) {
  const std::string written = entry.text({"package", optional, R"("25 kg")"});
  if (written.empty()) return std::nullopt;
  const auto mass = units::read_mass(written);
  const auto volume = units::read_volume(written);
  const double kg_per_L = item.stock.kg_per_L;
  const bool by_mass = item.priced_per == Per::kilogram;
  if (!(mass && mass->v > 0) && !(volume && volume->v > 0)) {
    entry.report("package", '"' + printable(written) + "\" is not the content of a bag or drum",
                 R"(a mass or volume, as "25 kg")");
  } else if (mass) {
    return by_mass ? mass->v : mass->v / kg_per_L;
  } else if (!item.stock.liquid) {
    entry.report("package", "is a volume, but the chemical is a solid", R"(a mass, as "25 kg")");
  } else {
    return by_mass ? volume->v * kg_per_L : volume->v;
  }
  return std::nullopt;
}

std::optional<double> read_largest_rise(Table& entry, const StockChemical& stock,
                                        const matter::Formula& formula) {
  const auto rise = entry.quantity({"largest_rise", optional, R"("10 g/L")"}, units::read_concentration);
  if (!rise) return std::nullopt;
  matter::ConcentrationBasis basis{.molar_mass = formula.molar_mass()};
  if (stock.liquid) {
    basis.product_density = units::KilogramsPerLitre{stock.kg_per_L};
    basis.product_assay = stock.assay;
  }
  const auto grams = matter::grams_per_litre(*rise, basis, entry.where("largest_rise"));
  if (!grams) {
    entry.report("largest_rise", grams.problems());
  } else if (grams->v > 0) {
    return grams->v;
  } else {
    entry.report("largest_rise", "is zero: nothing could ever be added", R"(a rise, as "10 g/L")");
  }
  return std::nullopt;
}

/// The name of a chemical whose bag holds another formula than the catalogue's: "nickel(II) sulfate
/// heptahydrate". Of what is not even the same salt, the formula itself.
std::string name_as_in_bag(const StockChemical& stock, const std::string& formula) {
  constexpr std::array<std::string_view, 13> hydrates{
      "", "mono", "di", "tri", "tetra", "penta", "hexa", "hepta", "octa", "nona", "deca", "undeca", "dodeca"};
  const auto salt = [](const std::string& text) { return text.substr(0, text.find('.')); };
  if (salt(formula) != salt(stock.formula)) return formula;
  std::string name = stock.name;
  if (const std::size_t last = name.rfind(' '); last != std::string::npos && name.ends_with("hydrate"))
    name.erase(last);
  if (salt(formula) == formula) return name + ", anhydrous";
  for (std::size_t n = 1; n < hydrates.size(); ++n)
    if (formula == salt(formula) + "." + (n == 1 ? "" : std::to_string(n)) + "H2O")
      return name + " " + std::string(hydrates[n]) + "hydrate";
  return formula;
}

/// What the certificate of the lot finds beside the substance.
std::vector<matter::Impurity> read_contents(Table& entry) {
  std::vector<matter::Impurity> contents;
  auto contains = entry.table({"contains", optional, R"({ "SO4^2-" = "0.05 %" })"});
  if (!contains) return contents;
  for (const std::string& name : contains->names()) {
    const std::string written = contains->text({name, required, R"("0.05 %")"});
    if (const auto formula = matter::Formula::parse(name, contains->where(name)); !formula)
      contains->report(name, formula.problems());
    if (const auto fraction = units::read_fraction(written, contains->where(name)))
      contents.push_back({name, *fraction});
    else if (!written.empty())
      contains->report(name, fraction.problems());
  }
  return contents;
}

void read_item(Table& entry, ShelfItem& item, Need assay) {
  StockChemical& stock = item.stock;
  const auto name = entry.text({"name", optional, R"("nickel sulfate")"});
  const auto own_formula = entry.text({"formula", optional, R"("NiSO4.7H2O")"});
  if (!name.empty())
    stock.name = name;
  else if (!own_formula.empty() && !stock.formula.empty() && own_formula != stock.formula)
    stock.name = name_as_in_bag(stock, own_formula);
  if (!own_formula.empty()) stock.formula = own_formula;
  if (const auto density = entry.positive({"density", optional, R"("1.84 kg/L")"}, units::read_density)) {
    stock.liquid = true;
    stock.kg_per_L = density->v;
  }
  const auto formula = matter::Formula::parse(stock.formula, entry.where("formula"));
  if (!formula) {
    if (!own_formula.empty()) entry.report("formula", formula.problems());
  } else if (formula->charge() != 0) {
    entry.report("formula", stock.formula + " carries a charge", "a neutral substance, as \"NiSO4.6H2O\"");
  }
  // Without a usable formula the rest is still read, so that its own problems are found.
  const matter::Formula substance = formula ? *formula : *matter::Formula::parse("H2O");
  read_assay_of_lot(entry, item, substance, assay);
  stock.contains = read_contents(entry);
  item.grade = entry.text({"grade", optional, R"("technical")"});
  item.lot = entry.text({"lot", optional, R"("24-0815")"});
  item.expires = read_date(entry, {"expires", optional, "2027-06-30"});
  read_price(entry, item);
  item.package = read_package(entry, item);
  item.largest_rise_g_per_L = read_largest_rise(entry, stock, substance);
}

}  // namespace

std::vector<ShelfItem> read_shelf(Table& shelf, const matter::StockCatalogue& catalogue) {
  std::vector<ShelfItem> items;
  for (const std::string& id : shelf.names()) {
    auto entry = shelf.table({id, required, R"({ price = 5.10, unit = "kg" })"});
    if (!entry) continue;
    const auto known = known_chemical(id, catalogue);
    const bool described = entry->has("formula");
    if (!known && !described) report_unknown(shelf, id, catalogue);
    ShelfItem item;
    item.stock = known ? *known : named(id);
    read_item(*entry, item, !known && described ? required : optional);
    items.push_back(std::move(item));
  }
  return items;
}

}  // namespace bathwright::shopfiles
