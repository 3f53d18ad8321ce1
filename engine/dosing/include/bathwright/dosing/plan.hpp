// From a tank's state to an addition sheet: how much of what, in which order and portions, and what each step
// does. Read next: bath/chemistry.hpp, which computes every prediction here.
#pragma once

#include <bathwright/dosing/chance.hpp>

namespace bathwright::dosing {

/// One question asked of a step, with its answer in words.
struct Check {
  std::string name;  ///< "boric acid at 18 degC"
  bool ok = true;
  bool stops = true;   ///< failing it makes the plan infeasible; else it is something to know (the idle tank)
  std::string detail;  ///< "12 kg more would dissolve"
  bool interlock = false;  ///< about a gas that kills: nobody may let it pass
};

/// The whole amount of one chemical.
struct Addition {
  std::string chemical;  ///< stock id
  std::string name;      ///< "nickel sulfate hexahydrate"
  double kg = 0;
  double amount = 0;  ///< in `unit`
  std::string unit;   ///< "kg", or "L" for a liquid
  double cost = 0;    ///< in the tank's currency
};

/// One portion carried to the tank, or bath taken out before the first.
struct Step {
  int number = 0;
  bool takes_out = false;  ///< `amount` L of bath to the waste treatment, no chemical
  int shift = 0;           ///< 1: the waits before it fill a shift, it is for the next; and so on
  std::string chemical, name, unit;
  double amount = 0, kg = 0;
  int portion = 1, portions = 1;        ///< "2 of 3"
  std::optional<double> dissolve_in_L;  ///< to thin or dissolve it in first
  std::string dissolve_in;              ///< "water" (taken from the fill) or "bath drawn off"
  double dissolve_at_C = 0;             ///< of that liquid
  std::string how;
  std::string
      why_here;        ///< why at this place in the order: "before the metal, which it must hold in solution"
  double warms_C = 0;  ///< the whole tank, by the heat of dilution; negative: cools
  double wait_h = 0;   ///< before the next step
  bool analyse_after = false;  ///< half of the need is in: analyse before the rest
  bath::TankView predicted;    ///< after this step (levels, pH, volume, headroom in log units)
  std::vector<Check> checks;
};

/// What takes a level that ends too high out of the tank as a solid, to be filtered off.
struct Removal {
  std::string quantity, label;  ///< "SO4^2-", "sulfate"
  std::string chemical, name;   ///< stock id, "barium carbonate"
  std::string solid;            ///< "BaSO4"
  double whole_kg = 0;          ///< for all that is above the aim, by the formula of the solid
  double first_kg = 0;          ///< to begin with; then the tank is analysed again
};

/// What no longer goes in because the tank is full.
struct Rest {
  Addition addition;
  double evaporate_L = 0;  ///< that must go first
};

/// A level off its aim that the work itself brings there.
struct Wait {
  std::string quantity, label;
  std::string use;    ///< "deposition"
  double units = 0;   ///< of the use until the level is at its aim
  std::string unit;   ///< "Ah", "m2", "g", "h"
  bool takes = true;  ///< the work takes it out; false: brings it
};

struct Plan {
  std::string kind;       ///< "least cost"
  std::string reason;     ///< what sets it apart from the others: "cheapest of those that reach every aim"
  bool feasible = false;  ///< every level ends inside its window, every check passed that stops a plan
  double cost = 0;
  double salt_load_mol = 0;               ///< ions brought in, mol: what makes the next bleed larger
  double decant_L = 0;                    ///< bath to take out before anything is added; it is waste
  std::optional<Chances> chances;         ///< of its end; where Request::spread is given
  std::optional<SecondLook> second_look;  ///< what would help most, of the best plan where it is no promise
  std::vector<Addition> additions;        ///< in order of addition; empty when nothing is needed
  std::vector<Step> steps;
  bath::TankView final_view;
  bath::TankState final_state;
  std::vector<std::string>
      unmet;  ///< aims that cannot be reached with this shelf, by how much, whether inside
  std::vector<std::string> left_alone;  ///< what lies inside the noise of its analysis and is not corrected
  std::vector<Rest> rest;               ///< for when there is room
  std::vector<Wait> waits;              ///< of what ends off its aim
  std::vector<Removal> removals;        ///< once the plan is carried out, mixed and analysed; no step of it
  std::vector<std::string> conflicts;   ///< why windows cannot be met: the limits in each other's way
  std::vector<std::string> keep_apart;  ///< its chemicals that must not meet outside the tank, and why
};

struct Refusal {
  std::string reason, rule;
};

struct AdditionSheet {
  bath::TankView now;
  std::vector<Plan> plans;  ///< best first
  std::vector<Refusal> refused;
  std::vector<std::string> cautions;
};

/// What plans are asked for, beside what the tank file says.
struct Request {
  /// One standard uncertainty of the present level, g/L by quantity id; may be empty.
  std::map<std::string, double> uncertainty = {};
  bool dead_band = true;    ///< false: to the aim, however near the tank is already
  bool bring_down = false;  ///< what is strong inside its window comes to its aim by taking bath out
  bool weighable = true;    ///< amounts as a shop's scales and jugs show them; false: unrounded
  int most_plans = 4;       ///< at least 1
  std::optional<Spread> spread = {};  ///< given: how sure each plan is to end inside every window
  Sampling sampling = {};             ///< of that
};

/// Plans the additions that bring the tank from `now` to its aims, filled to the mark: the best plan first,
/// then those that differ in kind.
/// Amounts are >= 0; hydrate water, the water of liquids and displacement are in the volume; pH by full
/// equilibrium. Each step is speciated at the working and the idle temperature. An aim that cannot be reached
/// is reported in `unmet` with the nearest plan, not as an error. Fails when the state itself cannot be
/// solved.
Result<AdditionSheet> plan_additions(const bath::Tank& tank, const bath::Chemistry& chemistry,
                                     const bath::TankState& now, const Request& request = {});

}  // namespace bathwright::dosing
