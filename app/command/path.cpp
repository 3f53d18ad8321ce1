// bathwright path TANK --add ...: free ions, pH and headroom along an addition.
#include <CLI/CLI.hpp>
#include <bathwright/sheets/path_sheet.hpp>
#include <bathwright/units/read.hpp>

#include "context.hpp"
#include "shared_options.hpp"
#include "work/documents.hpp"
#include "work/tank_state.hpp"
#include "work/wanted.hpp"

namespace bathwright::command {
namespace {

struct Portion {
  sheets::PathAddition addition;
  dosing::Wanted wanted;
  bath::Brings brings;
};

bool is_amount(const std::string& text) { return units::read_mass(text, "") || units::read_volume(text, ""); }

/// "12 kg nickel-sulfate" or "2 L sulfuric-acid", of a chemical on the tank's shelf or in the catalogue.
Result<Portion> read_portion(const std::string& text, const Shop& shop) {
  const std::string where = "--add \"" + text + "\"", example = "\"12 kg nickel-sulfate\"";
  if (is_amount(text)) return Problem{Fault::bad_input, where, "the chemical is missing", example, ""};
  const std::size_t last_space = text.find_last_of(' ');
  if (last_space == std::string::npos)
    return Problem{Fault::bad_input, where, "the amount is missing", example, ""};
  const std::string amount = text.substr(0, last_space), id = text.substr(last_space + 1);
  auto read = read_wanted(shop, amount, id, where);
  if (!read) return read.problems();
  return Portion{{id, read->wanted.stock.name, read->amount, read->unit, amount}, read->wanted, {}};
}

/// The same additions as any other plan: what is refused is refused here too. What is left are the gases that
/// stop a step.
Result<std::vector<std::string>> check(const Shop& shop, const bath::TankState& start,
                                       const std::vector<Portion>& portions) {
  std::vector<dosing::Wanted> wanted;
  for (const Portion& portion : portions) wanted.push_back(portion.wanted);
  const auto sheet = dosing::check_plan(shop.tank, shop.chemistry, start, wanted);
  if (!sheet) return sheet.problems();
  if (!sheet->refused.empty()) return problems_of(sheet->refused, "--add");
  std::vector<std::string> findings;
  for (const dosing::Step& step : sheet->plans.front().steps)
    for (const dosing::Check& check : step.checks)
      if (check.interlock && !check.ok && check.stops)
        findings.push_back("with " + step.name + ", " + check.name + ": " + check.detail);
  return findings;
}

Result<std::vector<sheets::PathPoint>> walk(const Shop& shop, bath::TankState state,
                                            const std::vector<Portion>& portions, int steps) {
  std::vector<sheets::PathPoint> points;
  sheets::PathPoint here;
  const auto stop_here = [&]() -> Outcome {
    auto view = shop.chemistry.quick_view(state);
    if (!view) return view.problems();
    here.view = *std::move(view);
    points.push_back(here);
    return Done{};
  };
  if (Outcome ok = stop_here(); !ok) return ok.problems();
  for (std::size_t i = 0; i < portions.size(); ++i) {
    here.addition = i;
    const double step_kg = portions[i].wanted.kg / steps;
    for (int step = 1; step <= steps; ++step) {
      state = bath::Chemistry::after(std::move(state), portions[i].brings, step_kg);
      here.added = portions[i].addition.amount * step / steps;
      here.total_kg += step_kg;
      if (Outcome ok = stop_here(); !ok) return ok.problems();
    }
  }
  return points;
}

Json json_of(const Shop& shop, const std::vector<sheets::PathAddition>& additions,
             const std::vector<sheets::PathPoint>& points, const sheets::StateRead& start,
             const std::vector<std::string>& findings) {
  Json doc = document(start.changed_since);
  doc["tank"] = shop.tank.name;
  doc["state_from"] = start.from;
  doc["headroom_unit"] =
      "log10 of the distance from saturation at the working temperature, positive below it";
  doc["points"] = Json::array();
  for (const auto& point : points)
    doc["points"].push_back({{"added", point.total_kg},
                             {"chemical", point.addition ? additions[*point.addition].chemical : ""},
                             {"pH", point.view.pH},
                             {"log10_activity", log10_activities(point.view)},
                             {"free_molality", free_molalities(point.view)},
                             {"headroom", headroom_log10(point.view)},
                             {"concentrations", concentrations(shop.type(), point.view)},
                             {"volume_L", point.view.volume_L}});
  doc["findings"] = findings;
  return doc;
}

struct Options {
  std::string tank, readings;
  std::vector<std::string> additions;
  int steps = 10;
};

int run(const Context& context, const Options& options) {
  const auto shop = open_shop(context, options.tank);
  if (!shop) return fail(context, shop.problems());
  std::vector<Portion> portions;
  Problems problems;
  for (const std::string& text : options.additions) {
    auto portion = read_portion(text, *shop);
    if (portion)
      portions.push_back(*std::move(portion));
    else
      problems.insert(problems.end(), portion.problems().begin(), portion.problems().end());
  }
  if (!problems.empty()) return fail(context, problems);
  auto start = starting_state(context, *shop, options.readings);
  if (!start) return fail(context, start.problems());
  const auto gases = check(*shop, start->state, portions);
  if (!gases) return fail(context, gases.problems());
  for (Portion& portion : portions) {
    auto brings = shop->chemistry.brings(portion.wanted.stock);
    if (!brings) return fail(context, brings.problems());
    portion.brings = *std::move(brings);
  }
  const auto points = walk(*shop, start->state, portions, options.steps);
  if (!points) return fail(context, points.problems());
  std::vector<sheets::PathAddition> additions;
  for (const Portion& portion : portions) additions.push_back(portion.addition);
  const sheets::Units units(context.json ? sheets::UnitNames() : context.units);
  auto findings = sheets::path_findings(shop->tank, shop->type(), additions, *points, units);
  findings.insert(findings.begin(), gases->begin(), gases->end());
  if (context.json)
    print(json_of(*shop, additions, *points, start->read, findings));
  else
    print(sheets::path_sheet(shop->tank, additions, *points, start->read.changed_since, findings, units));
  return findings.empty() ? Exit::all_well : Exit::finding;
}

}  // namespace

void add_path(CLI::App& program, Context& context, Action& action) {
  auto* verb = program.add_subcommand("path", "free ions, pH and headroom along an addition")->fallthrough();
  auto options = std::make_shared<Options>();
  verb->add_option("TANK", options->tank, "the tank, TOML")->required()->check(CLI::ExistingFile);
  verb->add_option("--add", options->additions, "amount and chemical, once for each, in their order")
      ->required();
  verb->add_option("--steps", options->steps, "points for each addition")->check(CLI::Range(1, 1000));
  verb->add_option("--readings", options->readings, "start from these; else the last analysis, else the aims")
      ->check(CLI::ExistingFile);
  add_units(*verb, context);
  verb->footer(
      "Example: bathwright path baths/n-07.toml --add \"4 kg boric-acid\" --add \"12 kg nickel-sulfate\"\n");
  verb->callback(
      [&context, &action, options] { action = [&context, options] { return run(context, *options); }; });
}

}  // namespace bathwright::command
