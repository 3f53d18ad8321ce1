#include <algorithm>
#include <bathwright/plugin_host/discovery.hpp>
#include <bathwright/plugin_host/registry.hpp>

#include "file_trust.hpp"

namespace bathwright::plugin_host {
namespace {

bool is_data(const std::filesystem::path& file) { return file.string().ends_with(data_suffix); }

Result<LoadedPlugin> load_data(const std::filesystem::path& file, ReadDataFile read) {
  if (Outcome trusted = may_be_run(file); !trusted) return trusted.problems();
  auto type = read(file.string());
  if (!type) return type.problems();
  return LoadedPlugin{file, {*std::move(type)}, {}};
}

}  // namespace

std::string_view name(State state) {
  switch (state) {
    case State::ready:
      return "ready";
    case State::shadowed:
      return "shadowed";
    case State::refused:
      break;
  }
  return "refused";
}

BathTypes BathTypes::discover(const std::vector<std::filesystem::path>& folders,
                              ReadDataFile read_data_file) {
  BathTypes known;
  const FoundFiles found = find_plugin_files(folders);
  for (const Problem& problem : found.problems)
    known.list_.push_back({problem.where, "", "", State::refused, {problem}, {}});
  for (const auto& file : found.files) {
    if (is_data(file) && !read_data_file) continue;
    if (auto plugin = is_data(file) ? load_data(file, read_data_file) : load(file))
      known.take(*std::move(plugin));
    else
      known.list_.push_back({file, "", "", State::refused, plugin.problems(), {}});
  }
  return known;
}

void BathTypes::take(LoadedPlugin plugin) {
  for (bath::BathType& type : plugin.types) {
    Listed listed{plugin.file, type.id, type.version, State::ready, {}, plugin.notes};
    const auto earlier = std::ranges::find_if(
        list_, [&](const Listed& l) { return l.state == State::ready && l.id == type.id; });
    if (earlier == list_.end()) {
      types_.push_back(std::move(type));
    } else {
      listed.state = State::shadowed;
      listed.problems.push_back({Fault::refused, plugin.file.string(),
                                 "bath type '" + listed.id + "' is shadowed", "",
                                 earlier->path.string() + " has it already and comes first."});
    }
    list_.push_back(std::move(listed));
  }
}

const bath::BathType* BathTypes::find(std::string_view id) const {
  const auto found = std::ranges::find(types_, id, &bath::BathType::id);
  return found == types_.end() ? nullptr : &*found;
}

}  // namespace bathwright::plugin_host
