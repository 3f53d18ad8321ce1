// bathwright forecast TANK POLICY: what builds up, when it bites, how much must be bled.
#include <unistd.h>

#include <algorithm>
#include <bathwright/charts/page_file.hpp>
#include <bathwright/sheets/forecast_charts.hpp>
#include <bathwright/shopfiles/policy_file.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>
#include <fstream>
#include <iostream>
#include <thread>

#include "context.hpp"
#include "tank_state.hpp"

namespace bathwright::command {
namespace {

using forecast::Forecast;

struct Options {
  std::string tank, policy, readings, csv, chart;
  int samples = 200;
  std::uint64_t seed = 1;
};

Json json_of(const sheets::ForecastPage& page) {
  const bath::BathType& type = page.forecast.chemistry().type();
  Json doc = document({});
  doc["tank"] = page.tank.name;
  doc["policy"] = page.policy_file;
  doc["state_from"] = page.state_from;
  doc["horizon_days"] = page.run.days.back().day;
  doc["samples"] = page.bands ? page.bands->samples : 0;
  doc["limits"] = Json::array();
  for (const auto& limit : page.limits)
    doc["limits"].push_back({{"name", limit.name},
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
  doc["bleed_to_hold"] = Json::object();
  for (const auto& bleed : page.bleeds) doc["bleed_to_hold"][bleed.limit] = bleed.litres_per_day;
  doc["series"] = Json::array();
  for (const forecast::Day& day : page.run.days) {
    Json row{
        {"day", day.day}, {"concentrations", Json::object()}, {"headroom", Json::object()}, {"pH", day.pH}};
    for (std::size_t q = 0; q < type.quantities.size(); ++q)
      row["concentrations"][type.quantities[q].id] = day.quantity_g_per_L[q];
    for (std::size_t s = 0; s < type.solids.size(); ++s)
      row["headroom"][type.solids[s].name] = {{"working_log10", day.working_log10[s]},
                                              {"idle_log10", day.idle_log10[s]}};
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
  return doc;
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

/// The bleed that holds each level that rises to its limit and that nobody puts back.
Result<std::vector<sheets::BleedToHold>> bleeds(const Forecast& forecast, const bath::TankState& start,
                                                const std::vector<forecast::LimitMet>& limits) {
  std::vector<sheets::BleedToHold> all;
  for (const auto& limit : limits) {
    if (limit.quantity.empty() || !limit.from_below || limit.share == 0 ||
        limit.cause != forecast::Cause::by_product)
      continue;
    const auto bleed = forecast.bleed_to_hold(start, limit.quantity, limit.g_per_L);
    if (!bleed) return bleed.problems();
    if (*bleed)
      all.push_back({forecast.chemistry().type().quantity(limit.quantity)->label + " at " +
                         units::significant(limit.g_per_L) + " g/L",
                     **bleed});
  }
  return all;
}

int run(const Context& context, const Options& options) {
  const auto shop = open_shop(context, options.tank);
  if (!shop) return fail(context, shop.problems());
  const auto policy = shopfiles::read_policy(options.policy, shop->type());
  if (!policy) return fail(context, policy.problems());
  const auto start = starting_state(context, *shop, options.readings);
  if (!start) return fail(context, start.problems());
  const auto forecast = Forecast::prepare(shop->tank, shop->chemistry, *policy);
  if (!forecast) return fail(context, forecast.problems());
  const auto one = forecast->run(start->state);
  if (!one) return fail(context, one.problems());

  std::optional<forecast::Bands> bands;
  if (options.samples > 0) {
    Forecast::Sampling sampling;
    sampling.samples = options.samples;
    sampling.seed = options.seed;
    sampling.threads = std::max(1u, std::thread::hardware_concurrency());
    const bool tell = !context.json && ::isatty(STDERR_FILENO) != 0;
    auto sampled = forecast->sample(start->state, sampling, [&](double share) {
      if (tell) std::cerr << "\r" << static_cast<int>(100 * share) << " % of the samples" << std::flush;
      return true;
    });
    if (tell) std::cerr << "\r                        \r" << std::flush;
    if (!sampled) return fail(context, sampled.problems());
    bands = *std::move(sampled);
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
                            start->read.from};
  auto held = bleeds(*forecast, start->state, page.limits);
  if (!held) return fail(context, held.problems());
  page.bleeds = *std::move(held);
  if (!options.csv.empty())
    if (const Outcome written = write_csv(options.csv, page); !written)
      return fail(context, written.problems());
  if (!options.chart.empty())
    if (const Outcome written = charts::write_page(options.chart, sheets::forecast_charts(page)); !written)
      return fail(context, written.problems());
  if (context.json)
    print(json_of(page));
  else
    print(sheets::forecast_sheet(page));
  const bool met = std::ranges::any_of(page.limits, [](const auto& limit) { return limit.share > 0; });
  return met ? Exit::finding : Exit::all_well;
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
  verb->add_option("--readings", options->readings, "today's readings; else the last analysis, else the aims")
      ->check(CLI::ExistingFile);
  verb->add_option("--samples", options->samples, "runs with everything uncertain drawn; 0: none")
      ->check(CLI::Range(0, 100000));
  verb->add_option("--seed", options->seed, "of the samples: the same seed, the same figures");
  verb->add_option("--csv", options->csv, "also write one row a day to this file");
  verb->add_option("--chart", options->chart, "also draw it: FILE.svg, FILE.png or FILE.pdf");
  verb->footer("Example: bathwright forecast baths/al-1.toml baths/policies/al-1.toml\n");
  verb->callback(
      [&context, &action, options] { action = [&context, options] { return run(context, *options); }; });
}

}  // namespace bathwright::command
