#include "file_trust.hpp"

#include <fcntl.h>
#include <sys/stat.h>

#include <cerrno>
#include <system_error>

namespace bathwright::plugin_host {
namespace {

namespace fs = std::filesystem;

enum class Kind { file, own_folder, folder_above };

std::string why(int error) { return std::generic_category().message(error); }

Problem refused(const fs::path& path, std::string what, std::string try_this = {}) {
  return {Fault::refused, path.string(), std::move(what), "", std::move(try_this)};
}

void check_ours(const fs::path& path, const struct stat& status, Kind kind, Problems& problems) {
  if (status.st_uid != 0 && status.st_uid != ::geteuid())
    problems.push_back(refused(path, "belongs to another user, who could change what it does",
                               "Copy it to a folder of your own after checking it."));
  const bool held_by_sticky_bit = kind == Kind::folder_above && (status.st_mode & S_ISVTX) != 0;
  if ((status.st_mode & (S_IWGRP | S_IWOTH)) != 0 && !held_by_sticky_bit)
    problems.push_back(refused(path, "can be written by group or others, who could change what a plugin does",
                               "chmod go-w " + path.string()));
}

void check_folder(const fs::path& folder, Kind kind, Problems& problems) {
  struct stat status {};
  if (::stat(folder.c_str(), &status) == 0)
    check_ours(folder, status, kind, problems);
  else
    problems.push_back({Fault::io, folder.string(), "cannot be looked at (" + why(errno) + ")", "", ""});
}

/// `folder` without symbolic links, so that the folders above it are those that really hold it.
void check_folders(const fs::path& folder, Above above, Problems& problems) {
  check_folder(folder, Kind::own_folder, problems);
  if (above == Above::not_looked_at) return;
  for (fs::path up = folder; up != up.root_path();) {
    up = up.parent_path();
    check_folder(up, Kind::folder_above, problems);
  }
}

}  // namespace

Result<Descriptor> open_trusted(const fs::path& file, std::size_t largest_bytes, Above above) {
  std::error_code failed;
  const fs::path folder = fs::canonical(fs::absolute(file).parent_path(), failed);
  if (failed) return Problem{Fault::io, file.string(), "cannot be opened (" + failed.message() + ")", "", ""};

  Problems problems;
  const fs::path path = folder / file.filename();
  Descriptor opened(::open(path.c_str(), O_RDONLY | O_CLOEXEC | O_NONBLOCK | O_NOFOLLOW));
  struct stat status {};
  if (opened && ::fstat(opened.get(), &status) == 0) {
    if (!S_ISREG(status.st_mode)) problems.push_back(refused(path, "is not a regular file"));
    if (static_cast<std::size_t>(status.st_size) > largest_bytes)
      problems.push_back(refused(path, "is larger than " + std::to_string(largest_bytes >> 20) + " MiB"));
    check_ours(path, status, Kind::file, problems);
  } else if (errno == ELOOP) {
    problems.push_back(refused(path, "is a symbolic link", "Put the file itself here."));
  } else {
    problems.push_back({Fault::io, path.string(), "cannot be opened (" + why(errno) + ")", "", ""});
  }
  check_folders(folder, above, problems);
  if (!problems.empty()) return problems;
  return opened;
}

Outcome own_folder(const fs::path& folder) {
  std::error_code failed;
  if (folder.has_relative_path() && !fs::exists(folder.parent_path(), failed))
    if (Outcome parent = own_folder(folder.parent_path()); !parent) return parent;
  if (::mkdir(folder.c_str(), S_IRWXU) != 0 && errno != EEXIST)
    return Problem{Fault::io, folder.string(), "this folder cannot be made (" + why(errno) + ")", "", ""};
  Problems problems;
  check_folder(folder, Kind::own_folder, problems);
  if (!problems.empty()) return problems;
  return Done{};
}

}  // namespace bathwright::plugin_host
