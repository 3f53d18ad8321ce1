#include "anchor_file.hpp"

#include <fcntl.h>
#include <unistd.h>

#include <cerrno>
#include <cstring>
#include <fstream>
#include <sstream>

namespace bathwright::command {
namespace {

bool is_hash(std::string_view text) {
  constexpr std::size_t digits = 64;
  return text.size() == digits && text.find_first_not_of("0123456789abcdef") == std::string_view::npos;
}

}  // namespace

Result<std::vector<logbook::Anchor>> read_anchors(const std::string& against) {
  if (is_hash(against)) return std::vector<logbook::Anchor>{{0, against}};
  std::ifstream in(against);
  if (!in)
    return Problem{Fault::bad_input, against, "is neither a hash nor a file that can be read",
                   "64 hexadecimal digits, or a file made by log anchor", ""};
  std::vector<logbook::Anchor> anchors;
  std::size_t number = 0;
  for (std::string line; std::getline(in, line);) {
    ++number;
    if (line.empty()) continue;
    std::istringstream words(line);
    logbook::Anchor anchor;
    if (!(words >> anchor.seq >> anchor.hash) || !is_hash(anchor.hash))
      return Problem{Fault::bad_input, against + ":" + std::to_string(number), "is no anchor",
                     "an entry's number and its hash", ""};
    anchors.push_back(std::move(anchor));
  }
  return anchors;
}

Outcome add_anchor(const std::string& file, const logbook::Anchor& anchor) {
  constexpr mode_t for_all = 0644;
  const std::string line = std::to_string(anchor.seq) + " " + anchor.hash + "\n";
  const int out = open(file.c_str(), O_WRONLY | O_CREAT | O_APPEND | O_CLOEXEC, for_all);
  const bool written = out >= 0 &&
                       write(out, line.data(), line.size()) == static_cast<ssize_t>(line.size()) &&
                       fsync(out) == 0;
  const int error = errno;
  if (out >= 0) close(out);
  if (written) return Done{};
  return Problem{Fault::io, file, std::string("cannot be written: ") + std::strerror(error), "",
                 "Check the folder and the disk."};
}

}  // namespace bathwright::command
