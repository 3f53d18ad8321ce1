// A policy and the uses of its bath type in amounts. Whoever follows a tank's amounts goes by these figures:
// the forecast, and learning from a log. Not for running a forecast: forecast.hpp.
#pragma once

#include <bathwright/bath/chemistry.hpp>
#include <bathwright/forecast/policy.hpp>

namespace bathwright::forecast {

/// mol of each component and kg of water, of anything that goes in or out.
using Amounts = bath::Brings;

/// Adds `times` of `more`, of the same components.
void add(Amounts& to, const Amounts& more, double times);

/// One of the bath type's uses in amounts.
struct CompiledUse {
  const bath::Use* use = nullptr;
  Amounts effects;                    ///< per unit, charge made up in H^+; where the state does not matter
  std::vector<Amounts> effect_per_g;  ///< per effect, charge made up in H^+
  std::vector<double> g_per_unit;     ///< of each effect, where the state does not matter
  bool by_state = false;              ///< the bath type's `rate` gives the grams
  double effects_u_rel = 0;
  Amounts metal;             ///< per mol of metal that goes into solution, charge made up in H^+
  double deposit_water = 0;  ///< kg per mol deposited: oxygen of the metal's formula leaves as water
  double mol_per_unit = 0;   ///< of metal per unit at full efficiency
  double oxygen_water = 0;   ///< kg lost per unit where all of the anode's current makes oxygen
  Uncertain cathode, anode;  ///< efficiencies
  bool by_current = false;
};

/// What a unit of a use brings into solution: its effects, less the metal that it takes out (anodes that
/// dissolve give it back).
Amounts per_unit(const CompiledUse& use, double effects_factor, double efficiency_factor);

/// Metal that a use deposits, mol per unit, whatever the anodes give back.
double deposited_mol(const CompiledUse& use, double efficiency_factor);

/// Everything of a policy that does not change during a run, in amounts.
struct Compiled {
  std::vector<int> charge;  ///< per component
  std::vector<CompiledUse> uses;
  std::vector<std::size_t> work;    ///< per Policy::work: position in uses
  std::vector<std::size_t> always;  ///< uses counted by the hour or by surface and hour
  Amounts water, drag_in;           ///< per litre
  std::vector<Amounts> seasons;     ///< water per litre, per Policy::seasons
  Amounts carbon_dioxide;           ///< per gram
  double carbon_dioxide_g_per_h = 0;
  double water_price_per_L = 0;
  struct Feed {
    const Replenishment* rule = nullptr;
    Amounts per_kg;
    double kg_per_unit = 0, price_per_kg = 0;
    std::size_t use = 0;                       ///< of rules by use
    const bath::Quantity* quantity = nullptr;  ///< of rules by analysis; nullptr is the pH
    double aim = 0;                            ///< g/L, or pH
  };
  std::vector<Feed> feeds;
  struct Freeze {
    const FreezeOut* rule = nullptr;
    const bath::Quantity* quantity = nullptr;
    Amounts per_mol;  ///< of crystals
  };
  std::vector<Freeze> freezes;
  bool by_state = false;           ///< a use at work here asks for the state of the bath
  std::vector<std::string> notes;  ///< what is not counted that somebody might expect
  bool by_shift = false;           ///< that, or something is added by the shift
};

/// Fails, with every problem, on uses, quantities, chemicals and aims that the bath type or the tank does not
/// have. What is compiled points into all three: they must outlive it.
Result<Compiled> compile(const bath::Tank& tank, const bath::Chemistry& chemistry, const Policy& policy);

}  // namespace bathwright::forecast
