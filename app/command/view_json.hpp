// Parts of documents that several verbs share.
#pragma once

#include <bathwright/analysis/analysis.hpp>
#include <bathwright/bath/chemistry.hpp>
#include <bathwright/sheets/standing.hpp>

#include "context.hpp"

namespace bathwright::command {

/// {quantity id: g/L}
[[nodiscard]] Json concentrations(const bath::BathType& type, const bath::TankView& view);
/// {solid: log10 of its distance from saturation at the working temperature, positive below; null where not
/// known}
[[nodiscard]] Json headroom_log10(const bath::TankView& view);
/// {species: value}
[[nodiscard]] Json log10_activities(const bath::TankView& view);
[[nodiscard]] Json free_molalities(const bath::TankView& view);
/// [{quantity, value, unit, low, aim, high, state}]
[[nodiscard]] Json level_list(const std::vector<sheets::Judged>& judged);

/// The document of `analyse`, which is also what the log keeps of an analysis. `tank_state` is what the book
/// starts from: amounts and their covariance, row after row, in the order of `components`.
[[nodiscard]] Json analysis_document(const bath::Tank& tank, const bath::Chemistry& chemistry,
                                     const analysis::Analysis& analysis);

[[nodiscard]] bool all_in_window(const std::vector<sheets::Judged>& judged);

}  // namespace bathwright::command
