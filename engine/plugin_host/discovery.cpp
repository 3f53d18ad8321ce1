#include <algorithm>
#include <bathwright/plugin_host/discovery.hpp>

namespace bathwright::plugin_host {
namespace fs = std::filesystem;

namespace {

bool is_bath_type(const fs::path& file) {
  const std::string name = file.filename().string();
  return name.ends_with(plugin_suffix) || name.ends_with(data_suffix);
}

}  // namespace

std::vector<fs::path> built_in_folders() {
  std::error_code failed;
  const fs::path program = fs::read_symlink("/proc/self/exe", failed);
  if (failed) return {};
  std::vector<fs::path> folders;
  for (const char* place : {"plugins", "../lib/bathwright/plugins"})
    if (const fs::path folder = (program.parent_path() / place).lexically_normal();
        fs::is_directory(folder, failed))
      folders.push_back(folder);
  return folders;
}

FoundFiles find_plugin_files(const std::vector<fs::path>& folders) {
  FoundFiles found;
  for (const fs::path& folder : folders) {
    std::error_code failed;
    std::vector<fs::path> here;
    for (fs::directory_iterator entry(folder, failed), end; !failed && entry != end; entry.increment(failed))
      if (is_bath_type(entry->path())) here.push_back(fs::absolute(entry->path()));
    if (failed)
      found.problems.push_back({Fault::io, folder.string(),
                                "cannot read this folder of plugins (" + failed.message() + ")", "",
                                "Check the folder's name and rights."});
    std::ranges::sort(here);
    found.files.insert(found.files.end(), here.begin(), here.end());
  }
  return found;
}

}  // namespace bathwright::plugin_host
