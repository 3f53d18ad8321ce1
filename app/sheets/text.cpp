#include <algorithm>
#include <bathwright/sheets/text.hpp>

namespace bathwright::sheets {
namespace {

bool starts_code_point(char c) { return (static_cast<unsigned char>(c) & 0xC0) != 0x80; }

/// Bytes of the first `count` code points.
std::size_t bytes_of(std::string_view utf8, std::size_t count) {
  std::size_t at = 0;
  for (; at < utf8.size(); ++at)
    if (starts_code_point(utf8[at]) && count-- == 0) break;
  return at;
}

}  // namespace

std::size_t columns(std::string_view utf8) {
  return static_cast<std::size_t>(std::count_if(utf8.begin(), utf8.end(), starts_code_point));
}

void say(Lines& lines, std::string_view text, std::size_t hang) {
  constexpr std::size_t deepest = width / 2;  // some room must be left for words
  const std::size_t own = std::min(std::min(text.find_first_not_of(' '), text.size()), width - 1);
  std::string line(own, ' ');
  bool empty = true;
  text.remove_prefix(own);
  while (!text.empty()) {
    const std::size_t end = std::min(text.find(' '), text.size());
    std::string_view word = text.substr(0, end);
    text.remove_prefix(std::min(end + 1, text.size()));
    while (!word.empty()) {
      const std::size_t room = width - std::min(width, columns(line) + (empty ? 0 : 1));
      if (columns(word) <= room || (empty && room > 0)) {
        const std::size_t bytes = bytes_of(word, room);
        line += (empty ? "" : " ") + std::string(word.substr(0, bytes));
        word.remove_prefix(bytes);
        empty = false;
        if (word.empty()) break;
      }
      lines.push_back(std::move(line));
      line = std::string(own + hang < width ? own + hang : deepest, ' ');
      empty = true;
    }
  }
  lines.push_back(std::move(line));
}

void heading(Lines& lines, std::string_view words) {
  const std::size_t used = std::min(width, columns(words) + 1);
  lines.emplace_back();
  lines.push_back(std::string(words) + ' ' + std::string(width - used, '-'));
}

void title(Lines& lines, std::string_view left, std::string_view right) {
  const std::size_t used = columns(left) + columns(right);
  if (used + 2 > width) {
    say(lines, left);
    say(lines, right);
    return;
  }
  lines.push_back(std::string(left) + std::string(width - used, ' ') + std::string(right));
}

void stops(Lines& lines, const std::vector<std::string>& findings) {
  for (const std::string& finding : findings) say(lines, "  STOP  " + finding, 8);
}

void append(Lines& lines, const Lines& more) { lines.insert(lines.end(), more.begin(), more.end()); }

}  // namespace bathwright::sheets
