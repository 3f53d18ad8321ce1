#include <fmt/format.h>

#include <bathwright/sheets/names.hpp>
#include <cmath>

#include "parts.hpp"

namespace bathwright::sheets::slip {

std::string containers(const bath::ShelfItem& item, double amount, const std::string& unit,
                       const Units& units) {
  if (!item.package) return "";
  const std::string priced_in = item.priced_per == bath::ShelfItem::Per::litre ? "L" : "kg";
  if (priced_in != unit) return "";
  constexpr double hair = 1e-6;  // what is whole but for rounding is whole
  const double whole = std::floor(amount / *item.package + hair);
  const double rest = amount - whole * *item.package;
  if (whole < 1) return "";
  const AmountUnit shown = units.amount_unit(unit);
  std::string text = fixed(whole, 0) + " x " + plain(*item.package, shown.per_one) + " " + shown.symbol;
  if (rest > hair * *item.package) text += " and " + units.amount(rest, unit);
  return text;
}

std::string label_of(const bath::ShelfItem& item) {
  const matter::StockChemical& stock = item.stock;
  std::string text = pretty(stock.formula) + ", " + plain(100 * stock.assay) + " %";
  if (stock.liquid) text += " w/w, " + plain(stock.kg_per_L) + " kg/L";
  if (!item.grade.empty()) text += ", " + item.grade;
  for (const matter::Impurity& impurity : stock.contains)
    text += ", " + plain(100 * impurity.fraction) + " % " + pretty(impurity.formula);
  text += "; lot " + (item.lot.empty() ? "________" : item.lot) + ", to " +
          (item.expires.empty() ? "________" : item.expires);
  return text;
}

std::string plain(double value) { return fmt::format("{:g}", value); }

std::string plain(double value, double per_one) {
  return per_one == 1 ? plain(value) : fmt::format("{:.4g}", value * per_one);
}

}  // namespace bathwright::sheets::slip
