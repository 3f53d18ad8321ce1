// Reads examples.toml, the hand-worked cases of a bath type. Every key: plugins/template/examples.toml.
// Not for: replaying them (replay.hpp).
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/units/quantity.hpp>
#include <cstdint>
#include <map>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace bathwright::conformance {

/// What an example can speak of, each in one unit.
enum class Figure : std::uint8_t {
  pH,              ///< -log10 a(H^+)
  ionic_strength,  ///< mol/kg
  density,         ///< kg/L
  level,           ///< g/L of a quantity
  molality,        ///< mol/kg of a species
  log10_activity,  ///< of a species
  indicator,       ///< in its own unit
  headroom,        ///< log10(K / ion product) of a watched solid at the working temperature: above 0 it stays
                   ///< dissolved
  idle_headroom,   ///< the same at the idle temperature
  deposit          ///< g of metal per ampere-hour of a use
};

/// As it stands in the file, with its unit.
[[nodiscard]] std::string_view name(Figure figure);
[[nodiscard]] std::string_view unit(Figure figure);  ///< "" where it has none, or one of its own

/// A figure worked out by hand: within `tolerance` of `value`, or on one side of a limit.
struct Expectation {
  std::string where;  ///< file:line
  Figure figure = Figure::pH;
  std::string of;  ///< the quantity, species, indicator, solid or use; empty for what is of the whole bath
  std::optional<double> value, tolerance, above, below;
  std::string from;  ///< the hand calculation or the source, in words
};

/// A bath, and what must be found in it.
struct Example {
  std::string where, name;
  units::Celsius temperature, idle_temperature;
  units::Litres volume;
  std::optional<double> pH;
  std::map<std::string, double> g_per_L;  ///< by quantity
  std::vector<Expectation> expected;      ///< at least one
};

/// The examples in the TOML file at `path`: at least one. Fails with every problem of the file, sorted by
/// line, each with `file:line: key`. Whether the bath type has what they speak of is for the replay.
Result<std::vector<Example>> read_examples(const std::string& path);

/// The same from text already in memory; `name` stands for the file in messages.
Result<std::vector<Example>> read_examples_text(std::string_view name, std::string_view text);

}  // namespace bathwright::conformance
