// The forecast of a tank on paper: what builds up, when it bites, how much must be bled.
#pragma once

#include <bathwright/forecast/forecast.hpp>
#include <bathwright/sheets/text.hpp>

namespace bathwright::sheets {

/// What a limit needs to be held: litres a day to bleed beyond the policy's own.
struct BleedToHold {
  std::string limit;
  double litres_per_day = 0;
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
};

[[nodiscard]] Lines forecast_sheet(const ForecastPage& page);

}  // namespace bathwright::sheets
