// A plugin's entry and functions put to use in every way the interface allows. Only for a process that may be
// ruined by it.
#pragma once

#include <functional>

#include <bathwright/plugin_host/probe_report.hpp>

#include "host_side.hpp"

namespace bathwright::plugin_host {

/// Told what comes next, as the end of a sentence.
using Announce = std::function<void(const std::string& during)>;

/// Index past the end, the same index twice, a host struct as of version 1.0 and a longer one.
std::vector<Check> exercise_entry(Entry entry, const std::vector<const bw_bath_type*>& types,
                                  const std::string& name, const Announce& announce);

/// Every function of a bath type, whose tables have passed, with usual, zero, huge and unknown views and one
/// that is not solved: a status and finite numbers inside the buffer, the same bits twice and from four
/// threads at once, in time.
std::vector<Check> exercise_functions(const bw_bath_type& stated, const bath::BathType& type,
                                      const std::string& name, const Announce& announce);

}  // namespace bathwright::plugin_host
