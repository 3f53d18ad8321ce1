// The program `bathwright`: options for all verbs, and which verb runs.
#include <cstdio>

#include "context.hpp"

using namespace bathwright::command;

int main(int argc, char** argv) {
  CLI::App program{
      "Bathwright: from the readings of a plating tank to an addition sheet that is safe on the way.",
      "bathwright"};
  Context context;
  Action action;
  program.set_version_flag("--version", program_and_version());
  program.add_flag("--json", context.json, "print one JSON document instead of text");
  program.add_option("--log", context.log_file, "the shift log to read and write");
  program.add_option("--plugins", context.plugin_folders, "further folders with bath types")
      ->allow_extra_args(false);
  program.require_subcommand(0, 1);
  program.fallthrough();
  add_analyse(program, context, action);
  add_dose(program, context, action);
  add_tank(program, context, action);
  add_path(program, context, action);
  add_log(program, context, action);
  add_solution(program, context, action);
  add_sources(program, context, action);
  add_plugins(program, context, action);
  program.footer(
      "Exit status: 0 all is well, 1 a finding, 2 bad input, 3 could not finish.\n"
      "Each verb has --help with an example: bathwright dose --help");
  try {
    program.parse(argc, argv);
  } catch (const CLI::ParseError& error) {
    return program.exit(error) == 0 ? Exit::all_well : Exit::bad_input;
  }
  if (!action) {
    std::printf(
        "Bathwright works at the command line in this version; the window comes in a later one.\n\n"
        "This shift:      bathwright dose TANK READINGS\n"
        "Every verb:      bathwright --help\n");
    return Exit::all_well;
  }
  return action();
}
