#include "sampled_time.hpp"

#include <fmt/format.h>

#include <array>
#include <bathwright/base/letters.hpp>
#include <chrono>
#include <cstdlib>
#include <optional>

namespace bathwright::shopfiles {
namespace {

using std::chrono::minutes;
using std::chrono::seconds;

constexpr int first_year = 1970, last_year = 2037;

struct Number {
  int value = 0;
  std::size_t digits = 0;
};

/// Takes a text apart from its front.
class Scanner {
 public:
  explicit Scanner(std::string_view text) : rest_(text) {}

  Number number(std::size_t most_digits) {
    Number found;
    while (found.digits < most_digits && !rest_.empty() && rest_.front() >= '0' && rest_.front() <= '9') {
      found.value = found.value * 10 + (rest_.front() - '0');
      ++found.digits;
      rest_.remove_prefix(1);
    }
    return found;
  }

  /// The next character if it is one of these, else 0.
  char one_of(std::string_view characters) {
    if (rest_.empty() || characters.find(rest_.front()) == characters.npos) return 0;
    const char found = rest_.front();
    rest_.remove_prefix(1);
    return found;
  }

  void skip_blanks() {
    while (one_of(" ")) {
    }
  }

  [[nodiscard]] bool at_end() const { return rest_.empty(); }

 private:
  std::string_view rest_;
};

struct Date {
  std::array<Number, 3> parts;  // as written
};

/// Nothing where it is no date at all.
std::optional<Date> scan_date(Scanner& scanner) {
  Date date;
  date.parts[0] = scanner.number(4);
  const char mark = scanner.one_of("./-");
  if (!mark) return {};
  date.parts[1] = scanner.number(4);
  if (!scanner.one_of(std::string_view(&mark, 1))) return {};
  date.parts[2] = scanner.number(4);
  for (const Number& part : date.parts)
    if (part.digits == 0) return {};
  return date;
}

/// Since midnight; nothing where it is no time of day.
std::optional<seconds> scan_time(Scanner& scanner) {
  const Number hour = scanner.number(2);
  if (hour.digits == 0 || !scanner.one_of(":")) return {};
  const Number minute = scanner.number(2);
  Number second{0, 2};
  if (scanner.one_of(":")) second = scanner.number(2);
  if (minute.digits != 2 || second.digits != 2 || minute.value > 59 || second.value > 59) return {};
  scanner.skip_blanks();
  int hours = hour.value;
  if (const char half = scanner.one_of("AaPp")) {
    if (!scanner.one_of("Mm") || hours < 1 || hours > 12) return {};
    hours = hours % 12 + (half == 'P' || half == 'p' ? 12 : 0);
  }
  if (hours > 23) return {};
  scanner.skip_blanks();
  return std::chrono::hours(hours) + minutes(minute.value) + seconds(second.value);
}

/// Z or +01:00; nothing where there is none or none that is good: then the text does not end there.
std::optional<minutes> scan_offset(Scanner& scanner) {
  if (scanner.one_of("Zz")) return minutes(0);
  const char sign = scanner.one_of("+-");
  if (!sign) return {};
  const Number hours = scanner.number(2);
  scanner.one_of(":");
  const Number more = scanner.number(2);
  if (hours.digits != 2 || more.digits != 2 || hours.value > 14 || more.value > 59) return {};
  const minutes size = std::chrono::hours(hours.value) + minutes(more.value);
  return sign == '-' ? -size : size;
}

std::string_view example(DateOrder order) {
  switch (order) {
    case DateOrder::day_month_year:
      return "day.month.year hour:minute, as 02.03.2026 05:40";
    case DateOrder::month_day_year:
      return "month/day/year hour:minute, as 03/02/2026 05:40";
    case DateOrder::year_month_day:
      break;
  }
  return "year-month-day hour:minute, as 2026-03-02 05:40";
}

}  // namespace

std::string_view name(DateOrder order) {
  switch (order) {
    case DateOrder::day_month_year:
      return "d.m.y";
    case DateOrder::month_day_year:
      return "m/d/y";
    case DateOrder::year_month_day:
      break;
  }
  return "y-m-d";
}

Result<shifts::UtcTime> read_sampled_time(std::string_view text, DateOrder order,
                                          const shifts::TimeZone& zone, std::string_view where) {
  const auto refuse = [&](std::string what, std::string mend) {
    return Problem{Fault::bad_input, std::string(where),
                   fmt::format("'{}' {}", whole_letters(text, 40), what), std::string(example(order)),
                   std::move(mend)};
  };
  Scanner scanner(text);
  const auto date = scan_date(scanner);
  if (!date) return refuse("is no date and time", "");
  const std::size_t year_at = order == DateOrder::year_month_day ? 0 : 2;
  const std::size_t day_at = order == DateOrder::day_month_year   ? 0
                             : order == DateOrder::month_day_year ? 1
                                                                  : 2;
  const Number year = date->parts[year_at], day = date->parts[day_at],
               month = date->parts[3 - year_at - day_at];
  const std::string other_order =
      fmt::format("The columns say dates = \"{}\"; if the file has another order, say that.", name(order));
  if (day.digits > 2 || month.digits > 2) return refuse("does not have the order of the dates", other_order);
  if (year.digits != 4) return refuse("has no year of four digits", "Write the year in full.");
  if (month.value < 1 || month.value > 12)
    return refuse(fmt::format("has a month {}", month.value), other_order);
  const std::chrono::year_month_day calendar_day{std::chrono::year(year.value),
                                                 std::chrono::month(static_cast<unsigned>(month.value)),
                                                 std::chrono::day(static_cast<unsigned>(day.value))};
  if (!calendar_day.ok()) return refuse("is no day of the calendar", "");
  if (year.value < first_year || year.value > last_year)
    return refuse(fmt::format("is not between {} and {}", first_year, last_year), "");

  if (!scanner.one_of("T")) scanner.skip_blanks();
  if (scanner.at_end())
    return refuse("has no time of day", "Add it, or name the column that holds it as time.");
  const auto time = scan_time(scanner);
  if (!time) return refuse("has no time of day from 0:00 to 23:59", "");
  const auto offset = scan_offset(scanner);
  if (!scanner.at_end()) return refuse("goes on behind the time of day", "Remove what stands behind it.");

  if (offset) return shifts::UtcTime(std::chrono::sys_days(calendar_day) + *time - *offset);
  const shifts::Occurrence moment =
      zone.occurrence(shifts::LocalTime(std::chrono::local_days(calendar_day) + *time));
  if (moment.kind == shifts::Occurrence::once) return moment.first;
  const std::string with_offset =
      fmt::format("If the time is right, write its offset from UTC behind it: {} or {}.",
                  zone.offset_text(moment.first - seconds(1)), zone.offset_text(moment.last));
  if (moment.kind == shifts::Occurrence::skipped)
    return refuse("never came: the clock of " + zone.name() + " was put forward over it", with_offset);
  return refuse("came twice: the clock of " + zone.name() + " was put back over it", with_offset);
}

}  // namespace bathwright::shopfiles
