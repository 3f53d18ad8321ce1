#include <algorithm>
#include <bathwright/plugin_host/discovery.hpp>

namespace bathwright::plugin_host {
namespace fs = std::filesystem;

namespace {

bool is_bath_type(const fs::path& file) {
  const std::string name = file.filename().string();
  return name.ends_with(plugin_suffix) || name.ends_with(data_suffix);
}

/// The places, relative to the folder of the running program, that `exist` holds for.
template <class Exist>
std::vector<fs::path> beside_the_program(std::initializer_list<const char*> places, const Exist& exist) {
  std::error_code failed;
  const fs::path program = fs::read_symlink("/proc/self/exe", failed);
  if (failed) return {};
  std::vector<fs::path> found;
  for (const char* place : places)
    if (const fs::path path = (program.parent_path() / place).lexically_normal(); exist(path, failed))
      found.push_back(path);
  return found;
}

}  // namespace

std::vector<SearchFolder> program_folders() {
  const auto is_folder = [](const fs::path& path, std::error_code& failed) {
    return fs::is_directory(path, failed);
  };
  std::vector<SearchFolder> folders;
  for (const fs::path& folder : beside_the_program({"plugins", "../lib/bathwright/plugins"}, is_folder))
    folders.push_back({folder, Origin::program});
  return folders;
}

fs::path probe_program() {
  const auto is_file = [](const fs::path& path, std::error_code& failed) {
    return fs::is_regular_file(path, failed);
  };
  const auto found =
      beside_the_program({"bathwright_probe", "../libexec/bathwright/bathwright_probe"}, is_file);
  return found.empty() ? fs::path() : found.front();
}

FoundFiles find_plugin_files(const std::vector<SearchFolder>& folders) {
  FoundFiles found;
  for (const auto& [folder, origin] : folders) {
    std::error_code failed;
    if (origin == Origin::user && !fs::exists(folder, failed)) continue;
    std::vector<fs::path> here;
    for (fs::directory_iterator entry(folder, failed), end; !failed && entry != end; entry.increment(failed))
      if (is_bath_type(entry->path())) here.push_back(fs::absolute(entry->path()));
    if (failed)
      found.problems.push_back({Fault::io, folder.string(),
                                "cannot read this folder of plugins (" + failed.message() + ")", "",
                                "Check the folder's name and rights."});
    std::ranges::sort(here);
    for (fs::path& path : here) found.files.push_back({std::move(path), origin});
  }
  return found;
}

}  // namespace bathwright::plugin_host
