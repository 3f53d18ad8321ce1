// What an entry must satisfy before it may be logged, as far as that can be told without the log itself.
#pragma once

#include <string_view>

#include "bathwright/base/result.hpp"
#include "bathwright/logbook/entry.hpp"

namespace bathwright::logbook {

enum class Presence { required, optional };

/// Adds to `problems` what is wrong with a short text: too long, not UTF-8, control characters, missing.
void check_text(std::string_view field, std::string_view text, Presence presence, Problems& problems);

/// Everything wrong with `entry`, in the order of its fields; empty when it may be logged.
[[nodiscard]] Problems check(const NewEntry& entry);

}  // namespace bathwright::logbook
