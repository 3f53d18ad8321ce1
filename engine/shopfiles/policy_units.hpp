// The quantities of a policy file that are one unit over another, or a date. Private to shopfiles.
#pragma once

#include <bathwright/bath/bath_type.hpp>
#include <bathwright/units/read.hpp>
#include <chrono>
#include <optional>

#include "schema.hpp"

namespace bathwright::shopfiles {

inline constexpr double dm2_per_m2 = 100;

/// "1.0 mL/dm2" as L over the unit that `read_over` knows.
template <class Over>
std::optional<double> litres_per(Table& table, const Key& key,
                                 Result<Over> (*read_over)(std::string_view, std::string_view)) {
  if (table.any(key) == nullptr) return std::nullopt;
  const std::string written = table.written(key.name), where = table.where(key.name);
  const std::size_t slash = written.rfind('/');
  if (slash == std::string::npos) {
    table.report(key.name, '"' + toml_schema::printable(written) + "\" has no '/'", std::string(key.example));
    return std::nullopt;
  }
  const auto above = units::read_volume(written.substr(0, slash), where);
  const auto below = read_over("1 " + written.substr(slash + 1), where);
  if (!above) table.report(key.name, above.problems());
  if (!below) table.report(key.name, below.problems());
  if (!above || !below) return std::nullopt;
  return above->v / below->v;
}

/// "4000 Ah", "1.2 kg", "300 dm2" in units of a use.
std::optional<double> amount_of_work(Table& table, const Key& key, bath::CountedIn counted_in);

/// "0.12 g/Ah", "3.67 g/g", "160 g/m2", "5 g/h", "20 g/m2 h": g per unit of a use; may be below 0.
std::optional<double> grams_per_unit(Table& table, const Key& key, bath::CountedIn counted_in);

/// "2.6 kg/d", "20 g/m2 h" as g/h, or g/(m2 h).
struct PerHour {
  double grams = 0;
  bool per_m2 = false;
};
std::optional<PerHour> grams_per_hour(Table& table, const Key& key);

/// "1.2 kg" or, of a liquid, "0.5 L".
struct Portion {
  double kg = 0, litres = 0;
};
std::optional<Portion> portion(Table& table, const Key& key);

/// "100 mg/L CaCO3", "8 degdH", "15 degfH", "6 grain/US gal", "1.4 mmol/L" as g/L of Ca^2+.
std::optional<double> hardness(Table& table, const Key& key);

/// "2026-03-02".
std::optional<std::chrono::sys_days> date(Table& table, const Key& key);
/// "03-02": month and day of any year.
std::optional<std::chrono::month_day> day_of_year(Table& table, const Key& key);

/// "96 %" or "0.96", 0 to `most`.
std::optional<double> share(Table& table, const Key& key, double most = 1);

/// One standard uncertainty, a share: "10 %"; 0 where none is given.
double relative_uncertainty(Table& table);

}  // namespace bathwright::shopfiles
