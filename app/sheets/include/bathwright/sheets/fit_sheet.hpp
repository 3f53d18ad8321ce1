// The result of fitting constants to measurements, for people.
#pragma once

#include <bathwright/regression/fit.hpp>
#include <bathwright/sheets/text.hpp>

namespace bathwright::sheets {

/// The row of engine/data/equilibria/solids.csv or species.csv that the fit proposes for a constant; empty
/// for one that was fitted to a tank or is a gas.
[[nodiscard]] std::string table_row(const regression::Task& task, const regression::Fit& fit,
                                    const std::string& constant);

[[nodiscard]] Lines fit_sheet(const regression::Task& task, const regression::Fit& fit,
                              std::string_view name);

}  // namespace bathwright::sheets
