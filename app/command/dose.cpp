// bathwright dose TANK READINGS: the addition sheet.
#include <CLI/CLI.hpp>
#include <algorithm>
#include <bathwright/sheets/analysis_sheet.hpp>

#include "printed.hpp"
#include "shared_options.hpp"
#include "work/dose_document.hpp"
#include "work/own_plan.hpp"
#include "work/planning.hpp"
#include "work/slip.hpp"

namespace bathwright::command {
namespace {

struct Options {
  bool issue_slip = false;
  bool take_out = false;
  std::string own_plan;  ///< file; empty: the planner's
  int samples = dosing::Sampling{}.samples;
  PrintedFiles printed;
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
  dosing::Request request = request_for(analysis, options.samples);
  request.bring_down = options.take_out;
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

  Json doc = dose_document(*shop, *sheet, analysed->changed_since);
  doc["stops"] = stops;
  std::optional<LoggedDose> logged;
  if (!context.log_file.empty()) {
    auto done = log_dose(context, *shop, readings_path, *analysed, doc, options.issue_slip);
    if (!done) return fail(context, done.problems());
    logged = *std::move(done);
    doc["logged_as"] = logged->entries;
    doc["slip"] = logged->slip ? Json(*logged->slip) : Json(nullptr);
  }
  const sheets::Page page =
      page_of(context, *shop, {*analysed, *sheet, stops, *history, logged, sheets::Units(context.units)});
  if (context.json) {
    print(doc);
  } else {
    print(sheets::text_of(page));
    if (logged) print(lines_of(*logged));
  }
  if (Outcome written = write_printed(options.printed, page); !written)
    return fail(context, written.problems());
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
  add_printed_files(*verb, options->printed);
  add_tank_and_readings(
      *verb, context, action,
      [options](const Context& given, const std::string& tank, const std::string& readings) {
        return run(given, tank, readings, *options);
      });
  add_signature(*verb, context);
  add_units(*verb, context);
  verb->footer(
      "Example: bathwright dose baths/n-07.toml baths/readings/n-07-morning.toml --log shift-log.sqlite\n"
      "With --log the analysis and the plan are logged; additions logged since are told. --slip numbers the plan:\n"
      "while that slip is open, no other is issued for the tank.\n");
}

}  // namespace bathwright::command
