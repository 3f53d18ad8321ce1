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

/// "{ a = 1, b = 2 }" with an entry of it set anew, or one more at its end.
std::string with_entry(const std::string& table, const std::string& key, const std::string& value) {
  std::vector<std::string> settings;
  std::string one;
  int depth = 0;
  bool quoted = false;
  const auto finish = [&] {
    if (one = trimmed(one); !one.empty()) settings.push_back(one);
    one.clear();
  };
  for (const char c : table) {
    if (c == '"') quoted = !quoted;
    const bool opens = !quoted && c == '{', closes = !quoted && c == '}';
    if (closes && --depth == 0) break;
    if (depth == 1 && !quoted && c == ',')
      finish();
    else if (depth > 0)
      one += c;
    if (opens) ++depth;
  }
  finish();
  const std::string setting = key + " = " + value;
  const auto there = std::ranges::find_if(settings, [&](const auto& s) { return sets(s, key); });
  if (there == settings.end())
    settings.push_back(setting);
  else
    *there = setting;
  std::string all;
  for (const std::string& s : settings) all += (all.empty() ? "{ " : ", ") + s;
  return all + " }";
}

/// What the key of a table is set to; "{}" where it is not.
std::string value_of(const std::vector<std::string>& lines, const PolicyFigure& figure) {
  auto line = std::ranges::find(lines, "[" + figure.table + "]", without_comment);
  if (line == lines.end()) return "{}";
  for (++line; line != lines.end() && !trimmed(*line).starts_with('['); ++line) {
    const std::string plain = without_comment(*line);
    if (sets(plain, figure.key)) return trimmed(plain.substr(plain.find('=') + 1));
  }
  return "{}";
}

void put(std::vector<std::string>& lines, const PolicyFigure& figure) {
  if (!figure.entry.empty()) {
    const std::string own = figure.table + "." + figure.key;
    if (std::ranges::count(lines, "[" + own + "]", without_comment) > 0)
      put(lines, {own, figure.entry, figure.value});
    else
      put(lines, {figure.table, figure.key, with_entry(value_of(lines, figure), figure.entry, figure.value)});
    return;
  }
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

bool has_figure(const std::string& text, const PolicyFigure& figure) {
  std::vector<std::string> lines;
  std::istringstream in(text);
  for (std::string line; std::getline(in, line);) lines.push_back(line);
  if (const std::string own = "[" + figure.table + "." + figure.key + "]";
      std::ranges::count(lines, own, without_comment) > 0)
    return value_of(lines, {figure.table + "." + figure.key, figure.entry, ""}) != "{}";
  const std::string inside = value_of(lines, figure);
  return inside.find(figure.entry) != std::string::npos;
}

std::string without_tables(const std::string& text, const std::string& name) {
  std::istringstream in(text);
  std::string out;
  bool inside = false;
  for (std::string line; std::getline(in, line);) {
    const std::string plain = without_comment(line);
    if (plain.starts_with('[')) inside = plain == "[[" + name + "]]";
    if (!inside) out += line + "\n";
  }
  return out;
}

}  // namespace bathwright::command
