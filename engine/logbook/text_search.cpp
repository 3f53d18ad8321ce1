#include "text_search.hpp"

#include <set>
#include <vector>

namespace bathwright::logbook {
namespace {

std::vector<std::string> characters(std::string_view text) {
  std::vector<std::string> all;
  for (const char c : text) {
    const bool continues = (static_cast<unsigned char>(c) & 0xC0) == 0x80;
    if (continues && !all.empty())
      all.back() += c;
    else
      all.emplace_back(1, c);
  }
  return all;
}

}  // namespace

std::string anywhere(std::string_view text) {
  std::string pattern = "%";
  for (const char c : text) {
    if (c == '%' || c == '_' || c == '!') pattern += '!';
    pattern += c;
  }
  return pattern + '%';
}

std::string trigrams_of(std::string_view text) {
  const auto all = characters(text);
  std::set<std::string> seen;
  std::string question;
  for (std::size_t i = 0; i + 3 <= all.size(); ++i) {
    std::string three = all[i] + all[i + 1] + all[i + 2];
    if (!seen.insert(three).second) continue;
    std::string quoted = "\"";
    for (const char c : three) quoted += c == '"' ? std::string("\"\"") : std::string(1, c);
    question += (question.empty() ? "" : " AND ") + quoted + '"';
  }
  return question;
}

}  // namespace bathwright::logbook
