#include <fmt/format.h>

#include <algorithm>
#include <bathwright/sheets/names.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>

#include "views.hpp"
#include "words.hpp"

namespace bathwright::desktop {
namespace {

using sheets::figure;
using sheets::fixed;
using sheets::pretty;

/// As short as its column is narrow: powers of ten where zeros would fill it.
std::string small_figure(double value) {
  return value > 0 && value < 1e-3 ? fmt::format("{:.2e}", value) : figure(value, 3);
}

std::string room_words(double kg, double log10_room, bool covered, const Units& units) {
  if (!covered) return "";
  if (std::isfinite(kg)) return units.mass(kg, 2);
  return units::significant(100 * std::pow(10, -log10_room), 2) + " %";
}

}  // namespace

ChemistryView chemistry_view(const Worked& worked, const Units& units) {
  ChemistryView view;
  if (!worked.shop || !worked.now) return view;
  const bath::TankView& now = *worked.now;
  const bath::Chemistry& chemistry = worked.shop->chemistry;
  view.working_at = units.temperature(chemistry.working_temperature().v);
  view.idle_at = units.temperature(chemistry.idle_temperature().v);
  view.figures = {{"pH", fixed(now.pH, 2)},
                  {"ionic strength", figure(now.ionic_strength, 3) + " mol/kg"},
                  {"water activity", fixed(now.water_activity, 3)},
                  {"density", units.density(now.density_kg_per_L)}};
  constexpr std::size_t most_ions = 10;
  for (const bath::SpeciesView& species : now.species) {
    if (view.ions.size() == most_ions) break;
    view.ions.push_back({species.name, pretty(species.name), small_figure(species.molality),
                         small_figure(std::pow(10, species.log10_activity)), figure(species.gamma, 3),
                         species.molality / now.species.front().molality});
  }
  for (const bath::Headroom& room : now.headroom) {
    SolidRow row;
    row.id = room.solid;
    row.name = pretty(room.solid);
    row.working = room_words(room.working_kg, room.working_log10, room.covers_working, units);
    row.idle = room_words(room.idle_kg, room.idle_log10, room.covers_idle, units);
    row.working_share = room.covers_working ? std::pow(10, -room.working_log10) : 0;
    row.idle_share = room.covers_idle ? std::pow(10, -room.idle_log10) : 0;
    row.forms = row.working_share >= 1 || row.idle_share >= 1;
    view.solids.push_back(std::move(row));
  }
  const auto near = [](const SolidRow& row) { return std::max(row.working_share, row.idle_share); };
  std::ranges::stable_sort(view.solids, std::greater{}, near);
  if (worked.path.size() > 1) {
    const auto chart = [&](std::string title, std::string unit, auto&& value) {
      charts::Chart one;
      one.title = std::move(title);
      one.unit = std::move(unit);
      const AmountUnit mass = units.amount_unit("kg");
      one.x_title = mass.symbol + " added";
      charts::Series line{"", charts::Meaning::predicted, {}, {}};
      for (const PathPoint& point : worked.path)
        line.x.push_back(point.kg * mass.per_one), line.y.push_back(value(point.view));
      one.lines.push_back(std::move(line));
      return one;
    };
    view.path.push_back(chart("pH", "", [](const bath::TankView& v) { return v.pH; }));
    view.path.back().least_height = 0.2;
    if (!now.headroom.empty()) {
      charts::Chart rooms =
          chart("nearest solid at " + view.idle_at, "% of saturation", [](const bath::TankView& v) {
            double nearest = 0;
            for (const auto& room : v.headroom)
              if (room.covers_idle && !room.slow) nearest = std::max(nearest, std::pow(10, -room.idle_log10));
            return 100 * nearest;
          });
      rooms.limits = {{100, true, "crystallises"}};
      view.path.push_back(std::move(rooms));
    }
  }
  for (const std::string& warning : now.warnings) view.doubts.push_back(pretty_words(warning));
  return view;
}

}  // namespace bathwright::desktop
