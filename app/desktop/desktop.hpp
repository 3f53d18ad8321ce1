// The desktop: the window over a shop's folder of tanks.
#pragma once

#include <bathwright/base/result.hpp>
#include <filesystem>

#include "work/session.hpp"

namespace bathwright::desktop {

/// Opens the window and works until it is closed. `shop`: a folder of tank files; empty: the one of last
/// time, else the first start. Fails (io) where no window can be opened, and says what to do at the command
/// line instead.
Outcome run(const work::Session& session, const std::filesystem::path& shop);

}  // namespace bathwright::desktop
