// What a tank's log tells of its drag-out, efficiencies, evaporation, side reactions and water, with what the
// policy and the bath type say as the prior; and what of the log does not fit. Read next: history.hpp.
#pragma once

#include <bathwright/bath/chemistry.hpp>
#include <bathwright/forecast/policy.hpp>
#include <bathwright/learning/history.hpp>

namespace bathwright::learning {

/// How well what is logged is known, one standard uncertainty as a share. Common practice where nothing else
/// is said; what varies from shift to shift is independent in each.
struct Assumed {
  double addition = 0.01;           ///< weighing and assay, per addition
  double volume = 0.005;            ///< reading the level, shared by all levels of an analysis
  double level = 0.02;              ///< of a level whose uncertainty is not stated
  double titrant = 0.003;           ///< error a method keeps for a while, until its titrant is made anew
  double titrant_days = 21;         ///< for how long
  double film_by_shift = 0.25;      ///< drag-out from shift to shift, where area is logged
  double work_by_shift = 0.02;      ///< logged work from entry to entry
  double unlogged_by_shift = 0.35;  ///< of the load itself, where work or area is not logged
  double other_by_day = 0.0005;     ///< of each amount: what nobody thought of
  double drag_out = 0.5, evaporation = 0.5, water = 0.5,
         effects = 0.3;       ///< where policy and type say nothing
  double efficiency = 0.02;   ///< absolute, likewise
  double meter_Ah = 0.02;     ///< of an ampere-hour meter, over all
  double meter_other = 0.05;  ///< of any other count of work, over all
  double load = 0.1;          ///< of the policy's work and area, where they are not logged
};

enum class What : std::uint8_t {
  drag_out,
  drag_in,
  evaporation,
  idle_evaporation,
  water,
  work,
  efficiency,
  effects
};
[[nodiscard]] std::string_view name(What what);

/// One figure that was learned: a factor on the policy's or the bath type's.
struct Parameter {
  What what = What::drag_out;
  std::string use;                                 ///< id; of work, efficiency and effects
  std::string label;                               ///< "drag-out", "efficiency of deposition"
  std::string unit;                                ///< of the figure: "mL/dm2", "%"
  double prior = 0, prior_p05 = 0, prior_p95 = 0;  ///< as stated, and its 90 % interval
  double value = 0, p05 = 0, p95 = 0;              ///< learned: median and 90 % interval
  /// Share of the prior's variance that the log took away: 0 it says nothing, 1 it says all.
  double told = 0;
  double ln_factor = 0, u_ln = 0;  ///< of value over prior
};

/// A level as it was predicted from the analyses before, and as it was found. g/L.
struct Compared {
  Moment when;
  std::string quantity;
  double predicted = 0, u_predicted = 0;  ///< with what was learned
  double found = 0, u_found = 0;
  double misfit = 0;  ///< found less predicted, in standard uncertainties of their difference
  /// From the first analysis on without looking at any other: with what was learned, and as the policy says.
  double ahead = 0, ahead_by_policy = 0;
  bool set_aside = false;  ///< suspect: not learned from
};

enum class SuspectKind : std::uint8_t {
  analysis,          ///< one level of one analysis
  addition_missing,  ///< logged, not seen in the bath
  addition_extra,    ///< seen, not logged
  loss,              ///< of all components alike, not logged
  drift,             ///< of one component all the time, beyond what anything explains
  change,            ///< one figure is another from a day on
  figure             ///< a figure learned far outside of what was stated
};
[[nodiscard]] std::string_view name(SuspectKind kind);

struct Suspect {
  SuspectKind kind = SuspectKind::analysis;
  Moment when;                  ///< of the entry, or of the analysis that shows it
  double from_h = 0;            ///< of something that happened between two analyses: the first of them
  std::string subject;          ///< quantity, stock or parameter label
  double amount = 0;            ///< kg, L, g/L, g a day, or a factor, as the kind says
  double u_amount = 0;          ///< one standard uncertainty
  double misfit = 0;            ///< in standard uncertainties
  std::string words, try_this;  ///< sentences for people; days are said by whoever knows the calendar
};

struct Learned {
  std::vector<Parameter> parameters;
  std::vector<double> covariance;  ///< (n, n), row by row, of the ln factors
  std::vector<Compared>
      compared;  ///< in the order of time; the first level of each quantity has no prediction
  std::vector<Suspect> suspects;   ///< the strongest first
  std::vector<std::string> notes;  ///< what was assumed, and what this log cannot tell apart
  std::size_t analyses = 0, levels = 0;
  double days = 0;
  double reduced_chi2 = 0;  ///< of the misfits; above 1 the uncertainties were widened by it
  double rms_by_policy = 0, rms_learned = 0;  ///< relative, of `ahead`
};

/// Learns from a history.
///   The grams g of each analysed quantity follow, between two entries,
///     dg/dt = p - (D A + B)/V g,
///   p what uses, feeds, water and drag-in bring, D the film, A the area, B the bleed, V the volume; solved
///   exactly. Uses, feeds and water are those of forecast::compile. Where water is logged, V is followed too:
///   dV/dt = -E - D A - B + water + additions. Load, film and additions carry noise of their own between the
///   analyses (Assumed), and a Kalman filter weighs it against that of the analyses. The parameters, in
///   logarithms (efficiencies as logits), are where
///     sum of squares of the whitened innovations + sum ((theta_j - 0)/u_j)^2
///   is least: Gauss-Newton with halved steps. Covariance: (J'J + diag(1/u^2))^-1. Where the reduced
///   chi-square is above 1 all noise is widened by it. Suspects (beyond `suspect_at` standard uncertainties)
///   are set aside, the strongest first, and all is learned again.
///   Sources: Harvey, Forecasting, Structural Time Series Models and the Kalman Filter, 1989, chapter 3
///   (filter); de Jong and Penzer, J. Am. Stat. Assoc. 93 (1998) 796 (shocks); both from memory.
/// Fails on fewer than three analyses, chemicals that are not on the shelf, uses nobody knows, and a history
/// out of order.
Result<Learned> learn(const bath::Tank& tank, const bath::Chemistry& chemistry,
                      const forecast::Policy& policy, const History& history, const Assumed& assumed = {},
                      double suspect_at = 4);

}  // namespace bathwright::learning
