#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <bathwright/sheets/cautions.hpp>
#include <bathwright/sheets/forecast_charts.hpp>
#include <bathwright/sheets/forecast_sheet.hpp>
#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/table.hpp>
#include <bathwright/sheets/tank_parts.hpp>
#include <cmath>
#include <filesystem>

namespace bathwright::sheets {
namespace {

using forecast::Day;

/// By the solution of the day it is met, else of the last.
LevelUnit unit_of_limit(const ForecastPage& page, const bath::Quantity& quantity,
                        const forecast::LimitMet& limit) {
  return page.units.level(quantity, medium_on(page.run, limit.day.value_or(page.run.days.back().day)));
}

std::string day_of(const std::optional<double>& day) { return day ? fixed(*day, 1) : "not met"; }

/// "9.6 to 32.6", "9.6 or later", "not met".
std::string between(const forecast::LimitMet& limit) {
  if (!limit.day_p05) return "not met";
  return fixed(*limit.day_p05, 1) + (limit.day_p95 ? " to " + fixed(*limit.day_p95, 1) : " or later");
}

/// "18 Apr 2026", where the policy says when it starts.
std::string date_of(const ForecastPage& page, const std::optional<double>& day) {
  constexpr std::array months = {"Jan", "Feb", "Mar", "Apr", "May", "Jun",
                                 "Jul", "Aug", "Sep", "Oct", "Nov", "Dec"};
  if (!day) return "";
  const auto date = page.forecast.policy().calendar.date(static_cast<int>(std::floor(*day)));
  if (!date) return "";
  return std::to_string(static_cast<unsigned>(date->day())) + ' ' +
         months[static_cast<unsigned>(date->month()) - 1] + ' ' +
         std::to_string(static_cast<int>(date->year()));
}

/// "day 41 (18 Apr 2026)".
std::string day_and_date(const ForecastPage& page, int day) {
  const std::string date = date_of(page, day);
  return "day " + std::to_string(day) + (date.empty() ? "" : " (" + date + ')');
}

std::string per_cent(double share) { return fixed(100 * share, 0) + " %"; }

/// At most seven days of a run, evenly spread, the first and the last among them.
std::vector<std::size_t> shown_days(std::size_t count) {
  constexpr std::size_t most = 7;
  const std::size_t rows = std::min(most, count);
  std::vector<std::size_t> days;
  for (std::size_t i = 0; i < rows; ++i) days.push_back(rows == 1 ? 0 : i * (count - 1) / (rows - 1));
  return days;
}

/// Quantities whose level is not always 0, as many as a page is wide.
std::vector<std::size_t> shown_quantities(const forecast::Run& run, const bath::BathType& type) {
  constexpr std::size_t most = 6;
  std::vector<std::size_t> shown;
  for (std::size_t q = 0; q < type.quantities.size() && shown.size() < most; ++q)
    if (!type.quantities[q].salt_view &&
        std::ranges::any_of(run.days, [&](const Day& d) { return d.quantity_g_per_L[q] > 1e-9; }))
      shown.push_back(q);
  return shown;
}

/// The units of some quantities in a solution.
std::vector<LevelUnit> units_in(const ForecastPage& page, const std::vector<std::size_t>& quantities,
                                const Medium& in) {
  const bath::BathType& type = page.forecast.chemistry().type();
  std::vector<LevelUnit> all;
  for (const std::size_t q : quantities) all.push_back(page.units.level(type.quantities[q], in));
  return all;
}

/// Heads of columns of quantities, with their units where these differ.
void add_heads(std::vector<Column>& columns, const ForecastPage& page,
               const std::vector<std::size_t>& quantities, const std::vector<LevelUnit>& units) {
  const bath::BathType& type = page.forecast.chemistry().type();
  for (std::size_t i = 0; i < quantities.size(); ++i)
    columns.push_back(
        {named(pretty(type.quantities[quantities[i]].id), units[i], common_unit(units)), Align::number});
}

std::string with_unit(const std::string& heading, const std::vector<LevelUnit>& units) {
  const std::string common = common_unit(units);
  return common.empty() ? heading : heading + ", " + common;
}

/// "It settles at NiSO₄·6H₂O 281, H₃BO₃ 42.1 g/L", where nobody knows how dense it will be by then.
std::string settles_at(const ForecastPage& page, const std::vector<std::size_t>& quantities) {
  const bath::BathType& type = page.forecast.chemistry().type();
  std::string text;
  for (const std::size_t q : quantities)
    text += (text.empty() ? "It settles at " : ", ") + pretty(type.quantities[q].id) + " " +
            figure((*page.steady_state)[q], 3);
  return text + " g/L.";
}

Section levels_by_day(const ForecastPage& page) {
  const bath::BathType& type = page.forecast.chemistry().type();
  const auto quantities = shown_quantities(page.run, type);
  const auto units = units_in(page, quantities, medium_on(page.run, 0));
  std::vector<Column> columns = {{"day", Align::number}};
  add_heads(columns, page, quantities, units);
  columns.push_back({"pH", Align::number});
  Table table(columns);
  for (const std::size_t d : shown_days(page.run.days.size())) {
    const Day& day = page.run.days[d];
    std::vector<std::string> row = {std::to_string(day.day)};
    const auto then = units_in(page, quantities, medium_on(page.run, day.day));
    for (std::size_t i = 0; i < quantities.size(); ++i)
      row.push_back(figure(then[i].of(day.quantity_g_per_L[quantities[i]]), 3));
    row.push_back(std::isnan(day.pH) ? "" : fixed(day.pH, 2));
    table.add(row);
  }
  if (page.steady_state && !page.units.needs_medium()) {
    std::vector<std::string> row = {"settled"};
    for (std::size_t i = 0; i < quantities.size(); ++i)
      row.push_back(figure(units[i].of((*page.steady_state)[quantities[i]]), 3));
    row.emplace_back();
    table.add(row);
  }
  Section section{with_unit("Levels by day", units), {}};
  section.blocks.emplace_back(std::move(table));
  if (page.steady_state && page.units.needs_medium())
    section.blocks.emplace_back(Paragraph{settles_at(page, quantities)});
  if (!page.steady_state)
    section.blocks.emplace_back(Paragraph{"No steady state: " + page.why_unsettled + "."});
  return section;
}

void add_limits(Section& section, const ForecastPage& page) {
  const bool sampled = page.bands != nullptr;
  const bool dated = page.forecast.policy().calendar.starts.has_value();
  std::vector<Column> columns = {{"limit"}, {"day", Align::number}};
  if (dated) columns.push_back({"date"});
  if (sampled) columns.push_back({"5 to 95 %"}), columns.push_back({"chance", Align::number});
  columns.push_back({"why"});
  Table table(columns);
  for (const auto& limit : page.limits) {
    if (!limit.day && limit.share == 0) continue;
    std::vector<std::string> row = {limit_words(page, limit), day_of(limit.day)};
    if (dated) row.push_back(date_of(page, limit.day));
    if (sampled) {
      row.push_back(between(limit));
      row.push_back(per_cent(limit.share));
    }
    row.emplace_back(forecast::name(limit.cause));
    table.add(row);
  }
  if (table.empty())
    section.blocks.emplace_back(
        Paragraph{"None within " + std::to_string(page.run.days.back().day) + " days."});
  else
    section.blocks.emplace_back(std::move(table));
}

/// What brings and takes the quantity of a limit, the largest first, in small_mass a day:
/// "deposition 6600, drag-out -40".
std::string turnover_of(const ForecastPage& page, const std::string& quantity) {
  const auto& all = page.forecast.chemistry().type().quantities;
  const auto at =
      static_cast<std::size_t>(std::ranges::find(all, quantity, &bath::Quantity::id) - all.begin());
  const double days = std::max(1, page.run.days.back().day);
  auto flows = page.run.ledger.flows;
  std::ranges::stable_sort(flows, std::greater{}, [&](const auto& flow) { return std::abs(flow.kg[at]); });
  std::string text;
  const AmountUnit mass = page.units.small_mass();
  constexpr std::size_t most = 3;
  for (std::size_t f = 0; f < std::min(most, flows.size()); ++f)
    if (std::abs(flows[f].kg[at]) > 1e-3 * std::abs(flows.front().kg[at]))
      text +=
          (text.empty() ? "" : ", ") + flows[f].name + ' ' + figure(mass.per_one * flows[f].kg[at] / days, 3);
  return text;
}

/// "aluminium at 15.00 g/L", in the unit of its limit.
std::string held(const ForecastPage& page, const BleedToHold& bleed) {
  const bath::Quantity* quantity = page.forecast.chemistry().type().quantity(bleed.quantity);
  const auto limit = std::ranges::find_if(page.limits, [&](const forecast::LimitMet& one) {
    return one.quantity == bleed.quantity && one.g_per_L == bleed.g_per_L;
  });
  if (!quantity || limit == page.limits.end()) return bleed.limit;
  const LevelUnit unit = unit_of_limit(page, *quantity, *limit);
  return quantity->label + " at " + figure(unit.of(bleed.g_per_L)) + " " + unit.symbol;
}

Section limits_met(const ForecastPage& page) {
  Section section{"Limits met", {}};
  add_limits(section, page);
  const auto say = [&](std::string text) { section.blocks.emplace_back(Paragraph{std::move(text)}); };
  std::vector<std::string> told;
  for (const auto& limit : page.limits) {
    if (limit.quantity.empty() || !limit.day || std::ranges::count(told, limit.quantity) > 0) continue;
    told.push_back(limit.quantity);
    say(page.forecast.chemistry().type().quantity(limit.quantity)->label + ", " +
        page.units.small_mass().symbol + " a day: " + turnover_of(page, limit.quantity) + '.');
  }

  for (const BleedToHold& bleed : page.bleeds) {
    std::string text = "To hold " + held(page, bleed) + ": ";
    if (bleed.litres_per_day)
      text += "bleed " + page.units.volume(*bleed.litres_per_day, 3) + " a day more, " +
              figure(100 * *bleed.litres_per_day / page.tank.working_volume.v, 2) + " % of the tank.";
    else
      text += "no bleed was found. " + bleed.why_no_bleed;
    if (!bleed.why_no_load.empty())
      text += " The work that it carries was not found: " + bleed.why_no_load;
    else if (bleed.load)
      text += *bleed.load == 0
                  ? " As it is bled now it carries no work."
                  : " As it is bled now it carries " + figure(100 * *bleed.load, 2) + " % of this work.";
    say(std::move(text));
  }
  return section;
}

/// A limit that is only named, as limit_words.
std::string named_limit(const ForecastPage& page, const std::string& name) {
  const auto limit = std::ranges::find(page.limits, name, &forecast::LimitMet::name);
  return limit == page.limits.end() ? name : limit_words(page, *limit);
}

Section influences(const ForecastPage& page) {
  constexpr std::size_t most_limits = 3, most_inputs = 3;
  Table table({{"limit"}, {"input"}, {"±", Align::number}, {"moves it, days", Align::number}});
  for (std::size_t l = 0; l < std::min(most_limits, page.sensitivity.size()); ++l) {
    const auto& of_limit = page.sensitivity[l];
    for (std::size_t i = 0; i < std::min(most_inputs, of_limit.influences.size()); ++i) {
      const auto& one = of_limit.influences[i];
      table.add({i == 0 ? named_limit(page, of_limit.limit) : "", one.input, per_cent(one.u_rel),
                 fixed(one.days, 1)});
    }
  }
  Section section{"What the days hang on", {}};
  if (!table.empty()) section.blocks.emplace_back(std::move(table));
  return section;
}

Section cost_and_waste(const ForecastPage& page) {
  Section section{"Cost and waste, a day", {}};
  const auto say = [&](std::string text) { section.blocks.emplace_back(Paragraph{std::move(text)}); };
  const forecast::Day& last = page.run.days.back();
  const double days = std::max(1, last.day);
  const AmountUnit mass = page.units.amount_unit("kg"), small = page.units.small_mass();
  Table table({{"chemical"}, {mass.symbol, Align::number}, {page.tank.currency, Align::number}});
  auto chemicals = page.run.ledger.chemicals;
  std::ranges::stable_sort(chemicals, std::greater{}, &forecast::Ledger::Chemical::cost);
  for (const auto& one : chemicals)
    if (one.kg > 0)
      table.add({one.stock, figure(mass.per_one * one.kg / days, 3), fixed(one.cost / days, 2)});
  if (!table.empty()) {
    table.add({"all", "", fixed(last.cost / days, 2)});
    section.blocks.emplace_back(std::move(table));
  }
  const auto volume = [&](double litres) { return page.units.volume(litres / days, 3); };
  say("Waste " + volume(last.waste_L) + ", drag-out " + volume(last.drag_out_L) + ", water to fill up " +
      volume(last.top_up_L) + "." +
      (last.turnovers > 0 ? " Metal turnovers " + fixed(last.turnovers, 2) + " in all." : ""));
  for (const auto& metal : page.run.ledger.metals)
    if (metal.dragged_kg + metal.bled_kg > 0)
      say(metal.element + " lost: drag-out " + figure(small.per_one * metal.dragged_kg / days, 3) + " " +
          small.symbol + ", bleed " + figure(small.per_one * metal.bled_kg / days, 3) + " " + small.symbol +
          (metal.cost > 0 ? ", worth " + figure(metal.cost / days, 3) + ' ' + page.tank.currency : "") + '.');
  return section;
}

Section rinses(const ForecastPage& page) {
  const forecast::Rinsed& rinsed = page.run.rinsed;
  if (rinsed.stages.empty()) return {};
  const bath::BathType& type = page.forecast.chemistry().type();
  const auto quantities = shown_quantities(page.run, type);
  const auto units = units_in(page, quantities, {});
  Section section{with_unit("Rinses on the last day", units), {}};
  std::vector<Column> columns = {{"rinse"}};
  add_heads(columns, page, quantities, units);
  Table table(columns);
  const auto row = [&](const std::string& name, const std::vector<double>& values, const auto& shown) {
    std::vector<std::string> cells = {name};
    for (std::size_t i = 0; i < quantities.size(); ++i)
      cells.push_back(figure(shown(values[quantities[i]], units[i]), 3));
    table.add(cells);
  };
  const auto level = [](double g_per_L, const LevelUnit& unit) { return unit.of(g_per_L); };
  for (const auto& stage : rinsed.stages) row(stage.name, stage.g_per_L, level);
  if (rinsed.waste_L_per_day > 0) {
    const AmountUnit small = page.units.small_mass();
    row("to treatment, " + small.symbol + " a day", rinsed.kg_per_day,
        [&](double kg, const LevelUnit&) { return small.per_one * kg; });
    row(with_unit("to treatment", units), rinsed.g_per_L, level);
  }
  section.blocks.emplace_back(std::move(table));
  section.blocks.emplace_back(
      Paragraph{"To treatment " + page.units.volume(rinsed.waste_L_per_day, 3) + " a day" +
                (rinsed.returned_L_per_day > 0
                     ? "; back to the tank " + page.units.volume(rinsed.returned_L_per_day, 3) + " a day."
                     : ".")});
  return section;
}

/// Of another policy, whose densities are not at hand: in g/L for the units that need them.
std::string first_limit(const ForecastPage& page, const std::string& name) {
  return page.units.needs_medium() ? name : named_limit(page, name);
}

Section side_by_side(const ForecastPage& page) {
  Section section{"Policies side by side, a day", {}};
  if (page.policies.empty()) return section;
  Table table({{"policy"},
               {"chemicals", Align::number},
               {"waste", Align::number},
               {page.tank.currency + " in all", Align::number},
               {"waste " + page.units.volume_symbol(), Align::number},
               {"first limit met"}});
  for (const PolicySummary& one : page.policies) {
    const forecast::Summary& s = one.summary;
    table.add({std::filesystem::path(one.file).stem().string(), fixed(s.cost, 2), fixed(s.waste_cost, 2),
               fixed(s.cost + s.waste_cost, 2), figure(page.units.volume_value(s.waste_L), 3),
               s.holds ? "none in " + std::to_string(one.horizon_days) + " days"
                       : first_limit(page, s.met.front().name) + ", day " + fixed(*s.met.front().day, 1)});
  }
  section.blocks.emplace_back(std::move(table));
  const PolicySummary* best = cheapest_that_holds(page.policies);
  section.blocks.emplace_back(Paragraph{best ? "Cheapest that holds every limit: " + best->file + "."
                                             : "None of them holds every limit."});
  return section;
}

/// From what it starts, and what it is no forecast of.
std::vector<Block> origin(const ForecastPage& page) {
  std::vector<Block> blocks;
  const auto say = [&](std::string text) { blocks.emplace_back(Paragraph{std::move(text)}); };
  say(std::string(deferral));
  const std::string from = date_of(page, 0);
  say("Policy: " + page.policy_file + ", " + std::to_string(page.run.days.back().day) + " days" +
      (from.empty() ? "" : " from " + from) + ". State: " + page.state_from + ".");
  if (page.bands)
    say(std::to_string(page.bands->samples) +
        " samples of what the policy and the bath type state as uncertain.");
  for (const std::string& note : page.forecast.notes()) say("Not counted: " + note + '.');
  if (!page.run.ended.empty())
    blocks.emplace_back(Stop{"it ends before its horizon: " + page.run.ended.front().text()});
  if (page.run.beyond)
    blocks.emplace_back(Stop{"beyond what the constants describe from " +
                             day_and_date(page, page.run.beyond->day) + " on: " + page.run.beyond->why +
                             ". Neither pH nor solubility is told from there."});
  if (page.run.indicative && (!page.run.beyond || page.run.indicative->day < page.run.beyond->day))
    say("pH and solubility are indicative only from " + day_and_date(page, page.run.indicative->day) +
        " on: " + page.run.indicative->why + '.');
  if (const std::string note = page.units.note(); !note.empty())
    say(note +
        (page.units.needs_medium()
             ? " Levels and limits of a day stand by the density computed for it; what is of rinses, of other "
               "policies and of a settled tank is in g/L."
             : ""));
  return blocks;
}

/// In the order they are read.
std::vector<Section> sections_of(const ForecastPage& page) {
  return {limits_met(page),     influences(page), levels_by_day(page),
          cost_and_waste(page), rinses(page),     side_by_side(page)};
}

}  // namespace

Medium medium_on(const forecast::Run& run, double day) {
  const auto last = static_cast<double>(run.days.size() - 1);
  const Day& then = run.days[static_cast<std::size_t>(std::clamp(std::round(day), 0.0, last))];
  return {then.density_kg_per_L, then.water_kg_per_L};
}

std::string limit_words(const ForecastPage& page, const forecast::LimitMet& limit) {
  const bath::Chemistry& chemistry = page.forecast.chemistry();
  if (const bath::Quantity* quantity = chemistry.type().quantity(limit.quantity)) {
    const LevelUnit unit = unit_of_limit(page, *quantity, limit);
    return quantity->label + (limit.from_below ? " above " : " below ") + figure(unit.of(limit.g_per_L)) +
           " " + unit.symbol;
  }
  const bool at_work = limit.cause == forecast::Cause::solid_at_work;
  return pretty(limit.name.substr(0, limit.name.rfind(" at "))) + " at " +
         page.units.degrees(at_work ? chemistry.working_temperature() : chemistry.idle_temperature());
}

std::string iso_date(const forecast::Policy& policy, const std::optional<double>& day) {
  if (!day) return "";
  const auto date = policy.calendar.date(static_cast<int>(std::floor(*day)));
  if (!date) return "";
  return fmt::format("{:04}-{:02}-{:02}", static_cast<int>(date->year()),
                     static_cast<unsigned>(date->month()), static_cast<unsigned>(date->day()));
}

const PolicySummary* cheapest_that_holds(const std::vector<PolicySummary>& policies) {
  const PolicySummary* best = nullptr;
  const auto all = [](const PolicySummary& one) { return one.summary.cost + one.summary.waste_cost; };
  for (const PolicySummary& one : policies)
    if (one.summary.holds && (!best || all(one) < all(*best))) best = &one;
  return best;
}

Lines forecast_sheet(const ForecastPage& page) {
  Lines lines;
  tank_title(lines, page.tank, page.tank.working_volume.v, page.tank.temperature, page.units);
  for (const Block& block : origin(page)) {
    if (const auto* paragraph = std::get_if<Paragraph>(&block)) say(lines, paragraph->text);
    if (const auto* stop = std::get_if<Stop>(&block)) stops(lines, {stop->text});
  }
  for (const Section& section : sections_of(page)) append(lines, section);
  return lines;
}

Page forecast_page(const ForecastPage& page) {
  Page out{page.tank.name + (page.tank.shop.empty() ? "" : ", " + page.tank.shop),
           "Forecast of " + std::to_string(page.run.days.back().day) + " days",
           {}};
  out.add({"", origin(page)});
  for (Section& section : sections_of(page)) out.add(std::move(section));
  charts::Page drawn = forecast_charts(page);
  Section figures{"Day by day", {}};
  if (!drawn.charts.empty()) {
    figures.blocks.emplace_back(Paragraph{drawn.foot});  // above them: below it could be alone on a page
    figures.blocks.emplace_back(Charts{std::move(drawn.charts)});
  }
  out.add(std::move(figures));
  return out;
}

}  // namespace bathwright::sheets
