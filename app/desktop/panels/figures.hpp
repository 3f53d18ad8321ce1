// Tables and charts as text for a spreadsheet: one row a line, tabs between the cells.
#pragma once

#include "view.hpp"

namespace bathwright::desktop {

[[nodiscard]] std::string figures_of(const StateView& view);
[[nodiscard]] std::string figures_of(const AdditionsView& view);
[[nodiscard]] std::string figures_of(const ChemistryView& view);  ///< figures, free ions, solids
[[nodiscard]] std::string figures_of(const ForecastView& view);   ///< limits, and what it costs
[[nodiscard]] std::string figures_of(const TrendsView& view);     ///< the findings
[[nodiscard]] std::string figures_of(const LogView& view);
[[nodiscard]] std::string figures_of(const charts::Chart& chart);  ///< one row a point
[[nodiscard]] std::string figures_of(const std::vector<charts::Chart>& charts);

/// The value of a line at x, between its points; NaN outside.
[[nodiscard]] double value_at(const charts::Series& line, double x);
[[nodiscard]] std::string short_figure(double value);

}  // namespace bathwright::desktop
