// The strength of a titrant from what it was standardised against: pure arithmetic, as titration.hpp.
#pragma once

#include <bathwright/analysis/readings.hpp>
#include <bathwright/base/result.hpp>
#include <bathwright/matter/formula.hpp>
#include <optional>
#include <string>
#include <vector>

namespace bathwright::analysis {

/// A row of data/analysis/standardisations.csv.
struct Standard {
  std::string titrant;                     ///< as methods name it: "EDTA"
  std::string standard;                    ///< "zinc"
  std::optional<matter::Formula> weighed;  ///< nothing: a volume of a known solution is taken
  double mol_per_mol = 1;                  ///< mol of titrant per mol of the standard
  double u_standard_rel = 0;               ///< of the standard's content
  std::string indicator, reaction, note, source;
};
[[nodiscard]] const std::vector<Standard>& standards();

struct Strength {
  units::MolesPerLitre value;
  double u_rel = 0;  ///< one standard uncertainty over the value
  std::string how;   ///< "mean of 3 against zinc, scatter 0.12 %"
};

/// Each run gives c = n * mol_per_mol / (V - blank), with n = mass * assay / M, or taken * strength of the
/// known solution; of an aliquot its share. The answer is their mean.
///   u^2 = glass^2 + standard^2 + max(r, s)^2 / n
///   glass     of the burette, and of flask and pipette where there is an aliquot: shared by all runs
///   r, s      end point (ordinary) and balance, of one run; scatter of the n runs, where there are two or
///             more
/// Fails, naming the key at fault, on a standard the table does not have for this titrant, figures missing,
/// not positive or not as many masses as readings, and a volume no class A glass of the table holds. Source:
/// first-order propagation, JCGM 100:2008 (GUM) 5.1.2; mean and scatter 4.2.
Result<Strength> strength_of(const Standardised& titrant);

/// Equivalents per mole that a normality of this titrant means; nothing where both 1 and 2 are in use
/// (data/analysis/titrants.csv) or nobody knows the titrant.
[[nodiscard]] std::optional<double> equivalents_of(std::string_view titrant);

}  // namespace bathwright::analysis
