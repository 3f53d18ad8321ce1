// The desktop: the window over a folder of tanks.
#pragma once

#include <filesystem>

namespace bathwright::command {
struct Context;
}

namespace bathwright::desktop {

/// Opens the window and works until it is closed. Returns the exit status; where no window can be opened it
/// says what to do at the command line instead.
int run(const command::Context& context, const std::filesystem::path& folder);

}  // namespace bathwright::desktop
