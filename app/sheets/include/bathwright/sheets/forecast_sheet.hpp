// The forecast of a tank on paper: what builds up, when it bites, how much must be bled.
#pragma once

#include <bathwright/forecast/forecast.hpp>
#include <bathwright/sheets/page.hpp>
#include <bathwright/sheets/shown_units.hpp>

namespace bathwright::sheets {

/// "2026-04-18", the date of a day of a forecast, for documents and tables; "" where the policy has no date
/// to count from, or there is no day.
[[nodiscard]] std::string iso_date(const forecast::Policy& policy, const std::optional<double>& day);

/// What a limit needs to be held.
struct BleedToHold {
  std::string quantity;                  ///< id
  double g_per_L = 0;                    ///< its limit
  std::string limit;                     ///< "aluminium at 15.00 g/L"
  std::optional<double> litres_per_day;  ///< to bleed beyond the policy's own; nothing: `why_no_bleed`
  /// Times the policy's work that its own bleed can carry; nothing: any, or `why_no_load`.
  std::optional<double> load;
  std::string why_no_bleed, why_no_load;
};

/// A policy beside others.
struct PolicySummary {
  std::string file;
  int horizon_days = 0;
  forecast::Summary summary;
};

struct ForecastPage {
  const bath::Tank& tank;
  const forecast::Forecast& forecast;
  const forecast::Run& run;                ///< the policy as it stands
  const forecast::Bands* bands = nullptr;  ///< nullptr: no samples were asked for
  std::vector<forecast::LimitMet> limits;  ///< of the bands, or of the run
  std::optional<std::vector<double>> steady_state;
  std::string why_unsettled;  ///< where there is none
  std::vector<BleedToHold> bleeds;
  std::string policy_file, state_from;
  std::vector<forecast::Sensitivity> sensitivity;
  std::vector<PolicySummary> policies;  ///< this one and those it is set against; empty: none
  Units units;
};

/// The solution on a day of the policy as it stands, which tells the bands of the samples, too; on its last
/// day where it ended before.
[[nodiscard]] Medium medium_on(const forecast::Run& run, double day);

/// "aluminium above 1.27 % w/w", "Na2CO3.10H2O at 59.0 degF". A limit is kept in g/L: where a unit needs the
/// density, it is told by that of the day it is met, else of the last day.
[[nodiscard]] std::string limit_words(const ForecastPage& page, const forecast::LimitMet& limit);

/// The cheapest of those that hold every limit; nullptr where none does.
[[nodiscard]] const PolicySummary* cheapest_that_holds(const std::vector<PolicySummary>& policies);

[[nodiscard]] Lines forecast_sheet(const ForecastPage& page);

/// The same to print, with its charts.
[[nodiscard]] Page forecast_page(const ForecastPage& page);

}  // namespace bathwright::sheets
