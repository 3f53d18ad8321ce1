// A bath type written in TOML (plugins/described/README.md lists every key). It runs no code. Not for: bath
// types with logic of their own, which are compiled plugins (plugin_host/registry.hpp).
#pragma once

#include <bathwright/bath/bath_type.hpp>
#include <string>
#include <string_view>

namespace bathwright::described {

/// Reads a bath type from `text`; `name` stands for the file in messages. Fails with every problem, each with
/// its line and in the order of the lines: what is no TOML; unknown, missing or repeated keys; and whatever
/// plugin_host::read_bath_type refuses. Its indicators fail, with the reason, where something they need is
/// not known, where what they divide by is not above zero, and on the logarithm of what is not.
Result<bath::BathType> read_bath_type_text(std::string_view name, std::string_view text);

/// The same for the file at `path`, of at most 1 MiB, which must be named <id>.bathtype.toml.
Result<bath::BathType> read_bath_type_file(const std::string& path);

}  // namespace bathwright::described
