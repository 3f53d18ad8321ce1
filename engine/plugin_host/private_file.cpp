#include "private_file.hpp"

#include <fcntl.h>
#include <stdlib.h>

#include <array>
#include <cerrno>
#include <cstdio>
#include <system_error>

#include "file_trust.hpp"

namespace bathwright::plugin_host {
namespace {

Problem cannot_be(const std::filesystem::path& file, const std::string& done) {
  return {Fault::io, file.string(), "cannot be " + done + " (" + std::generic_category().message(errno) + ")",
          "", ""};
}

}  // namespace

Outcome write_private(const std::filesystem::path& file, const std::string& content) {
  if (Outcome folder = own_folder(file.parent_path()); !folder) return folder;
  std::string temporary = file.string() + ".XXXXXX";
  const Descriptor made(::mkostemp(temporary.data(), O_CLOEXEC));  // mode 0600
  if (!made) return cannot_be(file, "written");
  const ssize_t wrote = ::write(made.get(), content.data(), content.size());
  if (wrote == static_cast<ssize_t>(content.size()) && ::fsync(made.get()) == 0 &&
      std::rename(temporary.c_str(), file.c_str()) == 0)
    return Done{};
  const Problem problem = cannot_be(file, "written");
  ::unlink(temporary.c_str());
  return problem;
}

Result<std::string> read_private(const std::filesystem::path& file) {
  constexpr std::size_t largest = 1 << 20;
  const auto opened = open_trusted(file, largest, Above::to_the_root);
  if (!opened) return opened.problems();
  std::string content;
  std::array<char, 4096> part{};
  for (ssize_t got;
       (got = ::read(opened->get(), part.data(), part.size())) != 0 && content.size() <= largest;) {
    if (got < 0 && errno != EINTR) return cannot_be(file, "read");
    if (got > 0) content.append(part.data(), static_cast<std::size_t>(got));
  }
  return content;
}

}  // namespace bathwright::plugin_host
