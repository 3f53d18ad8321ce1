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

/// What a dose leaves in the log.
struct LoggedDose {
  std::vector<std::int64_t> entries;  ///< the analysis, the plan, the slip
  bool analysis_was_there = false;
  std::optional<std::int64_t> slip;
  std::filesystem::path path;
};

/// Logs the analysis, unless it is the last in the log, the plan made from it, and the slip where one is
/// wanted: together or not at all.
Result<LoggedDose> log_dose(const Context& context, const Shop& shop, const std::string& readings_path,
                            const Analysed& analysed, const Json& doc, bool issue_slip) {
  LoggedDose logged;
  std::vector<logbook::NewEntry> entries;
  const auto add = [&](logbook::EntryKind kind, Json body) -> Outcome {
    auto entry = entry_computed(shop, readings_path, kind, std::move(body));
    if (!entry) return entry.problems();
    entries.push_back(*std::move(entry));
    return Done{};
  };
  if (analysed.logged_as) {
    logged.analysis_was_there = true;
    logged.entries.push_back(*analysed.logged_as);
  } else if (Outcome added = add(logbook::EntryKind::analysis,
                                 analysis_document(shop.tank, shop.type(), analysed.analysis));
             !added) {
    return added.problems();
  }
  if (Outcome added = add(logbook::EntryKind::plan, doc); !added) return added.problems();
  if (issue_slip)
    if (Outcome added =
            add(logbook::EntryKind::slip, {{"plan", doc["plans"].front()}, {"cautions", doc["cautions"]}});
        !added)
      return added.problems();
  auto opened = open_log_to_write(context);
  if (!opened) return opened.problems();
  OpenLog open = *std::move(opened);
  const auto written = append_all(context, open, std::move(entries));
  if (!written) return written.problems();
  for (const auto& entry : *written) logged.entries.push_back(entry.seq);
  if (issue_slip) logged.slip = logged.entries.back();
  logged.path = open.path;
  return logged;
}

sheets::Lines lines_of(const LoggedDose& logged) {
  sheets::Lines lines;
  std::string numbers;
  for (const std::int64_t seq : logged.entries)
    numbers += (numbers.empty() ? "" : ", ") + std::to_string(seq);
  if (logged.analysis_was_there)
    sheets::say(lines,
                "The analysis is already logged as entry " + std::to_string(logged.entries.front()) + ".");
  sheets::say(lines, "Logged in " + logged.path.string() + ": entries " + numbers + ".");
  if (logged.slip)
    sheets::say(lines, "Slip " + std::to_string(*logged.slip) + " is open: log each step with --slip " +
                           std::to_string(*logged.slip) + ", then bathwright log close " +
                           std::to_string(*logged.slip) + ".");
  return lines;
}

/// What keeps the best plan from being carried out as it stands; empty where nothing does.
std::string hindrance(const dosing::AdditionSheet& sheet, const Analysed& analysed) {
  if (sheet.plans.empty() || !sheet.plans.front().feasible) return "no plan meets every aim";
  if (sheet.plans.front().additions.empty()) return "there is nothing to add";
  if (!analysed.analysis.suspects.empty())
    return "a reading is suspect: " + analysed.analysis.suspects.front().what;
  return analysed.changed_since.empty() ? "" : analysed.changed_since.front();
}

int run(const Context& context, const std::string& tank_path, const std::string& readings_path,
        bool issue_slip) {
  const auto shop = open_shop(context, tank_path);
  if (!shop) return fail(context, shop.problems());
  const auto analysed = analyse(context, *shop, readings_path);
  if (!analysed) return fail(context, analysed.problems());
  const analysis::Analysis& analysis = analysed->analysis;
  dosing::Request request;
  for (const auto& level : analysis.results)
    request.uncertainty[level.quantity] = level.standard_uncertainty.v;
  const auto sheet = dosing::plan_additions(shop->tank, shop->chemistry, analysis.state, request);
  if (!sheet) return fail(context, sheet.problems());
  if (issue_slip) {
    if (context.log_file.empty())
      return fail(context, {{Fault::bad_input, "--slip", "there is no log to number it", "--log FILE", ""}});
    if (const std::string why = hindrance(*sheet, *analysed); !why.empty())
      return fail(context, {{Fault::refused, "--slip", "no slip is issued: " + why, "",
                             "Read the sheet without --slip; settle that first."}});
  }

  Json doc = json_of(*shop, *sheet, analysed->changed_since);
  std::optional<LoggedDose> logged;
  if (!context.log_file.empty()) {
    auto done = log_dose(context, *shop, readings_path, *analysed, doc, issue_slip);
    if (!done) return fail(context, done.problems());
    logged = *std::move(done);
    doc["logged_as"] = logged->entries;
    doc["slip"] = logged->slip ? Json(*logged->slip) : Json(nullptr);
  }
  if (context.json) {
    print(doc);
  } else {
    print(sheets::addition_sheet(
        shop->tank, shop->type(), analysis, *sheet, analysed->changed_since,
        {signer(context), context.shift, program_and_version(), logged ? logged->slip : std::nullopt}));
    if (logged) print(lines_of(*logged));
  }
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
  auto issue_slip = std::make_shared<bool>(false);
  verb->add_flag("--slip", *issue_slip, "issues the best plan as a numbered slip of the log");
  add_tank_and_readings(
      *verb, context, action,
      [issue_slip](const Context& given, const std::string& tank, const std::string& readings) {
        return run(given, tank, readings, *issue_slip);
      });
  add_signature(*verb, context);
  verb->footer(
      "Example: bathwright dose baths/n-07.toml baths/readings/n-07-morning.toml --log shift-log.sqlite\n"
      "With --log the analysis and the plan are logged; additions logged since are told. --slip numbers the plan:\n"
      "while that slip is open, no other is issued for the tank.\n");
}

}  // namespace bathwright::command
