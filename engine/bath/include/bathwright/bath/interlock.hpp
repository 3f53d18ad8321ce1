// What must never go into a tank, whoever asks for it: told by what the tank holds, by its bath type and by
// what the chemical is. Not for: what would merely be unwise (cautions), and what an equilibrium tells
// (dosing/gases).
#pragma once

#include <bathwright/bath/chemistry.hpp>

namespace bathwright::bath {

/// What a tank holds that may react, by kind, with the component that tells it.
struct Held {
  struct Kind {
    std::string id;    ///< of matter::reactive_kinds(): "cyanide"
    std::string from;  ///< "CN^-", or "pH 3.2"
  };
  std::vector<Kind> kinds;
  double sulfuric_acid_fraction = 0;  ///< kg of H2SO4 in a kg of the solution, at most

  [[nodiscard]] const Kind* find(std::string_view id) const;  ///< nullptr where it does not hold it
};

/// What a state holds: a component counts from 1e-4 mol in a kg of water on (2.6 mg/L of cyanide), what only
/// acid makes dangerous from the pH of its kind down.
[[nodiscard]] Held held_by(const Chemistry& chemistry, const TankState& state, double pH);

/// Why a chemical must not go in, or what to know of it.
struct Interlock {
  std::string rule;  ///< id of a matter::Incompatibility or stock chemical, or the name of a rule of its own
  std::string why;   ///< one or more sentences
  Level level = Level::stop;
};

/// The gravest rule against a chemical in this tank; nothing where there is none. In this order:
///   - the bath type's own list: a chemical, or a kind of pair that the chemical is of;
///   - cyanide into a bath type without, and acid into one with it;
///   - the pairs of matter/incompatibility.csv: what the chemical is against what the tank holds;
///   - hydrofluoric acid that neither the bath type nor the catalogue has a caution for;
///   - water into sulfuric acid of more than half its mass.
/// A chemical that the bath type has a rule of addition for stands on the bath's side of a pair and is free
/// of it; not of pairs that make a poisonous gas at once (Incompatibility::always), where no bath type's word
/// counts.
[[nodiscard]] std::optional<Interlock> interlock(const BathType& type, const Held& held,
                                                 const matter::StockChemical& stock);

/// What two chemicals of one plan do where they meet in a can, a side tank or on a trolley; nothing where no
/// pair of severity "stop" is known. The level is a stop unless both are the bath type's own: those are then
/// to be kept apart.
[[nodiscard]] std::optional<Interlock> interlock_between(const BathType& type,
                                                         const matter::StockChemical& one,
                                                         const matter::StockChemical& other);

}  // namespace bathwright::bath
