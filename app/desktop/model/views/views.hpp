// From what was worked out to what the panels show, in words.
#pragma once

#include <bathwright/sheets/shown_units.hpp>

#include "../../panels/view.hpp"
#include "../forecast_work.hpp"
#include "../log_work.hpp"
#include "../reading_draft.hpp"
#include "../shop_folder.hpp"
#include "../tank_work.hpp"
#include "../trends_work.hpp"

namespace bathwright::desktop {

using sheets::AmountUnit;
using sheets::LevelUnit;
using sheets::Units;

[[nodiscard]] LineView line_view(const ShopFolder& shop, const LogNow& log, int selected);
[[nodiscard]] ReadingsView readings_view(const Draft& draft, const std::vector<int>& line_of_row,
                                         const Worked* worked, const Units& units);
[[nodiscard]] StateView state_view(const Worked& worked, const Units& units);
[[nodiscard]] AdditionsView additions_view(const Worked& worked, const std::string& kind,
                                           const std::optional<OwnList>& own, const Units& units);
[[nodiscard]] SlipView slip_view(const std::optional<work::OpenSlip>& slip,
                                 const std::optional<shifts::Calendar>& calendar, const Units& units);
[[nodiscard]] ChemistryView chemistry_view(const Worked& worked, const Units& units);
[[nodiscard]] ShiftView shift_view(const LogNow& log, shifts::UtcTime now);
[[nodiscard]] LogView log_view(const LogNow& log);
[[nodiscard]] ForecastView forecast_view(const Forecasted& told, const Units& units);
/// `type`: of the tank, where it is known already; else only a mass in a volume is told in other units than
/// g/L.
[[nodiscard]] TrendsView trends_view(const TrendsAnswer& answer, const bath::BathType* type,
                                     const Units& units);

/// The solution whose levels are shown: as analysed, where readings were typed.
[[nodiscard]] sheets::Medium medium_of(const Worked& worked, const Units& units);

/// The tank at the end of what is planned, as the path has it; nullptr where nothing is to be added.
[[nodiscard]] const bath::TankView* end_of(const Worked& worked);

/// The plan that is shown: a person's list as it was checked last, else the chosen one; nullptr where there
/// is none.
[[nodiscard]] const dosing::Plan* shown_plan(const Worked& worked, const std::string& kind);

}  // namespace bathwright::desktop
