#include <bathwright/shopfiles/tank_file.hpp>
#include <cmath>

#include "promises.hpp"

using namespace bathwright;

fuzz::BrokenPromise fuzz::tank_file(std::string_view input) {
  static const matter::StockCatalogue catalogue = matter::StockCatalogue::built_in();
  const auto tank = shopfiles::read_tank_text("file.toml", input, catalogue);
  if (!tank) return in_words(tank.problems(), "file.toml", input);
  if (!(tank->working_volume.v > 0) || !std::isfinite(tank->working_volume.v)) return "a tank without volume";
  if (!(tank->freeboard.v >= 0)) return "negative freeboard";
  if (tank->aims.empty()) return "a tank with nothing to hold";
  for (const bath::Aim& aim : tank->aims) {
    if (!(aim.low <= aim.aim && aim.aim <= aim.high && aim.low < aim.high && std::isfinite(aim.high)))
      return "a window that is not one: " + aim.quantity;
  }
  for (const bath::ShelfItem& item : tank->shelf) {
    if (!(item.price >= 0) || !std::isfinite(item.price)) return "a price that is not one: " + item.stock.id;
    if (!(item.stock.assay > 0 && item.stock.assay <= 1)) return "an assay that is not one: " + item.stock.id;
  }
  return {};
}
