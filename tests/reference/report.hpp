// Compares what the engine computes with the published figures of the tables beside this file.
#pragma once

#include <bathwright/activity/model.hpp>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace bathwright::reference {

/// One published figure: a row of mean_activity.csv, osmotic.csv, ph.csv, solubility.csv ...
struct Figure {
  std::string table, id, system, conditions, quantity, unit;
  double t_C = 0, published = 0, tolerance = 0;
  bool from_memory = false;
  bool doubtful = false;  ///< in doubtful.csv

  /// A miss is then a reason to look the figure up, not yet a fault of the program (README.md).
  [[nodiscard]] bool advisory() const { return from_memory || doubtful; }
};

std::vector<Figure> read_figures(std::string_view table);

/// What the engine makes of it, or why it cannot.
struct Computed {
  std::optional<double> value;
  std::string not_covered;    ///< the reason, where there is no value to be judged
  std::string note;           ///< what else is to be known of the value
  std::optional<double> u{};  ///< standard uncertainty the engine states of the value, in its unit
};

struct Line {
  Figure figure;
  activity::ModelKind model;
  Computed computed;

  [[nodiscard]] bool covered() const { return computed.value && computed.not_covered.empty(); }
  [[nodiscard]] bool inside() const;
  [[nodiscard]] double error_in_tolerances() const;
  /// Called valid and wrong: outside by more than silent_from tolerances and as many stated uncertainties.
  [[nodiscard]] bool silent() const;
};

Computed compute_activity(const Figure& figure,
                          activity::ModelKind model);  ///< mean_activity, osmotic, mixed
Computed compute_isopiestic(const Figure& figure, activity::ModelKind model);  ///< isopiestic
Computed compute_vapour(const Figure& figure, activity::ModelKind model);      ///< vapour
/// ph, supplement_ph: on the conventional scale up to dilute_molal, else unscaled.
Computed compute_pH(const Figure& figure, activity::ModelKind model);
Computed compute_solubility(const Figure& figure,
                            activity::ModelKind model);  ///< solubility and its supplement

/// Ionic strength up to which Davies is judged and the conventional pH is defined: 0.1 mol/kg to the digits
/// given.
inline constexpr double dilute_molal = 0.1005;

/// From here on, in tolerances and in standard uncertainties the engine states, a value that is outside and
/// called valid is a silent wrong answer.
inline constexpr double silent_from = 3;

/// Every row of every table with Pitzer; single solutions also with Davies up to dilute_molal.
std::vector<Line> compare_all();

/// The report as Markdown: counts, the worst rows, every row.
std::string markdown(const std::vector<Line>& lines);

}  // namespace bathwright::reference
