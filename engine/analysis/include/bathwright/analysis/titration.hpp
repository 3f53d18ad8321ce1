// One titration worked out: pure arithmetic, no bath type and no chemistry. Read next: analysis.hpp.
#pragma once

#include <bathwright/analysis/method.hpp>
#include <bathwright/analysis/readings.hpp>
#include <bathwright/base/result.hpp>

namespace bathwright::analysis {

/// Where the uncertainty of a titration comes from: standard uncertainties, one sigma.
struct UncertaintyBudget {
  double reading_mL = 0;   ///< burette and end point, of the blank too where there is one
  double reading_rel = 0;  ///< the same over the volume used
  double sample_rel = 0;   ///< pipette
  double titrant_rel = 0;
  double sampling_rel = 0;  ///< how well the flask stands for the tank

  [[nodiscard]] double relative() const;  ///< root of the sum of squares
};

struct Titrated {
  units::GramsPerLitre value, standard_uncertainty;
  UncertaintyBudget budget;
  std::string how;  ///< "23.80 mL of 0.1012 mol/L EDTA on 2.000 mL"
};

///   c = (V - blank) * titrant * factor * mol_per_mol * M / sample
///   (u_c/c)^2 = (u_V/(V - blank))^2 + (u_s/sample)^2 + u_titrant^2 + u_sampling^2
///   u_V^2 = (tolerance/sqrt 6)^2 + u_end_point^2, once for the reading and once for a blank;
///   u_s = tolerance/sqrt 6
/// tolerance: class A, triangular; of the smallest burette that holds the reading and the smallest pipette
/// that holds the sample (data/analysis/glassware.csv).
///   molar_mass  of the method's analyte
/// Fails, naming the key at fault, on readings that are not positive, a blank not below the reading, and a
/// reading or sample no class A glass of the table holds.
/// Source: first-order propagation, JCGM 100:2008 (GUM) 5.1.2; triangular 4.3.9.
Result<Titrated> work_out(const Titration& titration, const Method& method, units::GramsPerMole molar_mass);

}  // namespace bathwright::analysis
