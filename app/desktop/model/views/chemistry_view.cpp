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

const bath::SpeciesView* species_of(const bath::TankView* view, const std::string& name) {
  if (!view) return nullptr;
  const auto found = std::ranges::find(view->species, name, &bath::SpeciesView::name);
  return found == view->species.end() ? nullptr : &*found;
}

const bath::Headroom* room_of(const bath::TankView* view, const std::string& solid) {
  if (!view) return nullptr;
  const auto found = std::ranges::find(view->headroom, solid, &bath::Headroom::solid);
  return found == view->headroom.end() ? nullptr : &*found;
}

/// The charged species there is most of, which an addition moves.
std::vector<std::string> most_of(const bath::TankView& view) {
  constexpr std::size_t most = 3;
  std::vector<const bath::SpeciesView*> ions;
  for (const bath::SpeciesView& species : view.species)
    if (species.name.find('^') != std::string::npos) ions.push_back(&species);
  std::ranges::sort(ions, std::greater{}, &bath::SpeciesView::molality);
  std::vector<std::string> names;
  for (std::size_t i = 0; i < std::min(most, ions.size()); ++i) names.push_back(ions[i]->name);
  return names;
}

double share(double log10_room, bool covered) { return covered ? std::pow(10, -log10_room) : 0; }

std::vector<FigureRow> figures_of(const bath::TankView& now, const bath::TankView* end, const Units& units) {
  std::vector<FigureRow> rows;
  const auto add = [&](const std::string& name, const auto& words) {
    std::string then = end ? words(*end) : std::string();
    rows.push_back({name, words(now), then.substr(0, then.find(' '))});  // the unit stands beside the first
  };
  using View = bath::TankView;
  add("pH", [](const View& v) { return fixed(v.pH, 2); });
  add("ionic strength", [](const View& v) { return figure(v.ionic_strength, 3) + " mol/kg"; });
  add("water activity", [](const View& v) { return fixed(v.water_activity, 3); });
  add("density", [&](const View& v) { return units.density(v.density_kg_per_L); });
  return rows;
}

std::vector<IonRow> ions_of(const bath::TankView& now, const bath::TankView* end) {
  constexpr std::size_t most = 10;
  std::vector<IonRow> rows;
  const auto activity = [](const bath::SpeciesView* species) {
    return species ? small_figure(std::pow(10, species->log10_activity)) : std::string();
  };
  for (const bath::SpeciesView& species : now.species) {
    if (rows.size() == most) break;
    rows.push_back({species.name, pretty(species.name), small_figure(species.molality), activity(&species),
                    activity(species_of(end, species.name)), figure(species.gamma, 3),
                    species.molality / now.species.front().molality});
  }
  return rows;
}

/// Nearest to its limit first.
std::vector<SolidRow> solids_of(const bath::TankView& now, const bath::TankView* end, const Units& units) {
  std::vector<SolidRow> rows;
  for (const bath::Headroom& room : now.headroom) {
    SolidRow row;
    row.id = room.solid;
    row.name = pretty(room.solid);
    row.working = room_words(room.working_kg, room.working_log10, room.covers_working, units);
    row.idle = room_words(room.idle_kg, room.idle_log10, room.covers_idle, units);
    row.working_share = share(room.working_log10, room.covers_working);
    row.idle_share = share(room.idle_log10, room.covers_idle);
    if (const bath::Headroom* then = room_of(end, room.solid)) {
      if (then->covers_working) row.working_then = share(then->working_log10, true);
      if (then->covers_idle) row.idle_then = share(then->idle_log10, true);
    }
    row.forms = row.working_share >= 1 || row.idle_share >= 1;
    rows.push_back(std::move(row));
  }
  const auto near = [](const SolidRow& row) { return std::max(row.working_share, row.idle_share); };
  std::ranges::stable_sort(rows, std::greater{}, near);
  return rows;
}

/// pH, the activities of the free ions there is most of, and the nearest solid, against what has gone in.
std::vector<charts::Chart> charts_of(const std::vector<PathPoint>& path, const std::string& idle_at,
                                     const Units& units) {
  std::vector<charts::Chart> all;
  const bath::TankView& now = path.front().view;
  const AmountUnit mass = units.amount_unit("kg");
  const auto chart = [&](std::string title, std::string unit) {
    charts::Chart one;
    one.title = std::move(title);
    one.unit = std::move(unit);
    one.x_title = mass.symbol + " added";
    return one;
  };
  const auto line = [&](std::string name, const auto& value) {
    charts::Series series{std::move(name), charts::Meaning::predicted, {}, {}};
    for (const PathPoint& point : path)
      series.x.push_back(point.kg * mass.per_one), series.y.push_back(value(point.view));
    return series;
  };
  charts::Chart pH = chart("pH", "");
  pH.least_height = 0.2;
  pH.lines.push_back(line("", [](const bath::TankView& v) { return v.pH; }));
  all.push_back(std::move(pH));
  charts::Chart activity = chart("activity of the free ions", "% of now");
  activity.least_height = 2;
  for (const std::string& ion : most_of(now)) {
    const double at_first = species_of(&now, ion)->log10_activity;
    activity.lines.push_back(line(pretty(ion), [&](const bath::TankView& v) {
      const bath::SpeciesView* species = species_of(&v, ion);
      return species ? 100 * std::pow(10, species->log10_activity - at_first) : bath::not_given;
    }));
  }
  all.push_back(std::move(activity));
  if (!now.headroom.empty()) {
    charts::Chart rooms = chart("nearest solid at " + idle_at, "% of saturation");
    rooms.lines.push_back(line("", [](const bath::TankView& v) {
      double nearest = 0;
      for (const auto& room : v.headroom)
        if (room.covers_idle && !room.slow) nearest = std::max(nearest, share(room.idle_log10, true));
      return 100 * nearest;
    }));
    rooms.limits = {{100, true, "crystallises"}};
    all.push_back(std::move(rooms));
  }
  return all;
}

}  // namespace

ChemistryView chemistry_view(const Worked& worked, const Units& units) {
  ChemistryView view;
  if (!worked.shop || !worked.now) return view;
  const bath::TankView& now = *worked.now;
  const bath::TankView* end = end_of(worked);
  const bath::Chemistry& chemistry = worked.shop->chemistry;
  view.working_at = units.temperature(chemistry.working_temperature().v);
  view.idle_at = units.temperature(chemistry.idle_temperature().v);
  view.figures = figures_of(now, end, units);
  view.ions = ions_of(now, end);
  view.solids = solids_of(now, end, units);
  if (end) view.path = charts_of(worked.path.points, view.idle_at, units);
  for (const std::string& warning : now.warnings) view.doubts.push_back(pretty_words(warning));
  return view;
}

}  // namespace bathwright::desktop
