// Takes a formula as people write it apart into what totals are counted in: NiSO4.6H2O -> Ni^2+, SO4^2-, 6
// H2O; KH2PO4 -> K^+, PO4^3-, 2 H^+. Oxidation states follow from the atoms and the charge.
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/matter/formula.hpp>
#include <bathwright/speciation/equilibria.hpp>

namespace bathwright::speciation {

struct Parts {
  Composition basis;  ///< mol of each basis species per mol of formula; H^+ may be negative (alkali)
  double water = 0;   ///< mol of H2O per mol of formula; may be negative (anhydrides)
};

/// A formula is read by its atoms; a ligand that it names by its token stays whole. Fails when no set of up
/// to four basis species makes it up, naming the elements nobody knows.
Result<Parts> parts_of(const matter::Formula& formula, const Equilibria& equilibria);

/// The ions a salt, strong acid or strong base is counted as when "fully dissociated": NaH2PO4 -> Na^+,
/// H2PO4^-; H2SO4 -> 2 H^+, SO4^2-; NaOH -> Na^+, OH^-. Empty for anything that is itself a dissolved species
/// (H3BO3) or that has no such reading. Keys are species names.
[[nodiscard]] Composition nominal_ions(const matter::Formula& formula, const Equilibria& equilibria);

}  // namespace bathwright::speciation
