// How a laboratory's CSV file is to be read: which column is what, in which unit, and how numbers and dates
// are written. Stated once and remembered in a small TOML file; baths/README.md lists its keys.
// Read next: analyses_csv.hpp, which reads the file itself.
#pragma once

#include <bathwright/base/result.hpp>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace bathwright::shopfiles {

/// Never guessed: 02/03/2026 is a day in February or in March.
enum class DateOrder { day_month_year, month_day_year, year_month_day };

struct QuantityColumn {
  std::string heading;   ///< "Ni g/L"
  std::string quantity;  ///< as the bath type names it: "Ni^2+"
  std::string unit;      ///< any mass per volume, or amount per volume where `quantity` is a formula
  bool operator==(const QuantityColumn&) const = default;
};

struct UnitColumn {
  std::string heading;
  std::string unit;
  bool operator==(const UnitColumn&) const = default;
};

/// Headings are those of the file's first row, with any white space as one blank.
struct AnalysisColumns {
  std::optional<char> delimiter{};  ///< ',' ';' or '\t'; nothing: the one that splits the headings
  char decimal_sign = '.';          ///< '.' or ','
  DateOrder dates = DateOrder::year_month_day;
  std::string zone;     ///< IANA name of the zone whose clock the file's times were read from
  std::string tank;     ///< heading of the tank's identifier
  std::string sampled;  ///< heading of date and time, or of the date where `time` is given
  std::string time{};   ///< heading of the time of day; empty where it stands in `sampled`
  std::string pH{};     ///< heading; empty: none
  std::optional<UnitColumn> temperature{};
  std::optional<UnitColumn> volume{};  ///< of solution in the tank
  std::vector<QuantityColumn> quantities{};
  bool operator==(const AnalysisColumns&) const = default;
};

/// Everything in it that makes no sense, whatever file it is used on; empty when it may be used.
[[nodiscard]] Problems check(const AnalysisColumns& columns);

/// Problems name `name` and the line.
Result<AnalysisColumns> read_columns_text(std::string_view name, std::string_view text);
Result<AnalysisColumns> read_columns(const std::string& path);

/// The TOML text that reads back as `columns`.
[[nodiscard]] std::string columns_text(const AnalysisColumns& columns);
/// Puts it in place of the file at `path`, so that at any moment the old or the new one stands there whole;
/// success means it is on the disk.
Outcome write_columns(const std::string& path, const AnalysisColumns& columns);

}  // namespace bathwright::shopfiles
