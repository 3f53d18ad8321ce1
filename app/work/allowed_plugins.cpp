#include "allowed_plugins.hpp"

#include "shop.hpp"

namespace bathwright::work {

Result<plugin_host::Examined> examine_plugin(const Session& session, const std::filesystem::path& file) {
  return plugin_host::examine(std::filesystem::absolute(file), plugin_places(session));
}

Outcome allow_plugin(const Session& session, const std::filesystem::path& file,
                     const plugin_host::Examined& examined) {
  if (Problems problems = examined.report.problems(); !problems.empty()) return problems;
  const plugin_host::Places places = plugin_places(session);
  if (!examined.built_in) {
    auto list = allowed_plugins(session);
    if (!list) return list.problems();
    plugin_host::AllowList longer = *std::move(list);
    const auto& type = examined.report.types.front();
    longer.add(
        {examined.sha256, std::filesystem::absolute(file).string(), type.id, type.author, type.licence});
    if (Outcome written = longer.write(plugin_host::allow_list_file(places.data)); !written) return written;
  }
  plugin_host::release_from_quarantine(examined.sha256, places);
  return Done{};
}

Result<plugin_host::AllowList> allowed_plugins(const Session& session) {
  return plugin_host::AllowList::read(plugin_host::allow_list_file(plugin_places(session).data));
}

Result<std::vector<plugin_host::Allowed>> forget_plugin(const Session& session, const std::string& which) {
  const auto list_file = plugin_host::allow_list_file(plugin_places(session).data);
  const auto list = allowed_plugins(session);
  if (!list) return list.problems();
  plugin_host::AllowList shorter = *list;
  const std::string path = std::filesystem::absolute(which).string();
  std::vector<plugin_host::Allowed> forgotten;
  for (const plugin_host::Allowed& allowed : list->all()) {
    if (allowed.sha256 != which && allowed.id != which && allowed.file != path) continue;
    shorter.remove(allowed.sha256);
    forgotten.push_back(allowed);
  }
  if (forgotten.empty())
    return Problem{Fault::bad_input, which, "is no plugin you allowed", "the file, id or SHA-256 of one",
                   list_file.string() + " lists them."};
  if (Outcome written = shorter.write(list_file); !written) return written.problems();
  return forgotten;
}

}  // namespace bathwright::work
