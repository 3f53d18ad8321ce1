#include <algorithm>
#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/table.hpp>
#include <bathwright/sheets/tank_parts.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>

namespace bathwright::sheets {
namespace {

constexpr double shown_molality = 1e-4;  // below it a species matters to no level

std::string room(bool covers, double log10_room, double kg, const std::optional<double>& u_kg,
                 const AmountUnit& mass) {
  if (!covers) return "no data here";
  if (std::isnan(kg)) return (log10_room >= 0 ? "undersaturated" : "supersaturated");
  return (kg < 0 ? "forms " : "room for ") + figure(std::abs(kg) * mass.per_one, 3) +
         (u_kg ? " ± " + units::significant(*u_kg * mass.per_one, 1) : "") + " " + mass.symbol;
}

void add_if_over(std::vector<std::string>& out, const bath::Headroom& h, units::Celsius t, bool covers,
                 double log10_room, double kg, const Units& units) {
  if (!covers || !(log10_room < 0)) return;
  std::string text = pretty(h.solid) + " at " + units.degrees(t) + ": ";
  text += std::isnan(kg) ? "supersaturated" : units.mass(-kg, 3) + " would crystallise";
  if (h.slow) text += ", slowly";
  if (!h.sign_in_tank.empty()) text += " (" + h.sign_in_tank + ")";
  out.push_back(std::move(text));
}

}  // namespace

void tank_title(Lines& lines, const bath::Tank& tank, double volume_L, units::Celsius temperature,
                const Units& units) {
  title(lines, tank.name + (tank.shop.empty() ? "" : ", " + tank.shop),
        units.volume(volume_L) + ", " + units.degrees(temperature));
}

LevelUnit unit_of(const Judged& judged, const bath::BathType& type, const Units& units, const Medium& in) {
  const bath::Quantity* quantity = judged.unit.empty() ? nullptr : type.quantity(judged.aim->quantity);
  return quantity ? units.level(*quantity, in) : LevelUnit{judged.unit, 1};
}

std::vector<LevelUnit> units_of(const std::vector<Judged>& judged, const bath::BathType& type,
                                const Units& units, const Medium& in) {
  std::vector<LevelUnit> all;
  for (const Judged& one : judged) all.push_back(unit_of(one, type, units, in));
  return all;
}

std::string common_unit(const std::vector<LevelUnit>& all) {
  std::string common = Units().any_level().symbol;
  bool first = true;
  for (const LevelUnit& unit : all) {
    if (unit.symbol.empty()) continue;
    if (!first && unit.symbol != common) return "";
    common = unit.symbol, first = false;
  }
  return common;
}

std::string level_head(const std::string& common) { return common == "g/L" ? "g/L, or pH" : ""; }

std::string levels_heading(const std::string& words, const std::string& common) {
  return common.empty() || common == "g/L" ? words : words + ", " + common + " or pH";
}

std::string named(const std::string& name, const LevelUnit& unit, const std::string& common) {
  return unit.symbol.empty() || unit.symbol == common ? name : name + " " + unit.symbol;
}

int decimals_of(const Judged& judged, const LevelUnit& unit) {
  if (judged.unit.empty()) return 2;
  constexpr double many_figures = 10000;
  const double high = unit.of(judged.aim->high);
  return high > 0
             ? std::clamp(2 - static_cast<int>(std::floor(std::log10(high))), high < many_figures ? 1 : 0, 5)
             : 1;
}

Lines levels(const std::vector<Judged>& judged, const std::vector<LevelUnit>& units) {
  const std::string common = common_unit(units);
  Table table({{level_head(common)},
               {"found", Align::number},
               {"low", Align::number},
               {"aim", Align::number},
               {"high", Align::number},
               {"state"}});
  for (std::size_t i = 0; i < judged.size(); ++i) {
    const Judged& j = judged[i];
    const auto shown = [&](double level) { return fixed(units[i].of(level), decimals_of(j, units[i])); };
    table.add({named(j.label, units[i], common), shown(j.found), shown(j.aim->low), shown(j.aim->aim),
               shown(j.aim->high), std::string(words(j.standing))});
  }
  return table.lines();
}

Lines headroom(const bath::Tank& tank, const std::vector<bath::Headroom>& headroom, const Units& units) {
  Table table(
      {{"solid"}, {"at " + units.degrees(tank.temperature)}, {"at " + units.degrees(tank.idle_temperature)}});
  const AmountUnit mass = units.amount_unit("kg");
  for (const bath::Headroom& h : headroom) {
    if (!std::isnan(h.forms_above_pH)) {
      table.add({pretty(h.solid),
                 "above pH " + fixed(h.forms_above_pH, 2) + " " + give_or_take(h.u_forms_above_pH), ""});
      continue;
    }
    if (!h.covers_working && !h.covers_idle) continue;  // a hydrate that is stable at neither temperature
    table.add({pretty(h.solid), room(h.covers_working, h.working_log10, h.working_kg, h.u_working_kg, mass),
               room(h.covers_idle, h.idle_log10, h.idle_kg, h.u_idle_kg, mass)});
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

std::vector<std::string> crystallising(const bath::Tank& tank, const std::vector<bath::Headroom>& headroom,
                                       const Units& units) {
  std::vector<std::string> out;
  for (const bath::Headroom& h : headroom) {
    add_if_over(out, h, tank.temperature, h.covers_working, h.working_log10, h.working_kg, units);
    add_if_over(out, h, tank.idle_temperature, h.covers_idle, h.idle_log10, h.idle_kg, units);
  }
  return out;
}

}  // namespace bathwright::sheets
