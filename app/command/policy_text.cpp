#include "policy_text.hpp"

#include <algorithm>
#include <sstream>

namespace bathwright::command {
namespace {

std::string trimmed(const std::string& text) {
  const auto first = text.find_first_not_of(" \t\r"), last = text.find_last_not_of(" \t\r");
  return first == std::string::npos ? "" : text.substr(first, last - first + 1);
}

/// Where a comment begins, outside of quotes; the end where there is none.
std::size_t comment_at(const std::string& line) {
  bool quoted = false;
  for (std::size_t i = 0; i < line.size(); ++i) {
    if (line[i] == '"') quoted = !quoted;
    if (line[i] == '#' && !quoted) return i;
  }
  return line.size();
}

std::string without_comment(const std::string& line) { return trimmed(line.substr(0, comment_at(line))); }

bool sets(const std::string& line, const std::string& key) {
  const std::size_t equals = line.find('=');
  return equals != std::string::npos && trimmed(line.substr(0, equals)) == key;
}

void put(std::vector<std::string>& lines, const PolicyFigure& figure) {
  const std::string setting = figure.key + " = " + figure.value;
  const auto heading = std::ranges::find(lines, "[" + figure.table + "]", without_comment);
  if (heading == lines.end()) {
    lines.insert(lines.end(), {"", "[" + figure.table + "]", setting});
    return;
  }
  auto line = heading + 1;
  for (; line != lines.end() && !trimmed(*line).starts_with('['); ++line) {
    if (!sets(without_comment(*line), figure.key)) continue;
    const std::string comment = line->substr(comment_at(*line));
    *line = setting + (comment.empty() ? "" : "     " + comment);
    return;
  }
  lines.insert(heading + 1, setting);
}

}  // namespace

std::string with_figures(const std::string& text, const std::vector<PolicyFigure>& figures) {
  std::vector<std::string> lines;
  std::istringstream in(text);
  for (std::string line; std::getline(in, line);) lines.push_back(line);
  for (const PolicyFigure& figure : figures) put(lines, figure);
  std::string out;
  for (const std::string& line : lines) out += line + "\n";
  return out;
}

}  // namespace bathwright::command
