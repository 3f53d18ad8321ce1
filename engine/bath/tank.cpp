#include <algorithm>
#include <bathwright/bath/tank.hpp>

namespace bathwright::bath {

double ShelfItem::price_per_kg() const { return priced_per == Per::litre ? price / stock.kg_per_L : price; }

bool ShelfItem::expired_on(std::string_view day) const {
  return !day.empty() && !expires.empty() && day.substr(0, expires.size()) > expires;
}

const Aim* Tank::aim(std::string_view quantity) const {
  const auto found =
      std::find_if(aims.begin(), aims.end(), [&](const Aim& a) { return a.quantity == quantity; });
  return found == aims.end() ? nullptr : &*found;
}

const ShelfItem* Tank::on_shelf(std::string_view stock_id) const {
  const auto found =
      std::find_if(shelf.begin(), shelf.end(), [&](const ShelfItem& s) { return s.stock.id == stock_id; });
  if (found != shelf.end()) return &*found;
  const auto other = std::find_if(shelf.begin(), shelf.end(), [&](const ShelfItem& s) {
    return std::find(s.stock.aliases.begin(), s.stock.aliases.end(), stock_id) != s.stock.aliases.end();
  });
  return other == shelf.end() ? nullptr : &*other;
}

}  // namespace bathwright::bath
