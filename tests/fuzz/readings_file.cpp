#include <bathwright/shopfiles/readings_file.hpp>
#include <cmath>

#include "promises.hpp"

using namespace bathwright;

fuzz::BrokenPromise fuzz::readings_file(std::string_view input) {
  const auto readings = shopfiles::read_readings_text("file.toml", input);
  if (!readings) return in_words(readings.problems(), "file.toml", input);
  if (readings->pH && !(*readings->pH >= -2 && *readings->pH <= 16)) return "a pH that cannot be";
  if (readings->volume && readings->level_below_mark) return "volume and level at once";
  for (const analysis::Titration& titration : readings->titrations) {
    if (!(titration.sample.v > 0) || !(titration.titrant.v > 0)) return "a titration of or with nothing";
    if (!(titration.factor >= 0.5 && titration.factor <= 2)) return "a factor that cannot be";
    if (!(titration.blank.v >= 0 && titration.blank.v <= titration.burette.v))
      return "a blank above the burette";
  }
  for (const analysis::Found& found : readings->found) {
    if (!(found.value.value >= 0) || !std::isfinite(found.value.value))
      return "a concentration that is not one";
  }
  return {};
}
