// What the host offers a plugin while it loads (bw_host), and the library opened and asked for its bath
// types.
#pragma once

#include <bathwright_plugin.h>

#include <bathwright/bath/bath_type.hpp>

#include "descriptor.hpp"

namespace bathwright::plugin_host {

using Notes = std::vector<std::string>;  ///< what a plugin had to say
using Entry = decltype(&bw_entry_1);

/// The callbacks; notes go into `notes`, which must outlive every call.
[[nodiscard]] bw_host host_for(Notes& notes);

/// Loads the library in `memory` and finds its entry. Every symbol is bound at once, so that a missing one
/// shows here and not in the middle of a calculation. A loaded library is never closed, for the copied types
/// keep its functions. Its descriptor stays open as well: the loader knows libraries by name, and the next
/// one to get this number would be taken for the same. `name` stands in messages.
struct Library {
  Entry entry;
};
Result<Library> open_library(Descriptor memory, const std::string& name);

/// What the entry gives for an index; an exception is a status of its own.
struct Answer {
  bw_status status = BW_REFUSED;
  const bw_bath_type* type = nullptr;
  std::string thrown;
};
[[nodiscard]] Answer ask(Entry entry, const bw_host& host, std::uint32_t index);

/// Every bath type of the library as it states it, in its order: at least one. `name` stands in messages.
Result<std::vector<const bw_bath_type*>> stated_types(Entry entry, Notes& notes, const std::string& name);

/// Each checked and copied; fails with the problems of all.
Result<std::vector<bath::BathType>> read_types(const std::vector<const bw_bath_type*>& stated,
                                               const std::string& name);

}  // namespace bathwright::plugin_host
