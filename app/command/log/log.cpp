// bathwright log: the shift log. Its verbs are in the files beside this one.
#include <CLI/CLI.hpp>
#include "verbs.hpp"

namespace bathwright::command {

void add_log(CLI::App& program, Context& context, Action& action) {
  auto* verb = program.add_subcommand("log", "the shift log")->require_subcommand(1)->fallthrough();
  verb->footer(
      "Examples:\n"
      "  bathwright log add addition --tank \"N-07 Watts nickel\" --note \"12 kg boric acid\" --by \"M. Okafor\"\n"
      "  bathwright log list --tank \"N-07 Watts nickel\" --last 20\n"
      "  bathwright log hand-over baths/n-07.toml\n"
      "  bathwright log verify --against hashes.txt\n"
      "--tank takes the name that stands in the tank's file.\n"
      "Without --log the log is shift-log.sqlite in the user's data folder.\n");
  log_verb::add_reading(*verb, context, action);
  log_verb::add_writing(*verb, context, action);
  log_verb::add_import(*verb, context, action);
  log_verb::add_people(*verb, context, action);
  log_verb::add_shifts(*verb, context, action);
}

}  // namespace bathwright::command
