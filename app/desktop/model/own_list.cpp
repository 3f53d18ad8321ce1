#include "own_list.hpp"

namespace bathwright::desktop {

const matter::StockChemical* stock_of(const bath::Tank& tank, const std::string& id) {
  const bath::ShelfItem* item = tank.on_shelf(id);
  return item ? &item->stock : matter::StockCatalogue::built_in().find(id);
}

}  // namespace bathwright::desktop
