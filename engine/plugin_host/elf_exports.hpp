// The symbols a shared object exports, read without running any of it.
#pragma once

#include <bathwright/base/result.hpp>
#include <span>

namespace bathwright::plugin_host {

/// Names of the defined symbols that others can bind to, in the order of the file. Fails on bytes that are no
/// shared object of this machine's word size, or whose tables lie outside them.
Result<std::vector<std::string>> exported_symbols(std::span<const std::byte> file);

}  // namespace bathwright::plugin_host
