#include "sanity.hpp"

#include <fmt/format.h>

#include <bathwright/units/show.hpp>
#include <cmath>

namespace bathwright::analysis {

using units::show;

std::vector<Suspect> misfits(const Analysis& analysis, const bath::Tank& tank) {
  constexpr double far_from_aim = 0.5;  // common practice: no shift consumes half of a component
  std::vector<Suspect> suspects;
  for (const LevelFound& level : analysis.results) {
    const bath::Aim* aim = tank.aim(level.quantity);
    if (level.value.v < 0) {
      suspects.push_back({level.quantity,
                          fmt::format("works out to {}, below zero ({})", show(level.value), level.how),
                          "One of the levels it is made of is wrong: titrate them again."});
    } else if (aim && analysis.expected.empty() &&
               std::abs(level.value.v - aim->aim) > far_from_aim * aim->aim) {
      suspects.push_back(
          {level.quantity,
           fmt::format("{} is more than half away from the aim of {}", show(level.value),
                       show(units::GramsPerLitre{aim->aim})),
           "Check sample volume, titrant strength and unit, then titrate again before adding."});
    }
  }
  if (!(analysis.pH >= 0 && analysis.pH <= 14)) {
    suspects.push_back({"pH", fmt::format("{} is outside 0 to 14", units::significant(analysis.pH)),
                        "Check the decimal point, calibrate the electrode and measure again."});
  }
  const units::Litres brim = tank.working_volume + tank.freeboard;
  if (analysis.volume > brim) {
    suspects.push_back({"volume",
                        fmt::format("{} is more than the tank holds with its freeboard, {}",
                                    show(analysis.volume), show(brim)),
                        "Check the volume and its unit, or correct the tank file."});
  }
  return suspects;
}

std::vector<Suspect> density_misfit(const Analysis& analysis) {
  constexpr double allowed = 0.01;
  if (!analysis.density_measured) return {};
  const double off = analysis.density_measured->v / analysis.density_predicted.v - 1;
  if (std::abs(off) <= allowed) return {};
  return {{"density",
           fmt::format("the hydrometer shows {}, {:.1f} % {} the {} that follow from the levels at {}",
                       analysis.density_read, 100 * std::abs(off), off > 0 ? "above" : "below",
                       show(analysis.density_predicted), show(analysis.temperature, "degC", 3)),
           "Check the temperature it was read at; else a titration is wrong, or something nobody titrates is "
           "in the tank."}};
}

}  // namespace bathwright::analysis
