// bathwright path TANK --add ...: free ions, pH and headroom along an addition.
#include <bathwright/base/nearest.hpp>
#include <bathwright/sheets/path_sheet.hpp>
#include <bathwright/units/read.hpp>

#include "context.hpp"
#include "tank_state.hpp"
#include "view_json.hpp"

namespace bathwright::command {
namespace {

struct Portion {
  std::string chemical;
  double kg = 0;
  bath::Brings brings;
};

/// "12 kg nickel-sulfate" or "2 L sulfuric-acid", of a chemical on the tank's shelf or in the catalogue.
Result<Portion> read_portion(const std::string& text, const Shop& shop) {
  const std::string where = "--add \"" + text + "\"";
  const std::size_t last_space = text.find_last_of(' ');
  if (last_space == std::string::npos)
    return Problem{Fault::bad_input, where, "an amount or a chemical is missing", "\"12 kg nickel-sulfate\"",
                   ""};
  const std::string amount = text.substr(0, last_space), id = text.substr(last_space + 1);
  const auto& catalogue = matter::StockCatalogue::built_in();
  const bath::ShelfItem* item = shop.tank.on_shelf(id);
  const matter::StockChemical* stock = item ? &item->stock : catalogue.find(id);
  if (!stock) {
    const auto close = nearest(id, catalogue.ids());
    return Problem{Fault::bad_input, where, id + " is not on the shelf or in the catalogue",
                   "the id of a chemical", close ? "Did you mean " + *close + "?" : ""};
  }
  auto brings = shop.chemistry.brings(*stock);
  if (!brings) return brings.problems();
  const auto mass = units::read_mass(amount, where);
  if (mass) return Portion{id, mass->v, *std::move(brings)};
  const auto volume = units::read_volume(amount, where);
  if (!stock->liquid || !volume) return mass.problems();
  return Portion{id, volume->v * stock->kg_per_L, *std::move(brings)};
}

Result<std::vector<sheets::PathPoint>> walk(const Shop& shop, bath::TankState state,
                                            const std::vector<Portion>& portions, int steps) {
  std::vector<sheets::PathPoint> points;
  double total_kg = 0;
  const auto stop_here = [&](const std::string& chemical, double added_kg) -> Outcome {
    auto view = shop.chemistry.quick_view(state);
    if (!view) return view.problems();
    points.push_back({chemical, added_kg, total_kg, *std::move(view)});
    return Done{};
  };
  if (Outcome ok = stop_here("", 0); !ok) return ok.problems();
  for (const Portion& portion : portions) {
    const double step_kg = portion.kg / steps;
    for (int step = 1; step <= steps; ++step) {
      state = bath::Chemistry::after(std::move(state), portion.brings, step_kg);
      total_kg += step_kg;
      if (Outcome ok = stop_here(portion.chemical, step * step_kg); !ok) return ok.problems();
    }
  }
  return points;
}

Json json_of(const Shop& shop, const std::vector<sheets::PathPoint>& points, const std::string& from) {
  Json doc = document({});
  doc["tank"] = shop.tank.name;
  doc["state_from"] = from;
  doc["headroom_unit"] =
      "log10 of the distance from saturation at the working temperature, positive below it";
  doc["points"] = Json::array();
  for (const auto& point : points)
    doc["points"].push_back({{"added", point.total_kg},
                             {"chemical", point.chemical},
                             {"pH", point.view.pH},
                             {"log10_activity", log10_activities(point.view)},
                             {"free_molality", free_molalities(point.view)},
                             {"headroom", headroom_log10(point.view)},
                             {"concentrations", concentrations(shop.type(), point.view)},
                             {"volume_L", point.view.volume_L}});
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
  const auto points = walk(*shop, start->state, portions, options.steps);
  if (!points) return fail(context, points.problems());
  if (context.json)
    print(json_of(*shop, *points, start->from));
  else
    print(sheets::path_sheet(shop->tank, *points));
  for (const auto& point : *points)
    if (const auto nearest = sheets::nearest_solid(point.view); nearest && nearest->log10_room < 0)
      return Exit::finding;
  return Exit::all_well;
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
  verb->footer(
      "Example: bathwright path baths/n-07.toml --add \"4 kg boric-acid\" --add \"12 kg nickel-sulfate\"\n");
  verb->callback(
      [&context, &action, options] { action = [&context, options] { return run(context, *options); }; });
}

}  // namespace bathwright::command
