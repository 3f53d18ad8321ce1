#include "path.hpp"

#include <algorithm>
#include <bathwright/bath/taken_out.hpp>
#include <cmath>

namespace bathwright::desktop {

std::vector<Move> moves_of(const dosing::Plan& plan) {
  std::vector<Move> moves;
  if (plan.decant_L > 0) moves.push_back({plan.decant_L, {}, 0});
  for (const dosing::Addition& addition : plan.additions)
    moves.push_back({0, addition.chemical, addition.kg});
  return moves;
}

std::vector<Move> moves_of(const OwnList& list) {
  std::vector<Move> moves;
  if (list.take_out_L) moves.push_back({*list.take_out_L, {}, 0});
  for (const auto& [id, kg] : list.kg) moves.push_back({0, id, kg});
  return moves;
}

Path path_of(const work::Shop& shop, const bath::TankState& from, const std::vector<Move>& moves,
             const std::function<bool()>& enough) {
  constexpr double points = 20;
  double all_kg = 0, kg = 0;
  for (const Move& move : moves) all_kg += move.kg;
  Path path;
  bath::TankState state = from;
  const auto add = [&] {
    if (enough()) return false;
    auto view = shop.chemistry.quick_view(state);
    if (view) path.points.push_back({kg, *std::move(view)});
    return static_cast<bool>(view);
  };
  if (!add()) return path;
  for (const Move& move : moves) {
    if (move.take_out_L > 0) {
      const double share = std::min(1.0, move.take_out_L / shop.chemistry.volume_L(state));
      state = bath::without(std::move(state), share);
      if (!add()) return path;
    }
    const matter::StockChemical* stock = move.kg > 0 ? stock_of(shop.tank, move.chemical) : nullptr;
    const auto brings = stock ? shop.chemistry.brings(*stock) : Result<bath::Brings>(Problems{});
    if (!brings) continue;
    const int steps = std::max(1, static_cast<int>(std::lround(points * move.kg / all_kg)));
    for (int i = 0; i < steps; ++i) {
      state = bath::Chemistry::after(std::move(state), *brings, move.kg / steps);
      kg += move.kg / steps;
      if (!add()) return path;
    }
  }
  path.whole = true;
  return path;
}

}  // namespace bathwright::desktop
