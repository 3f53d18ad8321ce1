// The arrows of the architecture, read from the sources themselves. The compiler already hides the headers of
// a part that USES does not name; this also sees cycles, printing, and libraries that leak through public
// headers.
#pragma once

#include <cstddef>
#include <filesystem>
#include <string>
#include <vector>

namespace house {

struct Inspection {
  std::size_t sources_read = 0;
  std::vector<std::string> faults;  ///< "path:line: what is wrong", empty when the tree keeps the rules
};

/// Reads every C and C++ source under root/engine, root/app and root/plugins and reports each line that
/// breaks one of these rules:
///   engine   a part includes, and names in USES, only parts above it in engine/CMakeLists.txt, and includes
///            only what its USES reach; public headers name no library but the standard one; nothing prints
///   plugins  include bathwright_plugin.h, their own files and the standard library
///   all      a quoted include stays inside its engine part, inside app/ or inside its plugin
[[nodiscard]] Inspection inspect_includes(const std::filesystem::path& root);

}  // namespace house
