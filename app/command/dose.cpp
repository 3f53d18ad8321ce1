// bathwright dose TANK READINGS: the addition sheet.
#include <algorithm>
#include <bathwright/sheets/analysis_sheet.hpp>
#include <fstream>
#include <thread>

#include "own_plan.hpp"
#include "slip.hpp"
#include "view_json.hpp"

namespace bathwright::command {
namespace {

Json json_of(const bath::BathType& type, const dosing::Step& step) {
  Json checks = Json::array();
  for (const auto& check : step.checks)
    checks.push_back({{"name", check.name},
                      {"ok", check.ok},
                      {"stops", check.stops},
                      {"interlock", check.interlock},
                      {"detail", check.detail}});
  return {{"number", step.number},
          {"takes_out", step.takes_out},
          {"shift", step.shift},
          {"chemical", step.chemical},
          {"amount", step.amount},
          {"unit", step.unit},
          {"portion", step.portion},
          {"portions", step.portions},
          {"dissolve_in_L", step.dissolve_in_L ? Json(*step.dissolve_in_L) : Json(nullptr)},
          {"dissolve_in", step.dissolve_in},
          {"how", step.how},
          {"why_here", step.why_here},
          {"warms_C", step.warms_C},
          {"wait_h", step.wait_h},
          {"analyse_after", step.analyse_after},
          {"predicted",
           {{"pH", step.predicted.pH},
            {"volume_L", step.predicted.volume_L},
            {"concentrations", concentrations(type, step.predicted)}}},
          {"checks", std::move(checks)}};
}

Json json_of(const dosing::Percentiles& of) { return {of.p05, of.p50, of.p95}; }

/// Share of the samples inside the window, by quantity.
Json inside(const dosing::Chances& chances) {
  Json shares = Json::object();
  for (const auto& level : chances.levels) shares[level.quantity] = level.inside;
  return shares;
}

Json json_of(const dosing::Chances& chances) {
  const auto or_null = [](const std::optional<double>& share) {
    return share ? Json(*share) : Json(nullptr);
  };
  Json levels = Json::object(), solids = Json::object();
  for (const auto& level : chances.levels) levels[level.quantity] = json_of(level.level);
  for (const auto& solid : chances.solids)
    solids[solid.solid] = {{"working", or_null(solid.working)},
                           {"idle", or_null(solid.idle)},
                           {"working_log10", json_of(solid.working_log10)},
                           {"idle_log10", json_of(solid.idle_log10)}};
  return {{"in_window_and_dissolved", chances.all},
          {"percentiles_5_50_95", std::move(levels)},
          {"dissolved", std::move(solids)},
          {"samples", chances.samples},
          {"unsolved", chances.unsolved}};
}

Json json_of(const std::vector<dosing::Removal>& removals) {
  Json list = Json::array();
  for (const auto& one : removals)
    list.push_back({{"quantity", one.quantity},
                    {"chemical", one.chemical},
                    {"solid", one.solid},
                    {"whole", one.whole_kg},
                    {"first", one.first_kg},
                    {"unit", "kg"}});
  return list;
}

Json json_of(const std::vector<dosing::Rest>& rest) {
  Json list = Json::array();
  for (const auto& one : rest)
    list.push_back({{"chemical", one.addition.chemical},
                    {"amount", one.addition.amount},
                    {"unit", one.addition.unit},
                    {"evaporate_L", one.evaporate_L}});
  return list;
}

Json json_of(const std::vector<dosing::Wait>& waits) {
  Json list = Json::array();
  for (const auto& one : waits)
    list.push_back({{"quantity", one.quantity},
                    {"use", one.use},
                    {"units", one.units},
                    {"unit", one.unit},
                    {"takes", one.takes}});
  return list;
}

Json json_of(const bath::BathType& type, const dosing::Plan& plan) {
  Json additions = Json::array(), steps = Json::array();
  for (const auto& a : plan.additions)
    additions.push_back({{"chemical", a.chemical}, {"amount", a.amount}, {"unit", a.unit}, {"cost", a.cost}});
  for (const auto& step : plan.steps) steps.push_back(json_of(type, step));
  Json shares, sampled, second_look;  // null where no chance was asked for
  if (plan.chances) shares = inside(*plan.chances), sampled = json_of(*plan.chances);
  if (plan.second_look)
    second_look = {{"at", plan.second_look->at},
                   {"probability_in_window", plan.second_look->in_every_window}};
  return {{"kind", plan.kind},
          {"reason", plan.reason},
          {"feasible", plan.feasible},
          {"cost", plan.cost},
          {"salt_load_mol", plan.salt_load_mol},
          {"decant_L", plan.decant_L},
          {"waste_L", plan.decant_L},
          {"probability_in_window", plan.chances ? Json(plan.chances->in_every_window) : Json(nullptr)},
          {"chances", std::move(shares)},
          {"sampled", std::move(sampled)},
          {"second_look", std::move(second_look)},
          {"additions", std::move(additions)},
          {"steps", std::move(steps)},
          {"final",
           {{"pH", plan.final_view.pH},
            {"volume_L", plan.final_view.volume_L},
            {"concentrations", concentrations(type, plan.final_view)},
            {"headroom", headroom_log10(plan.final_view)}}},
          {"unmet", plan.unmet},
          {"left_alone", plan.left_alone},
          {"conflicts", plan.conflicts},
          {"keep_apart", plan.keep_apart},
          {"rest", json_of(plan.rest)},
          {"waits", json_of(plan.waits)},
          {"removals", json_of(plan.removals)}};
}

Json json_of(const Shop& shop, const dosing::AdditionSheet& sheet,
             const std::vector<std::string>& changed_since) {
  std::vector<std::string> warnings = changed_since;
  warnings.insert(warnings.end(), sheet.now.warnings.begin(), sheet.now.warnings.end());
  Json doc = document(warnings);
  doc["tank"] = shop.tank.name;
  doc["currency"] = shop.tank.currency;
  doc["plans"] = Json::array();
  for (const auto& plan : sheet.plans) doc["plans"].push_back(json_of(shop.type(), plan));
  doc["refused"] = Json::array();
  for (const auto& refusal : sheet.refused)
    doc["refused"].push_back({{"reason", refusal.reason}, {"rule", refusal.rule}});
  doc["cautions"] = sheet.cautions;
  return doc;
}

/// The page in HTML, where a file for it was named.
Outcome write_html(const std::string& file, const sheets::Page& page) {
  if (file.empty()) return Done{};
  std::ofstream out(file, std::ios::binary);
  out << sheets::html_of(page);
  out.close();
  if (out) return Done{};
  return Problem{Fault::io, file, "the file cannot be written", "", "Check the folder and the disk."};
}

struct Options {
  bool issue_slip = false;
  bool take_out = false;
  std::string own_plan;  ///< file; empty: the planner's
  int samples = dosing::Sampling{}.samples;
  std::string html;
};

int run(const Context& context, const std::string& tank_path, const std::string& readings_path,
        const Options& options) {
  const auto shop = open_shop(context, tank_path);
  if (!shop) return fail(context, shop.problems());
  const auto analysed = analyse(context, *shop, readings_path);
  if (!analysed) return fail(context, analysed.problems());
  const analysis::Analysis& analysis = analysed->analysis;
  constexpr std::size_t earlier_results = 3;
  const auto history = history_of(context, shop->tank.name, earlier_results, analysed->logged_as);
  if (!history) return fail(context, history.problems());
  dosing::Request request;
  for (const auto& level : analysis.reconciled)
    request.uncertainty[level.quantity] = level.standard_uncertainty.v;
  if (options.samples > 0) request.spread = dosing::Spread{.covariance = analysis.covariance};
  request.bring_down = options.take_out;
  request.sampling = {.samples = options.samples,
                      .threads = std::max(1u, std::thread::hardware_concurrency())};
  const auto sheet = options.own_plan.empty()
                         ? dosing::plan_additions(shop->tank, shop->chemistry, analysis.state, request)
                         : check_own_plan(*shop, analysis.state, options.own_plan);
  if (!sheet) return fail(context, sheet.problems());
  const auto stops = slip_stops(shop->tank, *analysed, *sheet, *history);
  if (options.issue_slip) {
    if (context.log_file.empty())
      return fail(context, {{Fault::bad_input, "--slip", "there is no log to number it", "--log FILE", ""}});
    if (const std::string why = hindrance(*sheet, *analysed, stops); !why.empty())
      return fail(context, {{Fault::refused, "--slip", "no slip is issued: " + why, "",
                             "Read the sheet without --slip; settle that first."}});
  }

  Json doc = json_of(*shop, *sheet, analysed->changed_since);
  doc["stops"] = stops;
  std::optional<LoggedDose> logged;
  if (!context.log_file.empty()) {
    auto done = log_dose(context, *shop, readings_path, *analysed, doc, options.issue_slip);
    if (!done) return fail(context, done.problems());
    logged = *std::move(done);
    doc["logged_as"] = logged->entries;
    doc["slip"] = logged->slip ? Json(*logged->slip) : Json(nullptr);
  }
  const sheets::Page page = page_of(context, *shop, {*analysed, *sheet, stops, *history, logged});
  if (context.json) {
    print(doc);
  } else {
    print(sheets::text_of(page));
    if (logged) print(lines_of(*logged));
  }
  if (Outcome written = write_html(options.html, page); !written) return fail(context, written.problems());
  const bool nothing_to_do = !sheet->plans.empty() && sheet->plans.front().feasible &&
                             sheet->plans.front().additions.empty() && analysis.suspects.empty();
  return nothing_to_do && analysed->changed_since.empty() && stops.empty() &&
                 all_in_window(sheets::judge(shop->tank, shop->type(), analysis))
             ? Exit::all_well
             : Exit::finding;
}

}  // namespace

void add_dose(CLI::App& program, Context& context, Action& action) {
  auto* verb =
      program.add_subcommand("dose", "the addition sheet: what to weigh out, in what order")->fallthrough();
  auto options = std::make_shared<Options>();
  verb->add_flag("--slip", options->issue_slip, "issues the best plan as a numbered slip of the log");
  verb->add_flag("--take-out", options->take_out,
                 "plans with bath taken out too, where something is strong inside its window");
  verb->add_option("--plan", options->own_plan,
                   "checks this list of additions in place of a plan of its own, TOML")
      ->check(CLI::ExistingFile);
  verb->add_option("--samples", options->samples, "tanks drawn for the chance of ending inside; 0: none")
      ->check(CLI::Range(0, 1000000))
      ->capture_default_str();
  verb->add_option("--html", options->html, "writes the sheet to this file too, to print it");
  add_tank_and_readings(
      *verb, context, action,
      [options](const Context& given, const std::string& tank, const std::string& readings) {
        return run(given, tank, readings, *options);
      });
  add_signature(*verb, context);
  verb->footer(
      "Example: bathwright dose baths/n-07.toml baths/readings/n-07-morning.toml --log shift-log.sqlite\n"
      "With --log the analysis and the plan are logged; additions logged since are told. --slip numbers the plan:\n"
      "while that slip is open, no other is issued for the tank.\n");
}

}  // namespace bathwright::command
