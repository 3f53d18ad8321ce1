// What a person brings from the bench: burette readings, concentrations already worked out, pH, level,
// temperature.
#pragma once

#include <bathwright/units/concentration.hpp>
#include <bathwright/units/quantity.hpp>
#include <map>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace bathwright::analysis {

/// A key of a file as a person wrote it: "23.80 mL" at "morning.toml:12: titration.burette".
struct Written {
  std::string text, where;
};

/// By key. Empty where the figures were not read from a file.
struct AsWritten : std::map<std::string, Written, std::less<>> {
  /// The text of `key`, or else what stands for it.
  [[nodiscard]] std::string text(std::string_view key, const std::string& otherwise) const {
    const auto found = find(key);
    return found == end() ? otherwise : found->second.text;
  }
  [[nodiscard]] std::string where(std::string_view key, const std::string& otherwise) const {
    const auto found = find(key);
    return found == end() ? otherwise : found->second.where;
  }
};

/// One titration as it was read, or one precipitate as it was weighed. What the method does not use is 0.
struct Titration {
  std::string quantity;          ///< "Ni^2+"
  std::string method;            ///< id of a titration method
  units::Litres sample;          ///< of the bath
  units::MolesPerLitre titrant;  ///< nominal strength
  double factor = 1;             ///< actual over nominal strength
  units::Litres burette;         ///< read at the end point
  units::Litres blank;           ///< used without sample
  std::string where;             ///< file:line, for messages
  AsWritten written{};           ///< by the keys of the file
  units::Litres diluted_to{},
      aliquot{};                   ///< flask the sample was made up in, and how much of that was titrated
  units::Litres second_burette{};  ///< the other end point of a difference
  units::Litres excess{};          ///< back titration: reagent added
  units::MolesPerLitre excess_strength{};  ///< of the reagent, actual
  units::Kilograms weighed{};              ///< precipitate
};

/// A concentration found by other means.
struct Found {
  std::string quantity;
  units::Concentration value;
  std::optional<units::Concentration> uncertainty;  ///< one standard uncertainty
  std::string where;
  std::string method{};  ///< id of the method it was found by; empty if not given
  std::string method_where{};
};

struct Readings {
  std::string file;
  std::string sampled;  ///< ISO 8601 local date and time, empty if not given
  std::optional<units::Litres> volume;
  std::optional<units::Decimetres> level_below_mark;
  std::optional<units::Celsius> temperature;
  std::optional<double> pH;
  std::optional<units::KilogramsPerLitre> density;  ///< hydrometer
  std::vector<Titration> titrations;
  std::vector<Found> found;
  AsWritten written{};  ///< level_below_mark, density
};

}  // namespace bathwright::analysis
