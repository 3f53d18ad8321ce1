#include <algorithm>
#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/table.hpp>
#include <bathwright/sheets/tank_parts.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>

namespace bathwright::sheets {
namespace {

constexpr double shown_molality = 1e-4;  // below it a species matters to no level

std::string room(bool covers, double log10_room, double kg, const std::optional<double>& u_kg) {
  if (!covers) return "no data here";
  if (std::isnan(kg)) return (log10_room >= 0 ? "undersaturated" : "supersaturated");
  return (kg < 0 ? "forms " : "room for ") + figure(std::abs(kg), 3) +
         (u_kg ? " ± " + units::significant(*u_kg, 1) : "") + " kg";
}

void add_if_over(std::vector<std::string>& out, const bath::Headroom& h, units::Celsius t, bool covers,
                 double log10_room, double kg) {
  if (!covers || !(log10_room < 0)) return;
  std::string text = pretty(h.solid) + " at " + units::show(t, "degC", 3) + ": ";
  text += std::isnan(kg) ? "supersaturated" : figure(-kg, 3) + " kg would crystallise";
  if (h.slow) text += ", slowly";
  if (!h.sign_in_tank.empty()) text += " (" + h.sign_in_tank + ")";
  out.push_back(std::move(text));
}

}  // namespace

void tank_title(Lines& lines, const bath::Tank& tank, double volume_L, units::Celsius temperature) {
  title(lines, tank.name + (tank.shop.empty() ? "" : ", " + tank.shop),
        units::show(units::Litres{volume_L}, "L") + ", " + units::show(temperature, "degC", 3));
}

int decimals_of(const Judged& judged) {
  if (judged.unit.empty()) return 2;
  const double high = judged.aim->high;
  return high > 0 ? std::clamp(2 - static_cast<int>(std::floor(std::log10(high))), 1, 5) : 1;
}

Lines levels(const std::vector<Judged>& judged) {
  Table table({{"g/L, or pH"},
               {"found", Align::number},
               {"low", Align::number},
               {"aim", Align::number},
               {"high", Align::number},
               {"state"}});
  for (const Judged& j : judged) {
    const int decimals = decimals_of(j);
    table.add({j.label, fixed(j.found, decimals), fixed(j.aim->low, decimals), fixed(j.aim->aim, decimals),
               fixed(j.aim->high, decimals), std::string(words(j.standing))});
  }
  return table.lines();
}

Lines headroom(const bath::Tank& tank, const std::vector<bath::Headroom>& headroom) {
  Table table({{"solid"},
               {"at " + units::show(tank.temperature, "degC", 3)},
               {"at " + units::show(tank.idle_temperature, "degC", 3)}});
  for (const bath::Headroom& h : headroom) {
    if (!std::isnan(h.forms_above_pH)) {
      table.add({pretty(h.solid),
                 "above pH " + fixed(h.forms_above_pH, 2) + " " + give_or_take(h.u_forms_above_pH), ""});
      continue;
    }
    if (!h.covers_working && !h.covers_idle) continue;  // a hydrate that is stable at neither temperature
    table.add({pretty(h.solid), room(h.covers_working, h.working_log10, h.working_kg, h.u_working_kg),
               room(h.covers_idle, h.idle_log10, h.idle_kg, h.u_idle_kg)});
  }
  return table.lines();
}

Lines free_ions(const bath::BathType& type, const std::vector<bath::SpeciesView>& species) {
  const auto is_analysed = [&](const std::string& name) {
    return std::ranges::any_of(type.components, [&](const bath::Component& c) {
      return c.species == name && c.found_by != bath::FoundBy::book;
    });
  };
  Table table(
      {{"free"}, {"mol/kg", Align::number}, {"gamma", Align::number}, {"log10 a", Align::number}, {""}});
  for (const auto& s : species)
    if (s.molality >= shown_molality || is_analysed(s.name))
      table.add({pretty(s.name), figure(s.molality), figure(s.gamma), fixed(s.log10_activity, 3),
                 give_or_take(s.u_log10_activity)});
  return table.lines();
}

std::vector<std::string> crystallising(const bath::Tank& tank, const std::vector<bath::Headroom>& headroom) {
  std::vector<std::string> out;
  for (const bath::Headroom& h : headroom) {
    add_if_over(out, h, tank.temperature, h.covers_working, h.working_log10, h.working_kg);
    add_if_over(out, h, tank.idle_temperature, h.covers_idle, h.idle_log10, h.idle_kg);
  }
  return out;
}

}  // namespace bathwright::sheets
