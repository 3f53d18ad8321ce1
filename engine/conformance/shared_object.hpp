// What a shared object says of itself to the loader, read without running any of it.
#pragma once

#include <bathwright/conformance/check.hpp>
#include <filesystem>

namespace bathwright::conformance {

struct SharedObject {
  std::vector<std::string> exported, imported;  ///< dynamic symbols, in the order of the file
  bool text_relocations = false;                ///< its code is changed while it is loaded
  bool bound_at_once = false;                   ///< every symbol is looked up while it is loaded
};

/// Fails on what is no shared object with a table of dynamic symbols.
Result<SharedObject> read_shared_object(const std::filesystem::path& file);

/// Exports bw_entry_1 alone, has no text relocations, is bound at once, calls nothing that reaches beyond its
/// own results (rules R1 and [calc] of the interface). `where` names the file in messages.
[[nodiscard]] std::vector<Check> check_shared_object(const SharedObject& object, const std::string& where);

}  // namespace bathwright::conformance
