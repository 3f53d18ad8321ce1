#include "policy_units.hpp"

#include <algorithm>
#include <array>
#include <charconv>

namespace bathwright::shopfiles {
namespace {

using bath::CountedIn;

std::string quoted(const std::string& written) { return '"' + toml_schema::printable(written) + '"'; }

/// A number and the text behind it, blanks between them left out; a comma counts as the decimal point.
std::optional<std::pair<double, std::string>> number_and_unit(std::string written) {
  std::ranges::replace(written, ',', '.');
  double value = 0;
  const auto [end, error] = std::from_chars(written.data(), written.data() + written.size(), value);
  if (error != std::errc()) return std::nullopt;
  std::string unit(static_cast<const char*>(end), static_cast<const char*>(written.data() + written.size()));
  unit.erase(0, unit.find_first_not_of(' '));
  while (unit.ends_with(' ')) unit.pop_back();
  return std::pair(value, unit);
}

/// Above and below the first '/'; a sign is left to `negative`.
struct Ratio {
  bool negative = false;
  std::string above, below;
};
std::optional<Ratio> split(Table& table, const Key& key) {
  if (table.any(key) == nullptr) return std::nullopt;
  std::string written = table.written(key.name);
  Ratio ratio;
  if (written.starts_with('-')) ratio.negative = true, written.erase(0, 1);
  const std::size_t slash = written.find('/');
  if (slash == std::string::npos) {
    table.report(key.name, quoted(table.written(key.name)) + " has no '/'", std::string(key.example));
    return std::nullopt;
  }
  ratio.above = written.substr(0, slash);
  ratio.below = written.substr(slash + 1);
  return ratio;
}

/// "m2 h", "m2/h", "(m2 h)", "dm2 d" as m2 h.
std::optional<double> area_hours(const std::string& text) {
  std::string plain;
  for (const char c : text) plain += c == '/' || c == '(' || c == ')' || c == '*' ? ' ' : c;
  const std::size_t first = plain.find_first_not_of(' '), gap = plain.find(' ', first);
  if (first == std::string::npos || gap == std::string::npos) return std::nullopt;
  const auto area = units::read_area("1 " + plain.substr(first, gap - first));
  const auto time = units::read_duration("1 " + plain.substr(gap));
  if (!area || !time) return std::nullopt;
  return area->v / dm2_per_m2 * time->v;
}

/// How many units of a use a denominator is; nothing where it is none.
std::optional<double> units_in(const std::string& text, CountedIn counted_in) {
  switch (counted_in) {
    case CountedIn::ampere_hour:
      if (const auto one = number_and_unit("1 " + text)) {
        if (one->second == "Ah") return 1;
        if (one->second == "kAh") return 1000;
      }
      return std::nullopt;
    case CountedIn::gram_deposited:
      if (const auto mass = units::read_mass("1 " + text)) return 1000 * mass->v;
      return std::nullopt;
    case CountedIn::m2_of_work:
      if (const auto area = units::read_area("1 " + text)) return area->v / dm2_per_m2;
      return std::nullopt;
    case CountedIn::hour:
      if (const auto time = units::read_duration("1 " + text)) return time->v;
      return std::nullopt;
    case CountedIn::m2_surface_hour:
      return area_hours(text);
  }
  return std::nullopt;
}

std::string_view example_of(CountedIn counted_in) {
  switch (counted_in) {
    case CountedIn::ampere_hour:
      return R"("0.12 g/Ah")";
    case CountedIn::gram_deposited:
      return R"("3.67 g/g", per gram of metal deposited)";
    case CountedIn::m2_of_work:
      return R"("160 g/m2")";
    case CountedIn::hour:
      return R"("5 g/h")";
    case CountedIn::m2_surface_hour:
      return R"("20 g/m2 h")";
  }
  return "";
}

}  // namespace

std::optional<double> amount_of_work(Table& table, const Key& key, CountedIn counted_in) {
  if (table.any(key) == nullptr) return std::nullopt;
  const std::string written = table.written(key.name), where = table.where(key.name);
  const auto refused = [&](const Problems& problems) {
    table.report(key.name, problems);
    return std::nullopt;
  };
  switch (counted_in) {
    case CountedIn::ampere_hour: {
      const auto read = number_and_unit(written);
      if (read && read->first >= 0 && read->second == "Ah") return read->first;
      if (read && read->first >= 0 && read->second == "kAh") return 1000 * read->first;
      table.report(key.name, quoted(written) + " is no number of ampere-hours", R"("4000 Ah" or "4 kAh")");
      return std::nullopt;
    }
    case CountedIn::gram_deposited: {
      const auto mass = units::read_mass(written, where);
      return mass ? std::optional(1000 * mass->v) : refused(mass.problems());
    }
    case CountedIn::m2_of_work: {
      const auto area = units::read_area(written, where);
      return area ? std::optional(area->v / dm2_per_m2) : refused(area.problems());
    }
    case CountedIn::hour:
    case CountedIn::m2_surface_hour:
      table.report(key.name, "goes by the clock: it needs no amount", "nothing", "Remove it.");
  }
  return std::nullopt;
}

std::optional<double> grams_per_unit(Table& table, const Key& key, CountedIn counted_in) {
  const auto ratio = split(table, {key.name, key.need, example_of(counted_in)});
  if (!ratio) return std::nullopt;
  const auto mass = units::read_mass(ratio->above, table.where(key.name));
  if (!mass) {
    table.report(key.name, mass.problems());
    return std::nullopt;
  }
  const auto units = units_in(ratio->below, counted_in);
  if (!units) {
    table.report(key.name,
                 '"' + toml_schema::printable(ratio->below) + "\" is not what this use is counted in",
                 "a mass as " + std::string(example_of(counted_in)));
    return std::nullopt;
  }
  return (ratio->negative ? -1000 : 1000) * mass->v / *units;
}

std::optional<PerHour> grams_per_hour(Table& table, const Key& key) {
  const auto ratio = split(table, key);
  if (!ratio) return std::nullopt;
  const auto mass = units::read_mass((ratio->negative ? "-" : "") + ratio->above, table.where(key.name));
  if (!mass) {
    table.report(key.name, mass.problems());
    return std::nullopt;
  }
  if (const auto surface = area_hours(ratio->below)) return PerHour{1000 * mass->v / *surface, true};
  if (const auto time = units::read_duration("1 " + ratio->below))
    return PerHour{1000 * mass->v / time->v, false};
  table.report(key.name, '"' + toml_schema::printable(ratio->below) + "\" is no time, nor an area and a time",
               std::string(key.example));
  return std::nullopt;
}

std::optional<Portion> portion(Table& table, const Key& key) {
  if (table.any(key) == nullptr) return std::nullopt;
  const std::string written = table.written(key.name);
  if (const auto litres = units::read_volume(written)) {
    if (litres->v > 0) return Portion{0, litres->v};
  } else if (const auto mass = units::read_mass(written, table.where(key.name)); !mass) {
    table.report(key.name, mass.problems());
    return std::nullopt;
  } else if (mass->v > 0) {
    return Portion{mass->v, 0};
  }
  table.report(key.name, "is zero", "more than zero, as " + std::string(key.example));
  return std::nullopt;
}

std::optional<double> hardness(Table& table, const Key& key) {
  if (table.any(key) == nullptr) return std::nullopt;
  // mg/L of CaCO3 in one of each: exact but for molar masses.
  constexpr double calcium_per_carbonate = 40.078 / 100.086;
  struct Scale {
    std::string_view unit;
    double mg_per_L;
  };
  constexpr std::array scales = {Scale{"mg/L CaCO3", 1},   Scale{"ppm CaCO3", 1},
                                 Scale{"degdH", 17.848},   Scale{"degfH", 10},
                                 Scale{"mmol/L", 100.086}, Scale{"grain/US gal", 17.118}};
  const auto read = number_and_unit(table.written(key.name));
  if (read && read->first >= 0)
    for (const Scale& scale : scales)
      if (read->second == scale.unit) return read->first * scale.mg_per_L * calcium_per_carbonate / 1000;
  table.report(key.name, quoted(table.written(key.name)) + " is no hardness of water",
               R"("100 mg/L CaCO3", or degdH, degfH, grain/US gal, mmol/L)");
  return std::nullopt;
}

namespace {

/// Whole numbers between dashes, as many as there are places; nothing where it is written otherwise.
template <std::size_t Count>
std::optional<std::array<int, Count>> between_dashes(const std::string& written) {
  std::array<int, Count> numbers{};
  const char *at = written.data(), *end = at + written.size();
  for (std::size_t i = 0; i < Count; ++i) {
    if (i > 0 && (at == end || *at++ != '-')) return std::nullopt;
    const auto [next, error] = std::from_chars(at, end, numbers[i]);
    if (error != std::errc() || next == at || numbers[i] < 0) return std::nullopt;
    at = next;
  }
  if (at != end) return std::nullopt;
  return numbers;
}

}  // namespace

std::optional<std::chrono::sys_days> date(Table& table, const Key& key) {
  if (table.any(key) == nullptr) return std::nullopt;
  const std::string written = table.written(key.name);
  if (const auto n = between_dashes<3>(written)) {
    const std::chrono::year_month_day day{std::chrono::year((*n)[0]),
                                          std::chrono::month(static_cast<unsigned>((*n)[1])),
                                          std::chrono::day(static_cast<unsigned>((*n)[2]))};
    if (day.ok() && (*n)[0] > 1900 && (*n)[0] < 2200) return std::chrono::sys_days(day);
  }
  table.report(key.name, written.empty() ? "is no date in quotes" : quoted(written) + " is no date",
               std::string(key.example));
  return std::nullopt;
}

std::optional<std::chrono::month_day> day_of_year(Table& table, const Key& key) {
  if (table.any(key) == nullptr) return std::nullopt;
  const std::string written = table.written(key.name);
  if (const auto n = between_dashes<2>(written)) {
    const std::chrono::month_day day{std::chrono::month(static_cast<unsigned>((*n)[0])),
                                     std::chrono::day(static_cast<unsigned>((*n)[1]))};
    if (day.ok()) return day;
  }
  table.report(key.name, quoted(written) + " is no month and day", std::string(key.example));
  return std::nullopt;
}

std::optional<double> share(Table& table, const Key& key, double most) {
  if (table.any(key) == nullptr) return std::nullopt;
  const std::string written = table.written(key.name);
  if (const auto read = number_and_unit(written); read && (read->second == "%" || read->second.empty())) {
    const double value = read->second.empty() ? read->first : read->first / 100;
    if (value >= 0 && value <= most) return value;
  }
  table.report(key.name, (written.empty() ? "is no text" : quoted(written) + " is no such share"),
               most > 1 ? "0 to 200 % in quotes, as " + std::string(key.example)
                        : "0 to 100 % in quotes, as " + std::string(key.example));
  return std::nullopt;
}

double relative_uncertainty(Table& table) {
  return share(table, {"uncertainty", optional, R"("10 %")"}).value_or(0);
}

}  // namespace bathwright::shopfiles
