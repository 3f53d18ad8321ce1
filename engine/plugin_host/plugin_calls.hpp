// A plugin's functions as functions of the engine.
#pragma once

#include <bathwright_plugin.h>

#include <bathwright/bath/bath_type.hpp>

namespace bathwright::plugin_host {

using Eval = bw_status (*)(const bw_view*, double*);
using Rate = bw_status (*)(const bw_view*, double*, std::uint32_t);

/// Calls `eval` with the solved bath. Fails with `where` when the plugin knows no value or says that the
/// state is out of range, and as a fault of the plugin on an unknown status, NaN or infinity with BW_OK, or
/// an exception.
std::function<Result<double>(const bath::IndicatorView&)> call_indicator(std::string where, Eval eval);

/// The same for a rate, which gives `count` values.
std::function<Result<std::vector<double>>(const bath::IndicatorView&)> call_rate(std::string where, Rate rate,
                                                                                 std::uint32_t count);

}  // namespace bathwright::plugin_host
