// The work of bathwright_probe: a plugin loaded, asked and called in a process that it may ruin.
#pragma once

#include <string>

namespace bathwright::plugin_host {

/// Loads the plugin in `memory`, puts it through every check and writes the report into `report`
/// (probe_pipe.hpp). Limits this process for good before any code of the plugin runs. `name` stands in the
/// messages. Returns the exit status.
int run_probe(int memory, int report, const std::string& name);

}  // namespace bathwright::plugin_host
