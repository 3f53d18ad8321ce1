// One plan of one kind: amounts that suit a wish, made weighable, put in order and followed to their end.
// Read next: settle.hpp for the search, plan.cpp for which kinds are offered. A further kind is a further
// Wish.
#pragma once

#include <bathwright/dosing/plan.hpp>

#include "goals.hpp"

namespace bathwright::dosing {

/// A shelf chemical that may go into this bath.
struct Supply {
  const bath::ShelfItem* item;
  bath::Brings brings;  ///< per kg
  double price_per_kg;
  double salt_mol_per_kg;    ///< ions it brings
  bool base = false;         ///< a trim of the pH that brings no OH^-: ammonia
  bool only_source = false;  ///< of something the tank aims at
  bool by_the_bag = false;   ///< a solid of which a whole package moves no level by more than its window

  // The only source of something aimed at, lactic acid say, is no trim of the pH.
  [[nodiscard]] bool is_acid() const { return !only_source && brings.component_mol[0] > 0; }
  [[nodiscard]] bool is_alkali() const { return !only_source && (brings.component_mol[0] < 0 || base); }
  [[nodiscard]] bool trims() const { return is_acid() || is_alkali(); }
  [[nodiscard]] bool is_water() const { return item->stock.formula == "H2O"; }
};

/// What all kinds of plan for one tank start from.
struct Situation {
  const bath::Tank& tank;
  const bath::Chemistry& chemistry;
  const bath::TankState& now;
  const Request& request;
  bath::TankView now_view;
  std::vector<Supply> supplies;
  std::vector<SolidLimit> solids = {};
  double target_L = 0;                        ///< where the tank is to stand
  std::set<std::string> without_source = {};  ///< aims at what nothing on the shelf brings
  std::map<std::string, double> dead_band =
      {};  ///< by aim that is left alone: how far off it may stay, g/L or pH
};

/// What one kind of plan asks for.
struct Wish {
  std::string kind;
  std::vector<bath::Aim> aims;  ///< what to go for: the tank's own, or varied
  enum class Least : std::uint8_t { cost, salt } least = Least::cost;
  bool may_decant = false;
  bool bring_down = false;      ///< what is strong inside its window too
  bool whole_packages = false;  ///< of solids, where one fits the window; liquids come from the drum
};

/// The amounts that suit a wish best.
struct Amounts {
  std::vector<double> kg;  ///< per supply
  double decant_L = 0;
  double penalty = 0;  ///< what missed aims and limits count, goals.hpp; volume and prices apart
  double missing = 0;  ///< the part of it that is not merely standing above an aim, inside the window
  std::vector<std::string> saturated;  ///< solids that may go no farther: "H3BO3 dissolved at 18.0 degC"
  std::vector<double> rest_kg;         ///< per supply: what would go in beside if there were room
  double lacks_room_L = 0;             ///< that would have to evaporate first for all that should go in
  std::vector<std::string> conflicts;  ///< why windows cannot be met
};

/// Fails only where the tank as it is cannot be solved. Never an acid and an alkali together: cheap as the
/// pair may be, they only make salt and heat of each other.
Result<Amounts> amounts_of_kind(const Situation& situation, const Wish& wish);

/// The plan with these amounts: ordered, portioned, every step checked.
Result<Plan> plan_with(const Situation& situation, const Wish& wish, const Amounts& amounts);

/// Both.
Result<Plan> plan_of_kind(const Situation& situation, const Wish& wish);

}  // namespace bathwright::dosing
