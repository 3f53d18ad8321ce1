// bathwright forecast TANK POLICY: what builds up, when it bites, how much must be bled.
#include <unistd.h>
#include <CLI/CLI.hpp>

#include <algorithm>
#include <bathwright/charts/page_file.hpp>
#include <bathwright/sheets/forecast_charts.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>
#include <csignal>
#include <cstdio>
#include <fstream>
#include <iostream>
#include <thread>
#include <utility>

#include "printed.hpp"
#include "shared_options.hpp"
#include "work/bleeds_to_hold.hpp"
#include "work/tank_state.hpp"

namespace bathwright::command {
namespace {

using forecast::Forecast;

/// Ctrl-C while samples run: they stop at the end of the day they are at.
volatile std::sig_atomic_t interrupted = 0;

struct Options {
  std::string tank, policy, readings, csv, chart;
  std::vector<std::string> against;
  int samples = 200;
  std::uint64_t seed = 1;
  PrintedFiles printed;
};

Json by_quantity(const std::vector<double>& values, const bath::BathType& type) {
  Json all = Json::object();
  for (std::size_t q = 0; q < type.quantities.size(); ++q) all[type.quantities[q].id] = values[q];
  return all;
}

void add_ledger(Json& doc, const forecast::Run& run, const bath::BathType& type) {
  doc["chemicals"] = Json::array();
  for (const auto& one : run.ledger.chemicals)
    doc["chemicals"].push_back({{"chemical", one.stock}, {"kg", one.kg}, {"cost", one.cost}});
  doc["flows_kg"] = Json::object();
  for (const auto& flow : run.ledger.flows) doc["flows_kg"][flow.name] = by_quantity(flow.kg, type);
  doc["metal"] = Json::array();
  for (const auto& metal : run.ledger.metals)
    doc["metal"].push_back({{"quantity", metal.quantity},
                            {"element", metal.element},
                            {"dragged_kg", metal.dragged_kg},
                            {"bled_kg", metal.bled_kg},
                            {"deposited_kg", metal.deposited_kg},
                            {"cost", metal.cost}});
}

Json json_of(const forecast::Rinsed& rinsed, const bath::BathType& type) {
  Json stages = Json::array();
  for (const auto& stage : rinsed.stages)
    stages.push_back({{"name", stage.name}, {"concentrations", by_quantity(stage.g_per_L, type)}});
  return {{"stages", stages},
          {"returned_L_per_day", rinsed.returned_L_per_day},
          {"treatment",
           {{"L_per_day", rinsed.waste_L_per_day},
            {"kg_per_day", by_quantity(rinsed.kg_per_day, type)},
            {"g_per_L", by_quantity(rinsed.g_per_L, type)}}},
          {"carried_kg_per_day", by_quantity(rinsed.carried_kg_per_day, type)}};
}

Json json_of(const sheets::PolicySummary& one, bool cheapest) {
  const forecast::Summary& s = one.summary;
  Json met = Json::array();
  for (const auto& limit : s.met) met.push_back({{"name", limit.name}, {"day", or_null(limit.day)}});
  return {{"policy", one.file},
          {"horizon_days", one.horizon_days},
          {"cost_per_day", s.cost},
          {"waste_cost_per_day", s.waste_cost},
          {"waste_L_per_day", s.waste_L},
          {"water_L_per_day", s.top_up_L},
          {"metal_lost_kg_per_day", s.metal_lost_kg},
          {"metal_lost_cost_per_day", s.metal_lost_cost},
          {"limits_met", met},
          {"holds", s.holds},
          {"cheapest_that_holds", cheapest}};
}

Json json_of(const sheets::ForecastPage& page) {
  const bath::BathType& type = page.forecast.chemistry().type();
  std::vector<std::string> warnings = page.forecast.notes();
  for (const Problem& problem : page.run.ended) warnings.push_back(problem.text());
  Json doc = document(warnings);
  doc["tank"] = page.tank.name;
  doc["policy"] = page.policy_file;
  doc["state_from"] = page.state_from;
  doc["horizon_days"] = page.run.days.back().day;
  doc["samples"] = page.bands ? page.bands->samples : 0;
  const auto date = [&](const std::optional<double>& day) {
    const std::string text = sheets::iso_date(page.forecast.policy(), day);
    return text.empty() ? Json() : Json(text);
  };
  doc["limits"] = Json::array();
  for (const auto& limit : page.limits)
    doc["limits"].push_back({{"name", limit.name},
                             {"quantity", limit.quantity.empty() ? Json() : Json(limit.quantity)},
                             {"g_per_L", limit.quantity.empty() ? Json() : Json(limit.g_per_L)},
                             {"date", date(limit.day)},
                             {"kind", limit.quantity.empty() ? "solid" : "level"},
                             {"cause", forecast::name(limit.cause)},
                             {"day", or_null(limit.day)},
                             {"day_p05", or_null(limit.day_p05)},
                             {"day_p50", or_null(limit.day_p50)},
                             {"day_p95", or_null(limit.day_p95)},
                             {"share", limit.share}});
  doc["steady_state"] = Json::object();
  if (page.steady_state)
    for (std::size_t q = 0; q < type.quantities.size(); ++q)
      doc["steady_state"][type.quantities[q].id] = (*page.steady_state)[q];
  doc["not_found"] = Json::array();
  if (!page.steady_state)
    doc["not_found"].push_back({{"what", "steady_state"}, {"limit", nullptr}, {"why", page.why_unsettled}});
  const auto from_day = [&](const std::optional<forecast::FromDay>& from) {
    return from ? Json{{"day", from->day}, {"date", date(from->day)}, {"why", from->why}} : Json();
  };
  doc["indicative"] = from_day(page.run.indicative);
  doc["beyond"] = from_day(page.run.beyond);
  doc["bleed_to_hold"] = Json::object();
  doc["largest_load"] = Json::object();
  for (const auto& bleed : page.bleeds) {
    doc["bleed_to_hold"][bleed.limit] = or_null(bleed.litres_per_day);
    doc["largest_load"][bleed.limit] = or_null(bleed.load);
    for (const auto& [what, why] :
         {std::pair{"bleed_to_hold", bleed.why_no_bleed}, std::pair{"largest_load", bleed.why_no_load}})
      if (!why.empty()) doc["not_found"].push_back({{"what", what}, {"limit", bleed.limit}, {"why", why}});
  }
  doc["series"] = Json::array();
  for (const forecast::Day& day : page.run.days) {
    Json row{{"day", day.day},
             {"concentrations", Json::object()},
             {"headroom", Json::object()},
             {"pH", std::isnan(day.pH) ? Json() : Json(day.pH)}};
    for (std::size_t q = 0; q < type.quantities.size(); ++q)
      row["concentrations"][type.quantities[q].id] = day.quantity_g_per_L[q];
    for (std::size_t s = 0; s < type.solids.size(); ++s)
      row["headroom"][type.solids[s].name] = {{"working_log10", day.working_log10[s]},
                                              {"idle_log10", day.idle_log10[s]}};
    row["volume_L"] = day.volume_L;
    row["cost"] = day.cost;
    row["waste_L"] = day.waste_L;
    row["drag_out_L"] = day.drag_out_L;
    row["top_up_L"] = day.top_up_L;
    row["turnovers"] = day.turnovers;
    doc["series"].push_back(std::move(row));
  }
  doc["bands"] = Json::object();
  if (page.bands)
    for (std::size_t q = 0; q < type.quantities.size(); ++q)
      doc["bands"][type.quantities[q].id] = {{"p05", page.bands->quantity[q].p05},
                                             {"p50", page.bands->quantity[q].p50},
                                             {"p95", page.bands->quantity[q].p95}};
  doc["balance"] = page.run.balance;
  doc["sensitivity"] = Json::array();
  for (const auto& of_limit : page.sensitivity) {
    Json influences = Json::array();
    for (const auto& one : of_limit.influences)
      influences.push_back({{"input", one.input},
                            {"u_rel", one.u_rel},
                            {"day_lower", or_null(one.day_lower)},
                            {"day_higher", or_null(one.day_higher)},
                            {"days", one.days}});
    doc["sensitivity"].push_back({{"limit", of_limit.limit}, {"influences", influences}});
  }
  add_ledger(doc, page.run, type);
  if (!page.run.rinsed.stages.empty()) doc["rinses"] = json_of(page.run.rinsed, type);
  doc["policies"] = Json::array();
  const auto* best = sheets::cheapest_that_holds(page.policies);
  for (const auto& one : page.policies) doc["policies"].push_back(json_of(one, &one == best));
  return doc;
}

/// Faults found beyond the reading of a policy, with its file.
Problems of_file(const std::string& file, Problems problems) {
  for (Problem& problem : problems)
    if (problem.where.find(file) == std::string::npos)
      problem.where = file + (problem.where.empty() ? "" : ": " + problem.where);
  return problems;
}

/// One row a day, g/L by quantity, as spreadsheets read it (RFC 4180).
Outcome write_csv(const std::string& path, const sheets::ForecastPage& page) {
  std::ofstream file(path);
  file << "day";
  const bath::BathType& type = page.forecast.chemistry().type();
  for (const auto& quantity : type.quantities) file << ",\"" << quantity.id << " g/L\"";
  for (const auto& solid : type.solids)
    file << ",\"" << solid.name << " headroom at work\",\"" << solid.name << " headroom at rest\"";
  file << ",pH,cost,waste L,drag-out L,water L,turnovers\r\n";
  const auto figure = [&](double value) {
    file << ',';
    if (std::isfinite(value)) file << units::significant(value, 7);
  };
  for (const auto& day : page.run.days) {
    file << day.day;
    for (const double level : day.quantity_g_per_L) figure(level);
    for (std::size_t s = 0; s < type.solids.size(); ++s)
      figure(day.working_log10[s]), figure(day.idle_log10[s]);
    for (const double value : {day.pH, day.cost, day.waste_L, day.drag_out_L, day.top_up_L, day.turnovers})
      figure(value);
    file << "\r\n";
  }
  if (file.flush()) return Done{};
  return Problem{Fault::io, path, "could not be written", "", "Check the folder and its rights."};
}

/// Samples with progress on a terminal; Ctrl-C stops them.
Result<forecast::Bands> sampled(const Context& context, const Options& options, const Forecast& forecast,
                                const bath::TankState& start) {
  Forecast::Sampling sampling;
  sampling.samples = options.samples;
  sampling.seed = options.seed;
  sampling.threads = std::max(1u, std::thread::hardware_concurrency());
  const bool tell = !context.json && ::isatty(STDERR_FILENO) != 0;
  double reached = 0;
  int told = -1;
  auto* const before = std::signal(SIGINT, [](int) { interrupted = 1; });
  auto bands = forecast.sample(start, sampling, [&](double share) {
    reached = share;
    const int per_cent = static_cast<int>(100 * share);
    if (tell && per_cent != std::exchange(told, per_cent))
      std::cerr << "\r" << per_cent << " % of the samples, Ctrl-C stops" << std::flush;
    return interrupted == 0;
  });
  std::signal(SIGINT, before);
  if (tell) std::cerr << "\r                                   \r" << std::flush;
  if (bands || interrupted == 0) return bands;
  return Problem{Fault::io, "forecast",
                 "stopped by Ctrl-C after " + std::to_string(static_cast<int>(100 * reached)) +
                     " % of the samples; nothing was written",
                 "", "Ask for fewer with --samples; 0 leaves them out."};
}

/// Each of the files as a policy of this tank, to set beside the first.
Result<std::vector<sheets::PolicySummary>> others(const Options& options, const Shop& shop,
                                                  const StartingState& start) {
  std::vector<sheets::PolicySummary> all;
  Problems problems;
  for (const std::string& file : options.against) {
    const auto policy = work::policy_from(start, file, shop.type());
    const auto forecast =
        policy ? Forecast::prepare(shop.tank, shop.chemistry, *policy) : Result<Forecast>(policy.problems());
    const auto run = forecast ? forecast->run(start.state) : Result<forecast::Run>(forecast.problems());
    if (run)
      all.push_back({file, policy->horizon_days, forecast->summary(*run, forecast->limits(*run))});
    else
      for (const Problem& problem : of_file(file, run.problems())) problems.push_back(problem);
  }
  if (!problems.empty()) return problems;
  return all;
}

int run(const Context& context, const Options& options) {
  const auto shop = open_shop(context, options.tank);
  if (!shop) return fail(context, shop.problems());
  const auto start = starting_state(context, *shop, options.readings);
  if (!start) return fail(context, start.problems());
  const auto policy = work::policy_from(*start, options.policy, shop->type());
  if (!policy) return fail(context, policy.problems());
  const auto forecast = Forecast::prepare(shop->tank, shop->chemistry, *policy);
  if (!forecast) return fail(context, of_file(options.policy, forecast.problems()));
  const auto one = forecast->run(start->state);
  if (!one) return fail(context, one.problems());

  std::optional<forecast::Bands> bands;
  if (options.samples > 0) {
    auto drawn = sampled(context, options, *forecast, start->state);
    if (!drawn) return fail(context, drawn.problems());
    bands = *std::move(drawn);
  }
  const auto settled = forecast->steady_state(start->state);
  sheets::ForecastPage page{shop->tank,
                            *forecast,
                            *one,
                            bands ? &*bands : nullptr,
                            bands ? bands->limits : forecast->limits(*one),
                            settled ? *settled : std::nullopt,
                            settled ? "nothing leaves the tank" : settled.problems().front().what,
                            {},
                            options.policy,
                            start->read.from,
                            {},
                            {},
                            sheets::Units(context.units)};
  page.bleeds = bleeds_to_hold(*forecast, start->state, page.limits);
  if (options.samples > 0) {
    if (auto moved = forecast->sensitivity(start->state)) page.sensitivity = *std::move(moved);
  }
  if (!options.against.empty()) {
    auto beside = others(options, *shop, *start);
    if (!beside) return fail(context, beside.problems());
    page.policies = *std::move(beside);
    page.policies.insert(page.policies.begin(), {options.policy, policy->horizon_days,
                                                 forecast->summary(*one, forecast->limits(*one))});
  }
  if (!options.csv.empty())
    if (const Outcome written = write_csv(options.csv, page); !written)
      return fail(context, written.problems());
  if (!options.chart.empty())
    if (const Outcome written = charts::write_page(options.chart, sheets::forecast_charts(page)); !written)
      return fail(context, written.problems());
  if (const Outcome written = write_printed(options.printed, sheets::forecast_page(page)); !written)
    return fail(context, written.problems());
  if (context.json)
    print(json_of(page));
  else
    print(sheets::forecast_sheet(page));
  const bool met = std::ranges::any_of(page.limits, [](const auto& limit) { return limit.share > 0; });
  return met || !one->ended.empty() ? Exit::finding : Exit::all_well;
}

}  // namespace

void add_forecast(CLI::App& program, Context& context, Action& action) {
  auto* verb = program.add_subcommand("forecast", "what builds up, when it bites, how much must be bled");
  verb->fallthrough();
  auto options = std::make_shared<Options>();
  verb->add_option("TANK", options->tank, "the tank, TOML")->required()->check(CLI::ExistingFile);
  verb->add_option("POLICY", options->policy, "how the shop runs it, TOML")
      ->required()
      ->check(CLI::ExistingFile);
  verb->add_option("--readings", options->readings, "today's readings; else the book in --log, else the aims")
      ->check(CLI::ExistingFile);
  verb->add_option("--samples", options->samples, "runs with everything uncertain drawn; 0: none")
      ->check(CLI::Range(0, 100000));
  verb->add_option("--seed", options->seed, "of the samples: the same seed, the same figures");
  verb->add_option("--against", options->against, "other policies to set beside it; may be repeated")
      ->check(CLI::ExistingFile);
  verb->add_option("--csv", options->csv, "also write one row a day to this file");
  verb->add_option("--chart", options->chart, "also draw it: FILE.svg, FILE.png or FILE.pdf");
  add_printed_files(*verb, options->printed);
  add_units(*verb, context);
  verb->footer(
      "Example: bathwright forecast baths/al-1.toml baths/policies/al-1.toml\n"
      "         bathwright forecast baths/e-02.toml baths/policies/e-02.toml --against "
      "baths/policies/e-02-bleed.toml\n");
  verb->callback(
      [&context, &action, options] { action = [&context, options] { return run(context, *options); }; });
}

}  // namespace bathwright::command
