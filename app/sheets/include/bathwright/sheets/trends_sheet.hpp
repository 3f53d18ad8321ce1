// What a tank's analyses say together: control charts, and the patterns that chance seldom makes.
#pragma once

#include <bathwright/bath/tank.hpp>
#include <bathwright/charts/page.hpp>
#include <bathwright/sheets/page.hpp>
#include <bathwright/sheets/shown_units.hpp>
#include <bathwright/trends/trend.hpp>

namespace bathwright::sheets {

/// One quantity of a tank, with its place in time.
struct QuantityTrend {
  std::string quantity, unit;  ///< "NiSO4.6H2O", "g/L"; pH has no unit
  std::optional<bath::Aim> aim;
  std::vector<trends::Point> points;  ///< in the order of time
  std::vector<std::string> at;        ///< by the clock of the shop, as many
  trends::Trend trend;
  std::vector<double> density_kg_per_L = {};  ///< of the solution, as many; 0: the log has none
};

/// Samples that were titrated twice.
struct TwiceTitrated {
  std::string quantity;
  std::size_t pairs = 0;
  double s_g_per_L = 0;  ///< standard deviation of one titration
};

struct Trends {
  std::string tank, log;
  std::vector<QuantityTrend> quantities;
  std::vector<TwiceTitrated> twice;
};

/// Whether any rule is tripped.
[[nodiscard]] bool tells_something(const Trends& trends);

/// A sentence for each pattern of the values and of what remains of them, the latest last.
[[nodiscard]] std::vector<std::string> findings_in_words(const QuantityTrend& trend);

/// Patterns and limits are those of the levels in g/L, whatever the unit they are shown in. Where that needs
/// the density, each value is told by the one logged with it; mean, limits and window by the mean of these,
/// drawn as lines by each of them.
///   type  of the tank, for what its levels are told as; nullptr: only a mass in a volume is told in other
///   units
[[nodiscard]] Page trends_page(const Trends& trends, const bath::BathType* type = nullptr,
                               const Units& units = {});

/// For each quantity its values with mean, limits and window; beside it, found less predicted.
[[nodiscard]] charts::Page trends_charts(const Trends& trends, const bath::BathType* type = nullptr,
                                         const Units& units = {});

/// Why levels are not in the chosen unit, or by which density they are; "" where neither asks for words.
[[nodiscard]] std::string trends_note(const Trends& trends, const bath::BathType* type, const Units& units);

}  // namespace bathwright::sheets
