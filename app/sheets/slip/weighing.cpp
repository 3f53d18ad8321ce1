#include <fmt/format.h>

#include <bathwright/sheets/names.hpp>
#include <cmath>

#include "parts.hpp"

namespace bathwright::sheets::slip {
namespace {

/// "2 x 25 kg and 6.05 kg": whole containers and what is taken of one more.
std::string containers(const bath::ShelfItem& item, const dosing::Addition& addition) {
  if (!item.package) return "";
  const std::string priced_in = item.priced_per == bath::ShelfItem::Per::litre ? "L" : "kg";
  if (priced_in != addition.unit) return "";
  constexpr double hair = 1e-6;  // what is whole but for rounding is whole
  const double whole = std::floor(addition.amount / *item.package + hair);
  const double rest = addition.amount - whole * *item.package;
  if (whole < 1) return "";
  std::string text = fixed(whole, 0) + " x " + plain(*item.package) + " " + addition.unit;
  if (rest > hair * *item.package) text += " and " + measured(rest, addition.unit);
  return text;
}

/// "NiSO₄·6H₂O, 99 %, technical; lot 24-0815, to 2027-06-30".
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

std::string hazards(const matter::StockChemical& stock) {
  std::string codes;
  for (const std::string& code : stock.hazard_statements) codes += (codes.empty() ? "" : ", ") + code;
  return codes;
}

}  // namespace

std::string measured(double amount, const std::string& unit) {
  constexpr int grams = 1000;
  if (amount < 1 && unit == "kg") return figure(grams * amount) + " g";
  if (amount < 1 && unit == "L") return figure(grams * amount) + " mL";
  return figure(amount) + " " + unit;
}

std::string plain(double value) { return fmt::format("{:g}", value); }

std::string money(double cost, const bath::Tank& tank) {
  return fixed(cost, 2) + (tank.currency.empty() ? "" : " " + tank.currency);
}

Section weighing(const AdditionSlip& slip, const dosing::Plan& plan) {
  Section section{"Weigh out", {}};
  for (const auto& addition : plan.additions) {
    const bath::ShelfItem* item = slip.tank.on_shelf(addition.chemical);
    Task task{measured(addition.amount, addition.unit) + " " + addition.name,
              "weighed _______ left _______",
              {},
              {}};
    if (item && item->stock.formula != "H2O") {
      task.lines.push_back(label_of(*item));
      std::string second = containers(*item, addition);
      if (const std::string codes = hazards(item->stock); !codes.empty())
        second += (second.empty() ? "" : "; ") + codes + ", see the SDS";
      if (!second.empty()) task.lines.push_back(second);
    }
    section.blocks.push_back(std::move(task));
  }
  section.blocks.push_back(Paragraph{"Cost " + money(plan.cost, slip.tank) + ". Salt brought in " +
                                     figure(plan.salt_load_mol) + " mol."});
  for (const std::string& apart : plan.keep_apart)
    section.blocks.push_back(Paragraph{"Keep apart: " + apart});
  return section;
}

}  // namespace bathwright::sheets::slip
