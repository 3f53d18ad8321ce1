#include "wanted.hpp"

#include <bathwright/base/nearest.hpp>
#include <bathwright/units/read.hpp>

namespace bathwright::work {

Result<WantedAmount> read_wanted(const Shop& shop, const std::string& amount, const std::string& id,
                                 const std::string& where) {
  const auto& catalogue = matter::StockCatalogue::built_in();
  const bath::ShelfItem* item = shop.tank.on_shelf(id);
  const matter::StockChemical* stock = item ? &item->stock : catalogue.find(id);
  if (!stock) {
    const auto close = nearest(id, catalogue.ids());
    return Problem{Fault::bad_input, where, id + " is not on the shelf or in the catalogue",
                   "the id of a chemical", close ? "Did you mean " + *close + "?" : ""};
  }
  const auto volume = units::read_volume(amount, where);
  if (volume && !stock->liquid)
    return Problem{Fault::bad_input, where, id + " is a solid, and is not measured in litres",
                   "a mass, as \"4 kg " + id + "\"", ""};
  if (volume) return WantedAmount{{*stock, volume->v * stock->kg_per_L}, volume->v, "L"};
  const auto mass = units::read_mass(amount, where);
  if (!mass) return mass.problems();
  return WantedAmount{{*stock, mass->v}, mass->v, "kg"};
}

Problems problems_of(const std::vector<dosing::Refusal>& refused, const std::string& where) {
  Problems problems;
  for (const dosing::Refusal& one : refused)
    problems.push_back(
        {Fault::refused, where, one.reason + " (" + one.rule + ")", "", "There is no way round this."});
  return problems;
}

}  // namespace bathwright::work
