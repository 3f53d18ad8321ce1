#include "tank_state.hpp"

#include <bathwright/shopfiles/readings_file.hpp>

namespace bathwright::command {
namespace {

/// The tank as an analysis of the log left it. Salt views repeat what the other levels say and are left out.
Result<bath::TankState> state_of(const LastAnalysis& last, const Shop& shop) {
  std::map<std::string, double> g_per_L;
  for (const auto& [id, level] : last.book.g_per_L) {
    const bath::Quantity* quantity = shop.type().quantity(id);
    if (quantity && !quantity->salt_view) g_per_L[id] = level;
  }
  return shop.chemistry.state_from(g_per_L, *last.book.pH, last.volume, shop.tank.temperature);
}

}  // namespace

Result<analysis::Analysis> analyse(const Context& context, const Shop& shop,
                                   const std::string& readings_path) {
  const auto readings = shopfiles::read_readings(readings_path);
  if (!readings) return readings.problems();
  const auto last = last_analysis(context, shop.tank.name);
  if (!last) return last.problems();
  std::optional<analysis::Book> book;
  if (*last) book = (*last)->book;
  return analysis::evaluate(*readings, shop.tank, shop.chemistry, book);
}

Result<StartingState> starting_state(const Context& context, const Shop& shop,
                                     const std::string& readings_path) {
  if (!readings_path.empty()) {
    auto analysis = analyse(context, shop, readings_path);
    if (!analysis) return analysis.problems();
    return StartingState{analysis->state, "readings of " + readings_path};
  }
  const auto last = last_analysis(context, shop.tank.name);
  if (!last) return last.problems();
  auto state = *last ? state_of(**last, shop) : state_at_aims(shop);
  if (!state) return state.problems();
  return StartingState{*std::move(state),
                       *last ? "analysis of " + (*last)->book.from
                             : "as at its aims and at the mark; no readings and no log were given"};
}

}  // namespace bathwright::command
