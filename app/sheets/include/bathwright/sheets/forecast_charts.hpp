// The forecast of a tank as a page of charts: what moves, where its limits lie, when they are met.
#pragma once

#include <bathwright/charts/page.hpp>
#include <bathwright/sheets/forecast_sheet.hpp>

namespace bathwright::sheets {

/// One chart for each level that moves or is near a limit, the soonest limit first; then for each watched
/// solid that comes near saturation, at work and at rest; the pH; cost and waste. At most twelve.
[[nodiscard]] charts::Page forecast_charts(const ForecastPage& page);

}  // namespace bathwright::sheets
