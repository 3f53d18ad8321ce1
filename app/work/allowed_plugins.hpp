// Letting a bath type run that did not come with the program, and taking that back. Read next: shop.hpp for
// where bath types are looked for.
#pragma once

#include <bathwright/plugin_host/allow_list.hpp>
#include <bathwright/plugin_host/registry.hpp>

#include "session.hpp"

namespace bathwright::work {

/// What a person reads before saying yes.
inline constexpr const char* what_allowing_means =
    "A bath type is a program. Allowed, it runs whenever you start Bathwright, with your own rights: it can read and "
    "write what you can. Its hash shows that it is the same file tomorrow, not that it is good. Allow it only if you "
    "would let its author work on your computer.";

/// A plugin file tried in a child process, to be shown before it is allowed. Fails where it cannot be read;
/// its faults are in the report.
Result<plugin_host::Examined> examine_plugin(const Session& session, const std::filesystem::path& file);

/// Lets the file that was examined run, and no other of its name; ends its quarantine. Fails with the faults
/// of the report, and where the list cannot be kept.
Outcome allow_plugin(const Session& session, const std::filesystem::path& file,
                     const plugin_host::Examined& examined);

/// What the user allowed. Fails where the list cannot be trusted or read.
Result<plugin_host::AllowList> allowed_plugins(const Session& session);

/// Takes back what was allowed by file, id or SHA-256, and says what that was. Fails (bad_input) where it is
/// nothing.
Result<std::vector<plugin_host::Allowed>> forget_plugin(const Session& session, const std::string& which);

}  // namespace bathwright::work
