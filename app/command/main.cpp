// The program `bathwright`: options for all verbs, and which verb runs.
#include <CLI/CLI.hpp>
#include <bathwright/base/nearest.hpp>
#include <cstdio>

#include "context.hpp"
#include "desktop/desktop.hpp"
#include "log/pins.hpp"

using namespace bathwright::command;

namespace {

/// "--json  print one JSON document instead of text", for the options that stand for every verb.
std::string common_options(const CLI::App& program) {
  std::string text = "\nEvery verb takes:\n";
  for (const CLI::Option* option : program.get_options())
    if (option != program.get_help_ptr() && option != program.get_version_ptr())
      text += "  " + option->get_name() + (option->get_items_expected_max() > 0 ? " TEXT" : "") + "  " +
              option->get_description() + "\n";
  return text;
}

void end_help_with(CLI::App& verb, const std::string& text) {
  verb.footer(verb.get_footer() + text);
  for (CLI::App* below : verb.get_subcommands({})) end_help_with(*below, text);
}

/// What to say of the first word that is no verb; "" where the fault is another.
std::string unknown_verb(const CLI::App& program) {
  const CLI::App* verb = &program;
  while (!verb->get_subcommands().empty()) verb = verb->get_subcommands().front();
  std::vector<std::string> verbs;
  for (const CLI::App* below : verb->get_subcommands({})) verbs.push_back(below->get_name());
  const std::vector<std::string> left = program.remaining(true);
  if (verbs.empty() || left.empty() || left.front().starts_with('-')) return "";
  const auto close = bathwright::nearest(left.front(), verbs);
  return '"' + left.front() + "\" is not a verb." + (close ? " Did you mean " + *close + "?" : "") +
         " bathwright --help lists them.";
}

}  // namespace

int main(int argc, char** argv) {
  CLI::App program{
      "Bathwright: from the readings of a plating tank to an addition sheet that is safe on the way.",
      "bathwright"};
  Context context;
  context.pin = Pins(context);
  Action action;
  program.set_version_flag("--version", program_and_version());
  program.add_flag("--json", context.json, "print one JSON document instead of text");
  program.add_option("--log", context.log_file, "the shift log to read and write");
  program.add_option("--plugins", context.plugin_folders, "further folders with bath types")
      ->allow_extra_args(false);
  std::string shop;
  program.add_option("--shop", shop, "without a verb: the folder of tank files that the window opens");
  program.require_subcommand(0, 1);
  program.fallthrough();
  add_analyse(program, context, action);
  add_dose(program, context, action);
  add_tank(program, context, action);
  add_path(program, context, action);
  add_forecast(program, context, action);
  add_learn(program, context, action);
  add_log(program, context, action);
  add_trends(program, context, action);
  add_plant(program, context, action);
  add_solution(program, context, action);
  add_fit(program, context, action);
  add_sources(program, context, action);
  add_plugins(program, context, action);
  for (CLI::App* verb : program.get_subcommands({})) end_help_with(*verb, common_options(program));
  program.footer(
      "Exit status: 0 all is well, 1 a finding, 2 bad input, 3 could not finish.\n"
      "Each verb has --help with an example: bathwright dose --help");
  try {
    program.parse(argc, argv);
  } catch (const CLI::ParseError& error) {
    if (const std::string words = unknown_verb(program); !words.empty() && error.get_exit_code() != 0) {
      std::fprintf(stderr, "%s\n", words.c_str());
      return Exit::bad_input;
    }
    return program.exit(error) == 0 ? Exit::all_well : Exit::bad_input;
  }
  if (!action) {
    const auto closed = bathwright::desktop::run(context, shop);
    return closed ? Exit::all_well : fail(context, closed.problems());
  }
  return action();
}
