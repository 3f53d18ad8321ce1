#include "bathwright/shifts/time_zone.hpp"

#include <date/tz.h>
#include <fmt/format.h>

#include <bathwright/base/nearest.hpp>
#include <exception>
#include <vector>

namespace bathwright::shifts {
namespace {

using std::chrono::floor;
using std::chrono::seconds;

/// Means whatever the machine is set to, so that a log would read differently on another one.
constexpr std::string_view machine_zone = "localtime";

Problem unknown(std::string_view name, std::string_view where, const date::tzdb& all) {
  std::vector<std::string> names;
  for (const date::time_zone& zone : all.zones)
    if (zone.name() != machine_zone) names.push_back(zone.name());
  const auto near = nearest(name, names);
  return {Fault::bad_input, std::string(where),
          name.empty() ? "no time zone" : fmt::format("the time zone '{}' is not known", name),
          "an IANA name, such as Europe/Berlin or America/Chicago",
          near ? "Did you mean " + *near + "?" : ""};
}

}  // namespace

Result<TimeZone> TimeZone::find(std::string_view name, std::string_view where) try {
  const date::tzdb& all = date::get_tzdb();
  for (const date::time_zone& zone : all.zones) {
    if (zone.name() != name || name == machine_zone) continue;
    (void)zone.get_info(date::sys_seconds{});  // reads the zone's file, which may fail
    return TimeZone(&zone);
  }
  return unknown(name, where, all);
} catch (const std::exception& error) {
  return Problem{Fault::io, std::string(where),
                 std::string("the system's time zones cannot be read: ") + error.what(), "",
                 "Install the package tzdata."};
}

const std::string& TimeZone::name() const { return zone_->name(); }

seconds TimeZone::offset(UtcTime time) const { return zone_->get_info(floor<seconds>(time)).offset; }

LocalTime TimeZone::local(UtcTime time) const { return LocalTime((time + offset(time)).time_since_epoch()); }

Occurrence TimeZone::occurrence(LocalTime time) const {
  const date::local_info info = zone_->get_info(date::local_seconds(floor<seconds>(time.time_since_epoch())));
  const auto with = [&](const date::sys_info& period) {
    return UtcTime(time.time_since_epoch() - period.offset);
  };
  switch (info.result) {
    case date::local_info::nonexistent:
      return {Occurrence::skipped, info.first.end, info.first.end};
    case date::local_info::ambiguous:
      return {Occurrence::repeated, with(info.first), with(info.second)};
    default:
      return {Occurrence::once, with(info.first), with(info.first)};
  }
}

std::string TimeZone::local_text(UtcTime time) const {
  const LocalTime shown = local(time);
  const auto day = floor<std::chrono::days>(shown);
  const std::chrono::year_month_day date(day);
  const std::chrono::hh_mm_ss clock(shown - day);
  return fmt::format("{:04}-{:02}-{:02} {:02}:{:02}", static_cast<int>(date.year()),
                     static_cast<unsigned>(date.month()), static_cast<unsigned>(date.day()),
                     clock.hours().count(), clock.minutes().count());
}

std::string TimeZone::offset_text(UtcTime time) const {
  const auto added = offset(time);
  const std::chrono::hh_mm_ss size(std::chrono::abs(added));
  return fmt::format("{}{:02}:{:02}", added.count() < 0 ? '-' : '+', size.hours().count(),
                     size.minutes().count());
}

std::string TimeZone::local_text_with_offset(UtcTime time) const {
  return local_text(time) + ' ' + offset_text(time);
}

}  // namespace bathwright::shifts
