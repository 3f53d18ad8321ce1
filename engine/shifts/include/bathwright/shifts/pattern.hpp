// The shifts of a shop as people write them, and their form in JSON. Nothing here is checked for sense:
// calendar.hpp does that, and tells which shift it is.
#pragma once

#include <bathwright/base/result.hpp>
#include <span>
#include <string>
#include <string_view>
#include <vector>

namespace bathwright::shifts {

struct Shift {
  std::string name;                 ///< "night"
  std::string starts;               ///< "22:00", on the clock on the wall
  std::string ends{};               ///< "06:00", of the next day where not after `starts`;
                                    ///< empty: when the next shift starts
  std::vector<std::string> days{};  ///< "Mon" to "Sun", on which it starts; empty: every day
  bool operator==(const Shift&) const = default;
};

struct ShiftPattern {
  std::string zone;  ///< IANA name, "Europe/Berlin"
  std::vector<Shift> shifts;
  bool operator==(const ShiftPattern&) const = default;
};

/// The patterns that are ready made: "2x12" (day 06:00, night 18:00) and "3x8" (early 06:00, late 14:00,
/// night 22:00), every day of the week. Common practice.
[[nodiscard]] std::span<const std::string> ready_made_names();
/// One of them; an unknown name is answered with the nearest known one.
[[nodiscard]] Result<ShiftPattern> ready_made(std::string_view name, std::string zone);

/// {"shifts":[{"days":["Mon"],"ends":"06:00","name":"night","starts":"22:00"}],"zone":"Europe/Berlin"}:
/// keys sorted, no spaces, empty ones left out. Texts must be UTF-8.
[[nodiscard]] std::string to_json(const ShiftPattern& pattern);
/// The way back, for any order and spacing. Fails on what is not JSON, and on every missing, unknown or
/// wrong key. `where` stands before the key in messages.
[[nodiscard]] Result<ShiftPattern> pattern_from_json(std::string_view json, std::string_view where = {});

}  // namespace bathwright::shifts
