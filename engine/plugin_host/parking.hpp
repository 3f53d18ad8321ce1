// A plugin whose functions fail again and again is left alone.
#pragma once

#include <bathwright/bath/bath_type.hpp>

namespace bathwright::plugin_host {

inline constexpr int most_faults = 3;
inline constexpr double longest_call_s = 0.002;  ///< of processor time

/// Counts the faults of one plugin's functions, over all its bath types: an exception, an unknown status,
/// BW_OK without a finite number, more than longest_call_s. From the third on none of them is called any
/// more; what they were asked for is then a problem that says so. A late answer is still given.
void park_after_faults(std::vector<bath::BathType>& types);

/// Processor time of this thread, s; a busy machine does not make a plugin slow.
[[nodiscard]] double thread_time_s();

}  // namespace bathwright::plugin_host
