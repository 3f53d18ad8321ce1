// What a plugin may use and ask for while it is probed.
#pragma once

namespace bathwright::plugin_host {

/// Limits this process for good: 2 s of processor time, 512 MiB of memory, no byte written to a file, no core
/// dump; and lets it ask the system only for what loading and calculating need, so that it can write or make
/// no file, reach no network and start or signal no other process. False where that cannot be had. Built with
/// a sanitizer, whose run-time needs more, only the first, third and fourth hold.
[[nodiscard]] bool limit_this_process();

}  // namespace bathwright::plugin_host
