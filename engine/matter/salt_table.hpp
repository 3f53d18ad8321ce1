// The salts whose density coefficients are known, found by what they are made of. Private to matter.
#pragma once

#include <bathwright/matter/density.hpp>
#include <bathwright/matter/formula.hpp>
#include <optional>

namespace bathwright::matter {

/// Null for a substance that is not in matter/laliberte_density.csv. The spelling does not matter: NH4Cl,
/// ClNH4.
const SaltCoefficients* find_salt(const Formula& substance);

/// Apparent molar volume, cm3/mol, from matter/apparent_volume.csv.
std::optional<double> apparent_volume_cm3_per_mol(const Formula& substance);

}  // namespace bathwright::matter
