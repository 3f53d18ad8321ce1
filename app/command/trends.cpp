// bathwright trends TANK: what the analyses of a tank say together.
#include <CLI/CLI.hpp>
#include <bathwright/charts/page_file.hpp>
#include <bathwright/shopfiles/tank_file.hpp>

#include "printed.hpp"
#include "shared_options.hpp"
#include "work/shop.hpp"
#include "work/trends.hpp"

namespace bathwright::command {
namespace {

struct Options {
  std::string tank, quantity, chart;
  PrintedFiles printed;
};

int run(const Context& context, const Options& options) {
  const auto tank = shopfiles::read_tank(options.tank, matter::StockCatalogue::built_in());
  if (!tank) return fail(context, tank.problems());
  const auto trends = trends_of(context, *tank, options.quantity);
  if (!trends) return fail(context, trends.problems());
  // What a level is told as in moles or equivalents, the bath type knows.
  const sheets::Units units(context.units);
  std::optional<Shop> shop;
  if (!units.note().empty()) {
    auto opened = open_shop(context, options.tank);
    if (!opened) return fail(context, opened.problems());
    shop = *std::move(opened);
  }
  const bath::BathType* type = shop ? &shop->type() : nullptr;
  const sheets::Page page = sheets::trends_page(*trends, type, units);
  if (context.json)
    print(trends_document(*trends));
  else
    print(sheets::text_of(page));
  if (Outcome written = write_printed(options.printed, page); !written)
    return fail(context, written.problems());
  if (!options.chart.empty())
    if (Outcome written = charts::write_page(options.chart, sheets::trends_charts(*trends, type, units));
        !written)
      return fail(context, written.problems());
  return sheets::tells_something(*trends) ? Exit::finding : Exit::all_well;
}

}  // namespace

void add_trends(CLI::App& program, Context& context, Action& action) {
  auto* verb = program.add_subcommand("trends", "what the analyses of a tank say together: control charts")
                   ->fallthrough();
  auto options = std::make_shared<Options>();
  verb->add_option("TANK", options->tank, "the tank, TOML")->required()->check(CLI::ExistingFile);
  verb->add_option("--quantity", options->quantity,
                   "this one alone, as NiSO4.6H2O; else all the tank aims at");
  verb->add_option("--chart", options->chart, "also draw it: FILE.svg, FILE.png or FILE.pdf");
  add_printed_files(*verb, options->printed);
  add_units(*verb, context);
  verb->footer(
      "Example: bathwright trends baths/n-07.toml --log shift-log.sqlite --chart trends.png\n"
      "Exit status 1 where a rule is tripped.\n");
  verb->callback(
      [&context, &action, options] { action = [&context, options] { return run(context, *options); }; });
}

}  // namespace bathwright::command
