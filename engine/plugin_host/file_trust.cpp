#include "file_trust.hpp"

#include <fcntl.h>
#include <sys/stat.h>
#include <unistd.h>

#include <cerrno>
#include <system_error>

namespace bathwright::plugin_host {
namespace {

constexpr off_t largest_file = 16 << 20;

/// A file descriptor that closes itself.
class Open {
 public:
  Open(const std::filesystem::path& path, int flags)
      : descriptor_(::open(path.c_str(), O_RDONLY | O_CLOEXEC | O_NONBLOCK | flags)) {}
  ~Open() {
    if (descriptor_ >= 0) ::close(descriptor_);
  }
  Open(const Open&) = delete;
  Open& operator=(const Open&) = delete;
  [[nodiscard]] bool status(struct stat& into) const {
    return descriptor_ >= 0 && ::fstat(descriptor_, &into) == 0;
  }

 private:
  int descriptor_;
};

Problem refused(const std::filesystem::path& path, std::string what, std::string try_this) {
  return {Fault::refused, path.string(), std::move(what), "", std::move(try_this)};
}

Problem unreadable(const std::filesystem::path& path) {
  if (errno == ELOOP) return refused(path, "is a symbolic link", "Put the plugin's file itself here.");
  return {Fault::io, path.string(), "cannot be opened (" + std::generic_category().message(errno) + ")", "",
          ""};
}

Outcome only_ours(const std::filesystem::path& path, const struct stat& status) {
  if (status.st_uid != 0 && status.st_uid != ::geteuid())
    return refused(path, "belongs to another user, who could change what it does",
                   "Copy it to a folder of your own after checking it.");
  if ((status.st_mode & (S_IWGRP | S_IWOTH)) != 0)
    return refused(path, "can be written by group or others, who could change what a plugin does",
                   "chmod go-w " + path.string());
  return Done{};
}

}  // namespace

Outcome may_be_run(const std::filesystem::path& file) {
  struct stat status {};
  const Open opened(file, O_NOFOLLOW);
  if (!opened.status(status)) return unreadable(file);
  if (!S_ISREG(status.st_mode)) return refused(file, "is not a regular file", "");
  if (status.st_size > largest_file) return refused(file, "is larger than 16 MiB", "");
  if (Outcome ours = only_ours(file, status); !ours) return ours;

  const std::filesystem::path folder = file.parent_path().empty() ? "." : file.parent_path();
  const Open opened_folder(folder, O_DIRECTORY);
  if (!opened_folder.status(status)) return unreadable(folder);
  return only_ours(folder, status);
}

}  // namespace bathwright::plugin_host
