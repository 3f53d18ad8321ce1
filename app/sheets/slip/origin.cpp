#include <algorithm>
#include <bathwright/sheets/names.hpp>

#include "parts.hpp"

namespace bathwright::sheets::slip {
namespace {

constexpr std::string_view by_hand = "__________";

std::string or_by_hand(const std::string& text) { return text.empty() ? std::string(by_hand) : text; }

std::string limits(const bath::LimitsRevision& limits) {
  if (limits.revision.empty()) return "the tank file states no revision";
  std::string text = "revision " + limits.revision;
  if (!limits.from.empty()) text += " from " + limits.from;
  for (const std::string& more : {limits.owner, limits.source})
    if (!more.empty()) text += ", " + more;
  return text;
}

/// "2026-03-02 05:40".
std::string sampled(const std::string& iso) {
  constexpr std::size_t minute_end = 16;
  std::string text = iso.substr(0, minute_end);
  if (text.size() == minute_end) text[10] = ' ';
  return text;
}

/// Ids of the methods by which a quantity was found.
std::string methods(const analysis::Readings& readings, const std::string& quantity) {
  std::string ids;
  const auto add = [&](const std::string& id) {
    if (!id.empty() && ids.find(id) == std::string::npos) ids += (ids.empty() ? "" : ", ") + id;
  };
  for (const auto& titration : readings.titrations)
    if (titration.quantity == quantity) add(titration.method);
  for (const auto& found : readings.found)
    if (found.quantity == quantity) add(found.method);
  return ids;
}

std::string analysed(const analysis::Readings& readings, const analysis::LevelFound& level) {
  const std::string by = methods(readings, level.quantity);
  std::string text = pretty(level.quantity) + (by.empty() ? "" : " by " + by) + ": " + level.how;
  if (!level.titrant_lot.empty()) text += ", titrant lot " + level.titrant_lot;
  if (!level.titrated_by.empty()) text += ", by " + level.titrated_by;
  return text;
}

std::string sample(const AdditionSlip& slip) {
  const analysis::Readings& readings = slip.readings;
  std::string text = "no. " + or_by_hand(readings.sample_number) + " of " +
                     or_by_hand(sampled(readings.sampled)) + " by " + or_by_hand(readings.sampled_by) +
                     "; tank at " + slip.units.degrees(slip.analysis.temperature);
  if (readings.sample_temperature)
    text += ", pipetted at " + slip.units.degrees(*readings.sample_temperature);
  return text;
}

}  // namespace

Section origin(const AdditionSlip& slip) {
  const bath::Tank& tank = slip.tank;
  const analysis::Analysis& analysis = slip.analysis;
  Fields fields;
  fields.push_back({"Limits", limits(tank.limits)});
  fields.push_back({"Sample", sample(slip)});
  fields.push_back({"Volume", slip.units.volume(analysis.volume.v) + ": " + analysis.volume_from});
  for (const auto& level : analysis.results)
    if (level.from == analysis::Origin::titration || level.from == analysis::Origin::found)
      if (!methods(slip.readings, level.quantity).empty())
        fields.push_back({fields.size() == 3 ? "Found" : "", analysed(slip.readings, level)});
  Section section;
  section.blocks.emplace_back(std::move(fields));
  return section;
}

Section stopping(const AdditionSlip& slip) {
  Section section;
  for (const auto* findings : {&slip.changed_since, &slip.stops})
    for (const std::string& finding : *findings) section.blocks.emplace_back(Stop{finding});
  for (const auto& suspect : slip.analysis.suspects)
    section.blocks.emplace_back(Stop{suspect.what + ": " + suspect.reason + " " + suspect.try_this});
  return section;
}

}  // namespace bathwright::sheets::slip
