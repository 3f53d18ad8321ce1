// A date and a time of day as a laboratory writes them, to a moment in UTC. Private to shopfiles.
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/shifts/time_zone.hpp>
#include <bathwright/shopfiles/analysis_columns.hpp>
#include <string_view>

namespace bathwright::shopfiles {

/// "d.m.y", "m/d/y", "y-m-d": the names of the orders in a columns file.
[[nodiscard]] std::string_view name(DateOrder order);

/// `text`: a date in the given order, the year with four digits, joined by '.', '/' or '-'; a blank or T;
/// then hour:minute, perhaps with seconds, AM or PM, and at the end Z or an offset from UTC (+01:00), which
/// then counts instead of the zone. Years 1970 to 2037: as far as the changes of clocks are known. Refused
/// are a date that does not exist, and without an offset a time that the zone's clock never showed or showed
/// twice.
Result<shifts::UtcTime> read_sampled_time(std::string_view text, DateOrder order,
                                          const shifts::TimeZone& zone, std::string_view where);

}  // namespace bathwright::shopfiles
