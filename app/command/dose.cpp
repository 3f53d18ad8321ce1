// bathwright dose TANK READINGS: the addition sheet.
#include <bathwright/sheets/addition_sheet.hpp>
#include <bathwright/sheets/analysis_sheet.hpp>

#include "context.hpp"
#include "tank_state.hpp"
#include "view_json.hpp"

namespace bathwright::command {
namespace {

Json json_of(const bath::BathType& type, const dosing::Step& step) {
  Json checks = Json::array();
  for (const auto& check : step.checks)
    checks.push_back(
        {{"name", check.name}, {"ok", check.ok}, {"stops", check.stops}, {"detail", check.detail}});
  return {{"number", step.number},
          {"chemical", step.chemical},
          {"amount", step.amount},
          {"unit", step.unit},
          {"portion", step.portion},
          {"portions", step.portions},
          {"dissolve_in_L", step.dissolve_in_L ? Json(*step.dissolve_in_L) : Json(nullptr)},
          {"how", step.how},
          {"wait_h", step.wait_h},
          {"predicted",
           {{"pH", step.predicted.pH},
            {"volume_L", step.predicted.volume_L},
            {"concentrations", concentrations(type, step.predicted)}}},
          {"checks", std::move(checks)}};
}

Json json_of(const bath::BathType& type, const dosing::Plan& plan) {
  Json additions = Json::array(), steps = Json::array();
  for (const auto& a : plan.additions)
    additions.push_back({{"chemical", a.chemical}, {"amount", a.amount}, {"unit", a.unit}, {"cost", a.cost}});
  for (const auto& step : plan.steps) steps.push_back(json_of(type, step));
  return {{"kind", plan.kind},
          {"feasible", plan.feasible},
          {"cost", plan.cost},
          {"salt_load_mol", plan.salt_load_mol},
          {"probability_in_window",
           plan.probability_in_window ? Json(*plan.probability_in_window) : Json(nullptr)},
          {"additions", std::move(additions)},
          {"steps", std::move(steps)},
          {"final",
           {{"pH", plan.final_view.pH},
            {"volume_L", plan.final_view.volume_L},
            {"concentrations", concentrations(type, plan.final_view)},
            {"headroom", headroom_log10(plan.final_view)}}},
          {"unmet", plan.unmet}};
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

/// Logs the analysis, unless it is the last in the log, and the plan made from it; says so on both pages.
Outcome log_both(const Context& context, const Shop& shop, const std::string& readings_path,
                 const Analysed& analysed, Json& doc, sheets::Lines& lines) {
  std::int64_t analysis_seq = 0;
  if (analysed.logged_as) {
    analysis_seq = *analysed.logged_as;
    sheets::say(lines, "The analysis is already logged as entry " + std::to_string(analysis_seq) + ".");
  } else {
    const auto logged = log_computed(context, shop, readings_path, logbook::EntryKind::analysis,
                                     analysis_document(shop.tank, shop.type(), analysed.analysis));
    if (!logged) return logged.problems();
    analysis_seq = logged->entry.seq;
    sheets::say(lines, words(*logged));
  }
  Json plan = doc;
  plan["analysis"] = analysis_seq;
  const auto planned = log_computed(context, shop, readings_path, logbook::EntryKind::plan, plan);
  if (!planned) return planned.problems();
  doc["logged_as"] = {analysis_seq, planned->entry.seq};
  sheets::say(lines, words(*planned));
  return Done{};
}

int run(const Context& context, const std::string& tank_path, const std::string& readings_path) {
  const auto shop = open_shop(context, tank_path);
  if (!shop) return fail(context, shop.problems());
  const auto analysed = analyse(context, *shop, readings_path);
  if (!analysed) return fail(context, analysed.problems());
  const analysis::Analysis& analysis = analysed->analysis;
  std::map<std::string, double> uncertainty;
  for (const auto& level : analysis.results) uncertainty[level.quantity] = level.standard_uncertainty.v;
  const auto sheet = dosing::plan_additions(shop->tank, shop->chemistry, analysis.state, uncertainty);
  if (!sheet) return fail(context, sheet.problems());

  Json doc = json_of(*shop, *sheet, analysed->changed_since);
  sheets::Lines lines =
      sheets::addition_sheet(shop->tank, shop->type(), analysis, *sheet, analysed->changed_since,
                             {signer(context), context.shift, program_and_version()});
  if (!context.log_file.empty())
    if (Outcome logged = log_both(context, *shop, readings_path, *analysed, doc, lines); !logged)
      return fail(context, logged.problems());
  if (context.json)
    print(doc);
  else
    print(lines);
  const bool nothing_to_do = !sheet->plans.empty() && sheet->plans.front().feasible &&
                             sheet->plans.front().additions.empty() && analysis.suspects.empty();
  return nothing_to_do && analysed->changed_since.empty() &&
                 all_in_window(sheets::judge(shop->tank, shop->type(), analysis))
             ? Exit::all_well
             : Exit::finding;
}

}  // namespace

void add_dose(CLI::App& program, Context& context, Action& action) {
  auto* verb =
      program.add_subcommand("dose", "the addition sheet: what to weigh out, in what order")->fallthrough();
  add_tank_and_readings(*verb, context, action, run);
  add_signature(*verb, context);
  verb->footer(
      "Example: bathwright dose baths/n-07.toml baths/readings/n-07-morning.toml --log shift-log.sqlite\n"
      "With --log the analysis and the plan are logged; additions logged since are told.\n");
}

}  // namespace bathwright::command
