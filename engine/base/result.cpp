#include <bathwright/base/result.hpp>

namespace bathwright {

std::string Problem::text() const {
  std::string line = where.empty() ? what : where + ": " + what;
  if (!expected.empty()) line += "; expected " + expected;
  if (!try_this.empty()) line += (line.ends_with('.') ? " " : ". ") + try_this;
  return line;
}

std::string text(const Problems& problems) {
  std::string lines;
  for (const Problem& problem : problems) lines += problem.text() + '\n';
  return lines;
}

}  // namespace bathwright
