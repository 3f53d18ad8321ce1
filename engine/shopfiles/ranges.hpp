// What can be true of any bath, whatever its chemistry: a value outside is a slip of the pen. Common
// practice. Private to shopfiles.
#pragma once

#include "schema.hpp"

namespace bathwright::shopfiles {

inline constexpr Range possible_pH{-2, 16};            // strong acid pickles to hot caustic
inline constexpr Range liquid_bath_C{-10, 110};        // salt-laden baths freeze below and boil above water
inline constexpr Range possible_factor{0.5, 2};        // actual over nominal strength of a titrant
inline constexpr Range possible_displacement{0, 0.5};  // anodes, coils and parts take 3 to 8 % (from memory)
inline constexpr Range possible_molality{0, 100};      // mol/kg; solid caustic soda in water is below 60
inline constexpr Range possible_warming{0.1, 40};      // degC, of a tank by one portion
inline constexpr Range possible_mixing{0.001, 1};      // share of the tank a portion meets first
inline constexpr Range possible_pressure_atm{0, 100};

}  // namespace bathwright::shopfiles
