// The result of fitting constants to measurements, for people.
#pragma once

#include <bathwright/regression/fit.hpp>
#include <bathwright/sheets/text.hpp>

namespace bathwright::sheets {

/// The row of a table of engine/data/equilibria or engine/data/activity that the fit proposes, "table: row",
/// with all that was found for the same constant or the same solutes; empty for what was fitted to a tank or
/// belongs to a gas.
[[nodiscard]] std::string table_row(const regression::Task& task, const regression::Fit& fit,
                                    const regression::Unknown& unknown);

[[nodiscard]] Lines fit_sheet(const regression::Task& task, const regression::Fit& fit,
                              std::string_view name);

}  // namespace bathwright::sheets
