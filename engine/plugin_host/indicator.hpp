// A plugin's function as an indicator of the engine.
#pragma once

#include <bathwright_plugin.h>

#include <bathwright/bath/bath_type.hpp>

namespace bathwright::plugin_host {

/// Calls `eval` with the solved bath. Fails with `where` when the plugin knows no value or says that the
/// state is out of range, and as a fault of the plugin on an unknown status, NaN or infinity with BW_OK, or
/// an exception.
std::function<Result<double>(const bath::IndicatorView&)> call_indicator(std::string where,
                                                                         bw_status (*eval)(const bw_view*,
                                                                                           double*));

}  // namespace bathwright::plugin_host
