#include <bathwright/base/result.hpp>

namespace bathwright {

std::string Problem::text() const {
  std::string line = where.empty() ? what : where + ": " + what;
  if (!expected.empty()) line += "; expected " + expected;
  if (try_this.empty()) return line;
  line += line.ends_with('.') ? " " : ". ";
  line += static_cast<char>(std::toupper(static_cast<unsigned char>(try_this.front())));
  line += try_this.substr(1);
  return line;
}

std::string text(const Problems& problems) {
  std::string lines;
  for (const Problem& problem : problems) lines += problem.text() + '\n';
  return lines;
}

}  // namespace bathwright
