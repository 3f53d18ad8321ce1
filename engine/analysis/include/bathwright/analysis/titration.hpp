// One titration worked out: pure arithmetic, no bath type and no chemistry. Read next: analysis.hpp.
#pragma once

#include <bathwright/analysis/method.hpp>
#include <bathwright/analysis/readings.hpp>
#include <bathwright/base/result.hpp>

namespace bathwright::analysis {

/// Where the uncertainty of a titration comes from: standard uncertainties, one sigma.
struct UncertaintyBudget {
  double reading_mL = 0;   ///< burettes, end points, blank and reagent added, in mL of net titrant
  double reading_rel = 0;  ///< the same over the net volume; of what is weighed, the balance
  double sample_rel = 0;   ///< pipettes and flask
  double titrant_rel = 0;
  double sampling_rel = 0;  ///< how well the flask stands for the tank
  double method_rel = 0;    ///< repeatability, where the terms above are not its causes: what is weighed

  [[nodiscard]] double relative() const;  ///< root of the sum of squares
};

struct Titrated {
  units::GramsPerLitre value, standard_uncertainty;
  UncertaintyBudget budget;  ///< to first order
  std::string how;           ///< "23.80 mL of 0.1012 mol/L EDTA on 2.000 mL"
};

///   c = n * mol_per_mol * M / v                             g/L
///   v = sample, or sample * aliquot / flask                 bath in the titrated flask
///   n = (V - blank) * c_t                                   direct; c_t = titrant * factor
///   n = p (V - blank) * c_t + q (W - blank) * c_t           difference: V burette, W second_burette
///   n = excess * c_e - reagent_per_back * (V - blank) * c_t back: c_e excess_strength
///   n = mass / M_weighed                                    weighed
/// Each reading has u_V^2 = (tolerance/sqrt 6)^2 + u_end_point^2, a blank and a second reading their own;
/// pipettes, flask and reagent tolerance/sqrt 6; strengths and sampling are relative. Readings with two
/// flasks have a pipetting error each, with one flask they share it. tolerance: class A, triangular; of the
/// smallest burette, pipette or flask that holds the volume (data/analysis/glassware.csv).
///   molar_mass  g of the quantity wanted per mol of the method's analyte
/// The uncertainty is propagated to first order; where the sample is uncertain by more than 1 %, so that the
/// quotient is no longer straight, it is the standard deviation of a Monte Carlo propagation.
/// Fails, naming the key at fault, on figures the method needs and has not, or has and does not use; on
/// figures that are not positive, a blank not below the reading, a result that is not positive, and a volume
/// no class A glass of the table holds. Source: first-order propagation, JCGM 100:2008 (GUM) 5.1.2;
/// triangular 4.3.9.
Result<Titrated> work_out(const Titration& titration, const Method& method, units::GramsPerMole molar_mass);

/// Standard deviation of the concentration of `work_out` over `draws` of all its inputs, g/L; the same seed
/// gives the same. The titration must be one that work_out accepts. Source: JCGM 101:2008, propagation of
/// distributions.
[[nodiscard]] double monte_carlo_uncertainty(const Titration& titration, const Method& method,
                                             units::GramsPerMole molar_mass, int draws = 20000,
                                             std::uint32_t seed = 1);

}  // namespace bathwright::analysis
