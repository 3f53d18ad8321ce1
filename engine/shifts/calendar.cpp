#include "bathwright/shifts/calendar.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <bathwright/base/letters.hpp>
#include <bathwright/base/nearest.hpp>
#include <set>
#include <tuple>

#include "clock_time.hpp"

namespace bathwright::shifts {
namespace {

using std::chrono::days;
using std::chrono::local_days;
using std::chrono::minutes;

constexpr minutes whole_day{24 * 60}, whole_week{7 * 24 * 60};
constexpr minutes open_end{0};
constexpr std::size_t longest_name_bytes = 100;  // with its date it must fit the log's field for the shift

std::string place(const Shift& shift, std::size_t number, const char* field) {
  return shift.name.empty() ? fmt::format("shift number {}: {}", number, field)
                            : fmt::format("shift '{}': {}", whole_letters(shift.name, 40), field);
}

void check_name(const Shift& shift, std::size_t number, Problems& problems) {
  const auto is_control = [](char c) { return (c >= 0 && c < 0x20) || c == 0x7f; };
  const auto report = [&](const char* what) {
    problems.push_back(
        {Fault::bad_input, fmt::format("shift number {}: name", number), what, "a short name: night", ""});
  };
  if (shift.name.empty()) report("is missing");
  if (shift.name.size() > longest_name_bytes) report("is longer than 100 bytes");
  if (std::ranges::any_of(shift.name, is_control)) report("holds control characters");
}

minutes read_clock(const std::string& text, const std::string& where, Problems& problems) {
  const auto time = clock_time(text);
  if (!time)
    problems.push_back(
        {Fault::bad_input, where,
         text.empty() ? "is missing" : fmt::format("'{}' is no time of day", whole_letters(text, 40)),
         "hours and minutes from 00:00 to 23:59, two digits each", ""});
  return time.value_or(minutes{0});
}

std::set<int> read_days(const Shift& shift, const std::string& where, Problems& problems) {
  std::set<int> numbers;
  for (const std::string& name : shift.days) {
    const auto number = day_number(name);
    const auto near = nearest(name, day_names());
    if (!number)
      problems.push_back(
          {Fault::bad_input, where, fmt::format("'{}' is no day of the week", whole_letters(name, 40)),
           fmt::format("{}", fmt::join(day_names(), ", ")), near ? "Did you mean " + *near + "?" : ""});
    else if (!numbers.insert(*number).second)
      problems.push_back({Fault::bad_input, where, name + " stands there twice", "", "Remove one of them."});
  }
  if (shift.days.empty()) numbers = {0, 1, 2, 3, 4, 5, 6};
  return numbers;
}

}  // namespace

std::vector<Calendar::Slot> Calendar::week_of(const ShiftPattern& pattern, Problems& problems) {
  std::vector<Slot> week;
  std::set<std::string> names;
  if (pattern.shifts.empty())
    problems.push_back({Fault::bad_input, "shifts", "there is none", "at least one shift",
                        R"(For example {"name":"day","starts":"06:00","ends":"14:00"}.)"});
  for (std::size_t i = 0; i < pattern.shifts.size(); ++i) {
    const Shift& shift = pattern.shifts[i];
    check_name(shift, i + 1, problems);
    if (!shift.name.empty() && !names.insert(shift.name).second)
      problems.push_back({Fault::bad_input, place(shift, i + 1, "name"), "two shifts have it",
                          "a name of its own for each", ""});
    const minutes starts = read_clock(shift.starts, place(shift, i + 1, "starts"), problems);
    minutes duration = open_end;
    if (!shift.ends.empty()) {
      duration = read_clock(shift.ends, place(shift, i + 1, "ends"), problems) - starts;
      if (duration <= minutes{0}) duration += whole_day;
    }
    for (const int day : read_days(shift, place(shift, i + 1, "days"), problems))
      week.push_back({shift.name, day, starts, duration});
  }
  std::ranges::sort(week, {}, [](const Slot& slot) { return std::tuple(slot.day, slot.starts); });
  return week;
}

void Calendar::set_open_ends(std::vector<Slot>& week, const ShiftPattern& pattern, Problems& problems) {
  const auto since_monday = [](const Slot& slot) { return slot.day * whole_day + slot.starts; };
  std::set<std::string> reported;
  for (std::size_t i = 0; i < week.size(); ++i) {
    Slot& slot = week[i];
    if (slot.duration != open_end) continue;
    const bool is_last = i + 1 == week.size();
    slot.duration =
        since_monday(week[is_last ? 0 : i + 1]) + (is_last ? whole_week : minutes{0}) - since_monday(slot);
    if (slot.duration <= whole_day || !reported.insert(slot.name).second) continue;
    const auto shift = std::ranges::find(pattern.shifts, slot.name, &Shift::name);
    problems.push_back(
        {Fault::bad_input, place(*shift, 1, "ends"),
         fmt::format("is not given, and after {} the next shift starts {} h later",
                     day_names()[static_cast<std::size_t>(slot.day)], slot.duration.count() / 60),
         "an end, or a shift that follows within 24 h", ""});
  }
}

void Calendar::find_overlaps(const std::vector<Slot>& week, Problems& problems) {
  std::set<std::pair<std::string, std::string>> reported;
  for (std::size_t i = 0; i < week.size(); ++i) {
    const bool is_last = i + 1 == week.size();
    const Slot& slot = week[i];
    const Slot& next = week[is_last ? 0 : i + 1];
    const minutes until_next =
        (next.day - slot.day) * whole_day + next.starts - slot.starts + (is_last ? whole_week : minutes{0});
    if (slot.duration != minutes{0} && slot.duration <= until_next) continue;
    if (!reported.insert({slot.name, next.name}).second) continue;
    problems.push_back(
        {Fault::bad_input, fmt::format("shift '{}'", whole_letters(next.name, 40)),
         fmt::format("starts at {} on {}, while '{}' of {} to {} still runs", clock_text(next.starts),
                     day_names()[static_cast<std::size_t>(next.day)], whole_letters(slot.name, 40),
                     clock_text(slot.starts), clock_text((slot.starts + slot.duration) % whole_day)),
         "one shift at a time", "Move an end or a start, or name the days of each."});
  }
}

Result<Calendar> Calendar::of(const ShiftPattern& pattern) {
  Problems problems;
  const auto zone = TimeZone::find(pattern.zone, "zone");
  if (!zone) problems = zone.problems();
  const std::size_t of_zone = problems.size();
  std::vector<Slot> week = week_of(pattern, problems);
  if (problems.size() == of_zone) {  // what follows needs good times
    set_open_ends(week, pattern, problems);
    find_overlaps(week, problems);
  }
  if (!problems.empty()) return problems;
  Calendar calendar(*zone);
  calendar.week_ = std::move(week);
  return calendar;
}

local_days Calendar::local_day(UtcTime time) const { return std::chrono::floor<days>(zone_.local(time)); }

void Calendar::append_day(local_days day, UtcTime from, UtcTime to, std::vector<ShiftSpan>& spans) const {
  const int number = static_cast<int>(std::chrono::weekday(day).iso_encoding()) - 1;
  const std::chrono::year_month_day date(day);
  for (const Slot& slot : week_) {
    if (slot.day != number) continue;
    const LocalTime starts = day + slot.starts;
    const UtcTime begin = zone_.occurrence(starts).first;
    if (begin >= to) continue;
    const UtcTime end = zone_.occurrence(starts + slot.duration).first;
    if (end <= from || end == begin) continue;
    spans.push_back(
        {slot.name, begin, end,
         fmt::format("{:04}-{:02}-{:02} {}", static_cast<int>(date.year()),
                     static_cast<unsigned>(date.month()), static_cast<unsigned>(date.day()), slot.name)});
  }
}

std::optional<ShiftSpan> Calendar::shift_at(UtcTime time) const {
  std::vector<ShiftSpan> spans = shifts_between(time, time + std::chrono::milliseconds(1));
  if (spans.empty()) return {};
  return std::move(spans.front());
}

ShiftSpan Calendar::next_shift(UtcTime time) const {
  std::vector<ShiftSpan> spans;
  for (local_days day = local_day(time) - days(1);; day += days(1)) {
    append_day(day, time, UtcTime::max(), spans);
    const auto next = std::ranges::find_if(spans, [&](const ShiftSpan& span) { return span.from > time; });
    if (next != spans.end()) return *next;
    spans.clear();
  }
}

// A shift is at most 24 h on the clock, so one that reaches `from` started that day or the day before, or,
// where a change of the clock skips a day, two days before. One that repeats midnight asks for a day more at
// the other end.
std::vector<ShiftSpan> Calendar::shifts_between(UtcTime from, UtcTime to) const {
  std::vector<ShiftSpan> spans;
  for (local_days day = local_day(from) - days(2); day <= local_day(to) + days(1); day += days(1))
    append_day(day, from, to, spans);
  return spans;
}

}  // namespace bathwright::shifts
