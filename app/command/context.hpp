// What every verb needs: the options that stand for all of them, how an answer is printed, how a run ends.
#pragma once

#include <bathwright/sheets/shown_units.hpp>
#include <bathwright/sheets/text.hpp>
#include <functional>

#include "work/documents.hpp"
#include "work/session.hpp"

namespace CLI {
class App;
}

namespace bathwright::command {

using namespace work;  // what the verbs put into words and options

/// The exit status of the program.
enum Exit : int {
  all_well = 0,
  finding = 1,     ///< out of a window, a limit met, a log that does not verify
  bad_input = 2,   ///< a file or option that cannot be used as it stands
  unfinished = 3,  ///< no convergence, a log or file that could not be used
};

struct Context : work::Session {
  bool json = false;
  sheets::UnitNames units;  ///< of what is printed for people
  std::string pin_file;     ///< empty: PINs are asked for at the terminal
};

void print(const sheets::Lines& lines);
void print(const Json& document);

/// Problems to standard error, one a line; with --json also as a document. Returns the exit status.
int fail(const Context& context, const Problems& problems);

/// Each adds its verb; `action` is set to what runs when the verb was given.
using Action = std::function<int()>;
void add_analyse(CLI::App& program, Context& context, Action& action);
void add_dose(CLI::App& program, Context& context, Action& action);
void add_fit(CLI::App& program, Context& context, Action& action);
void add_forecast(CLI::App& program, Context& context, Action& action);
void add_learn(CLI::App& program, Context& context, Action& action);
void add_log(CLI::App& program, Context& context, Action& action);
void add_path(CLI::App& program, Context& context, Action& action);
void add_plant(CLI::App& program, Context& context, Action& action);
void add_plugins(CLI::App& program, Context& context, Action& action);
void add_solution(CLI::App& program, Context& context, Action& action);
void add_sources(CLI::App& program, Context& context, Action& action);
void add_tank(CLI::App& program, Context& context, Action& action);
void add_trends(CLI::App& program, Context& context, Action& action);

}  // namespace bathwright::command
