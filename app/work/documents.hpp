// Documents for machines and for the log: their head, their text, and the parts that several share.
#pragma once

#include <bathwright/analysis/analysis.hpp>
#include <bathwright/bath/chemistry.hpp>
#include <bathwright/sheets/standing.hpp>
#include <nlohmann/json.hpp>
#include <optional>

namespace bathwright::work {

using Json = nlohmann::ordered_json;

/// The head of every document: program, version, warnings.
[[nodiscard]] Json document(const std::vector<std::string>& warnings);

/// A document as text: on one line, or indented. No zero carries a sign, and what is no UTF-8 is replaced.
[[nodiscard]] std::string text_of(Json document, int indent = -1);

/// null where there is none.
[[nodiscard]] Json or_null(const std::optional<double>& value);

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

/// The density of the solution, kg/L, in such a document: the hydrometer's, else that of the levels; nothing
/// where it has neither.
[[nodiscard]] std::optional<double> density_in(const Json& analysis_document);

[[nodiscard]] bool all_in_window(const std::vector<sheets::Judged>& judged);

}  // namespace bathwright::work
