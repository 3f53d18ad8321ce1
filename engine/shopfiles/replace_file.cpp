#include "replace_file.hpp"

#include <fcntl.h>
#include <sys/stat.h>
#include <unistd.h>

#include <cerrno>
#include <cstdio>
#include <cstdlib>
#include <filesystem>
#include <system_error>

namespace bathwright::shopfiles {
namespace {

class Descriptor {
 public:
  explicit Descriptor(int number) : number_(number) {}
  ~Descriptor() {
    if (number_ >= 0) ::close(number_);
  }
  Descriptor(const Descriptor&) = delete;
  Descriptor& operator=(const Descriptor&) = delete;
  [[nodiscard]] int get() const { return number_; }

 private:
  int number_;
};

bool write_all(int file, std::string_view content) {
  while (!content.empty()) {
    const ssize_t wrote = ::write(file, content.data(), content.size());
    if (wrote < 0 && errno == EINTR) continue;
    if (wrote <= 0) return false;
    content.remove_prefix(static_cast<std::size_t>(wrote));
  }
  return true;
}

bool flush_folder(const std::filesystem::path& folder) {
  const Descriptor opened(::open(folder.c_str(), O_RDONLY | O_DIRECTORY | O_CLOEXEC));
  return opened.get() >= 0 && ::fsync(opened.get()) == 0;
}

}  // namespace

Outcome replace_file(const std::string& path, std::string_view content) {
  const auto failed = [&](int error) {
    return Problem{Fault::io, path, "cannot be written: " + std::generic_category().message(error), "",
                   "Check the folder, who may write to it, and the space left."};
  };
  const std::filesystem::path folder = std::filesystem::path(path).parent_path();
  std::string temporary = path + ".XXXXXX";
  const Descriptor file(::mkostemp(temporary.data(), O_CLOEXEC));
  if (file.get() < 0) return failed(errno);
  constexpr mode_t readable_by_all = 0644;  // mkostemp makes a file for its owner alone
  if (::fchmod(file.get(), readable_by_all) == 0 && write_all(file.get(), content) &&
      ::fsync(file.get()) == 0 && std::rename(temporary.c_str(), path.c_str()) == 0) {
    if (flush_folder(folder.empty() ? "." : folder)) return Done{};
    return failed(errno);
  }
  const int error = errno;
  ::unlink(temporary.c_str());
  return failed(error);
}

}  // namespace bathwright::shopfiles
