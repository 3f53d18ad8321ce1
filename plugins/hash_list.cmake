# Writes OUT, a source with the SHA-256 of each plugin in PLUGINS (paths joined by |).
string(REPLACE "|" ";" files "${PLUGINS}")
set(rows "")
foreach(file IN LISTS files)
  file(SHA256 "${file}" hash)
  get_filename_component(name "${file}" NAME)
  string(APPEND rows "    \"${hash}\",  // ${name}\n")
endforeach()
list(LENGTH files count)
file(WRITE "${OUT}" "// Written by hash_list.cmake at build time.
#include <array>
#include <bathwright/plugin_host/registry.hpp>

namespace bathwright::plugin_host {
namespace {
constexpr std::array<std::string_view, ${count}> hashes = {
${rows}};
}

Places built_in_places() {
  Places places;
  places.folders = program_folders();
  places.probe = probe_program();
  places.allowed = hashes;
  return places;
}
}  // namespace bathwright::plugin_host
")
