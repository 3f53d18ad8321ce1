// Which chemical goes in before which, and why it stands there.
#pragma once

#include <bathwright/bath/chemistry.hpp>
#include <bathwright/bath/interlock.hpp>

namespace bathwright::dosing {

/// What a chemical is there for, in the order in which they go in where a bath type says nothing.
enum class Role : std::uint8_t {
  water,       ///< the fill
  alkali,      ///< that keeps an alkaline bath alkaline
  acid,        ///< that is the strength of an acid bath
  strength,    ///< chromic acid: the sulfate is worked out at its new strength
  complexant,  ///< cyanide, pyrophosphate, EDTA, amine, citrate
  buffer,      ///< boric acid, acetate
  metal,
  salt,
  reducer,
  pH_trim,
  brightener  ///< and other organics nobody titrates
};
[[nodiscard]] Role role_of(const bath::BathType& type, double pH, const matter::StockChemical& stock);

/// A chemical's place in a plan for a tank.
struct Place {
  double key = 0;  ///< smaller goes in earlier; equal: `role` decides
  Role role = Role::salt;
  std::string why;  ///< "before the metal, which it must hold in solution"
};

/// The bath type's order where it has one, else the place of its role among those it orders. Water goes
/// first, but after the caustic of an alkaline bath whose metal it would throw out (zincate, stannate).
[[nodiscard]] Place place_of(const bath::BathType& type, const bath::Held& held, double pH,
                             const matter::StockChemical& stock);

[[nodiscard]] bool goes_before(const Place& a, const Place& b);

}  // namespace bathwright::dosing
