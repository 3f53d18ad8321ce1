// Options that several verbs take.
#pragma once

#include "context.hpp"

namespace bathwright::command {

using RunOnReadings =
    std::function<int(const Context&, const std::string& tank, const std::string& readings)>;
/// TANK and READINGS, for verbs that work readings out, and the action that takes them.
void add_tank_and_readings(CLI::App& verb, Context& context, Action& action, RunOnReadings run);

/// --by, --witness, --pin-file and --shift, for verbs that log.
void add_signature(CLI::App& verb, Context& context);

/// --units, for verbs that print figures for people.
void add_units(CLI::App& verb, Context& context);

}  // namespace bathwright::command
