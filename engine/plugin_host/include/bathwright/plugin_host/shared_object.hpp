// What a shared object says of itself to the loader, read without running any of it.
#pragma once

#include <bathwright/base/result.hpp>
#include <cstddef>
#include <span>

namespace bathwright::plugin_host {

struct SharedObject {
  std::vector<std::string> exported, imported;  ///< dynamic symbols, in the order of the file
  bool text_relocations = false;                ///< its code is changed while it is loaded
  bool bound_at_once = false;                   ///< every symbol is looked up while it is loaded
};

/// Fails on bytes that are no shared object of this machine's word size, or whose table of symbols cannot be
/// read to its end.
Result<SharedObject> read_shared_object(std::span<const std::byte> file);

}  // namespace bathwright::plugin_host
