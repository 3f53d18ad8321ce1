// The verb below `plugins` that judges bath types.
#pragma once

#include "context.hpp"

namespace bathwright::command {

void add_plugins_check(CLI::App& plugins, Context& context, Action& action);

}  // namespace bathwright::command
