// Whether a plugin's file asks more of the program than a bath type may.
#pragma once

#include <bathwright/conformance/check.hpp>
#include <bathwright/plugin_host/shared_object.hpp>

namespace bathwright::conformance {

/// No text relocations, bound at once, nothing called that reaches beyond its own results (rules R1 and
/// [calc] of the interface). What it exports is for the probe to see. `where` names the file in messages.
[[nodiscard]] std::vector<Check> check_shared_object(const plugin_host::SharedObject& object,
                                                     const std::string& where);

}  // namespace bathwright::conformance
