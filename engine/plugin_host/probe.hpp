// A plugin tried in a child process, whatever it does there.
#pragma once

#include <bathwright/plugin_host/probe_report.hpp>

#include "sealed_copy.hpp"

namespace bathwright::plugin_host {

/// Runs `program` (bathwright_probe) on the sealed copy and waits for its report, at most probe_wall_s. Where
/// the child ends without one, the report has the check "process: survives" with a problem of its own for an
/// exit, a signal, a limit reached, no answer in time, and a report that cannot be read; each says what the
/// plugin was at. Any thread.
[[nodiscard]] ProbeReport probe(const SealedCopy& plugin, const std::filesystem::path& program);

}  // namespace bathwright::plugin_host
