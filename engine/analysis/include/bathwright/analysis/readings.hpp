// What a person brings from the bench: burette readings, concentrations already worked out, pH, level,
// temperature.
#pragma once

#include <bathwright/units/concentration.hpp>
#include <bathwright/units/quantity.hpp>
#include <optional>
#include <string>
#include <vector>

namespace bathwright::analysis {

/// One titration as it was read.
struct Titration {
  std::string quantity;          ///< "Ni^2+"
  std::string method;            ///< id of a titration method
  units::Litres sample;          ///< bath in the flask
  units::MolesPerLitre titrant;  ///< nominal strength
  double factor = 1;             ///< actual over nominal strength
  units::Litres burette;         ///< read at the end point
  units::Litres blank;           ///< used without sample
  std::string where;             ///< file:line, for messages
};

/// A concentration found by other means.
struct Found {
  std::string quantity;
  units::Concentration value;
  std::optional<units::Concentration> uncertainty;  ///< one standard uncertainty
  std::string where;
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
};

}  // namespace bathwright::analysis
