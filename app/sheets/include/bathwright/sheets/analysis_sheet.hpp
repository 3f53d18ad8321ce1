// An analysis on a page: what the readings say, and what does not fit.
#pragma once

#include <bathwright/analysis/analysis.hpp>
#include <bathwright/sheets/tank_parts.hpp>

namespace bathwright::sheets {

[[nodiscard]] Lines analysis_sheet(const bath::Tank& tank, const bath::BathType& type,
                                   const analysis::Analysis& analysis);

/// The levels of an analysis and pH against their windows, in the order of the tank's aims.
[[nodiscard]] std::vector<Judged> judge(const bath::Tank& tank, const bath::BathType& type,
                                        const analysis::Analysis& analysis);

}  // namespace bathwright::sheets
