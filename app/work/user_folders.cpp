#include "user_folders.hpp"

#include <pwd.h>
#include <unistd.h>

#include <cstdlib>

namespace bathwright::work {
namespace {

namespace fs = std::filesystem;

/// A variable that names a folder. Relative ones do not count: the working directory decides nothing.
fs::path folder_in(const char* variable) {
  const char* value = std::getenv(variable);
  const fs::path folder = value ? value : "";
  return folder.is_absolute() ? folder : fs::path();
}

fs::path home() {
  if (const fs::path folder = folder_in("HOME"); !folder.empty()) return folder;
  const passwd* user = ::getpwuid(::geteuid());
  return user && user->pw_dir ? user->pw_dir : "/";
}

fs::path own(const char* variable, const char* below_home) {
  const fs::path folder = folder_in(variable);
  return (folder.empty() ? home() / below_home : folder) / "bathwright";
}

}  // namespace

fs::path data_folder() { return own("XDG_DATA_HOME", ".local/share"); }
fs::path state_folder() { return own("XDG_STATE_HOME", ".local/state"); }
fs::path cache_folder() { return own("XDG_CACHE_HOME", ".cache"); }

}  // namespace bathwright::work
