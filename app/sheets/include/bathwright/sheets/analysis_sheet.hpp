// An analysis on a page: what the readings say, and what does not fit.
#pragma once

#include <bathwright/analysis/analysis.hpp>
#include <bathwright/sheets/tank_parts.hpp>

namespace bathwright::sheets {

/// The density is the hydrometer's where it was read, by which % w/w is read as well; else that of the
/// levels.
///   water_kg_per_L  of liquid water, where it is known
[[nodiscard]] Medium medium_of(const analysis::Analysis& analysis,
                               std::optional<double> water_kg_per_L = std::nullopt);

[[nodiscard]] Lines analysis_sheet(const bath::Tank& tank, const bath::BathType& type,
                                   const analysis::Analysis& analysis, const Units& units = {},
                                   std::optional<double> water_kg_per_L = std::nullopt);

/// The levels of an analysis and pH against their windows, in the order of the tank's aims.
[[nodiscard]] std::vector<Judged> judge(const bath::Tank& tank, const bath::BathType& type,
                                        const analysis::Analysis& analysis);

}  // namespace bathwright::sheets
