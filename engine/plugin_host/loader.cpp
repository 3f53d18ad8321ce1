#include "loader.hpp"

#include "parking.hpp"

namespace bathwright::plugin_host {

Result<LoadedPlugin> load(SealedCopy plugin) {
  const std::string name = plugin.file.filename().string();
  const auto library = open_library(std::move(plugin.memory), name);
  if (!library) return library.problems();
  LoadedPlugin loaded;
  const auto stated = stated_types(library->entry, loaded.notes, name);
  if (!stated) return stated.problems();
  auto types = read_types(*stated, name);
  if (!types) return types.problems();
  loaded.types = *std::move(types);
  park_after_faults(loaded.types);
  return loaded;
}

}  // namespace bathwright::plugin_host
