#include <algorithm>
#include <bathwright/sheets/doubts.hpp>
#include <bathwright/sheets/names.hpp>

namespace bathwright::sheets {
namespace {

/// Where the parenthesis opens that a text ends with; npos where it ends otherwise.
std::size_t last_parenthesis(std::string_view text) {
  if (!text.ends_with(')')) return std::string_view::npos;
  int open = 0;
  for (std::size_t at = text.size(); at-- > 0;) {
    if (text[at] == ')') ++open;
    if (text[at] == '(' && --open == 0) return at;
  }
  return std::string_view::npos;
}

/// "Cl^- - Ni^2+ - SO4^2-" with each name as people write it.
std::string pretty_names(std::string_view names) {
  constexpr std::string_view between = " - ";
  std::string out;
  for (std::size_t end; (end = names.find(between)) != std::string_view::npos;) {
    out += pretty(names.substr(0, end)) + std::string(between);
    names.remove_prefix(end + between.size());
  }
  return out + pretty(names);
}

}  // namespace

std::string in_few_words(std::string_view doubt) {
  std::string_view words = doubt.substr(0, last_parenthesis(doubt));
  words = words.substr(0, words.find_last_not_of(' ') + 1);
  const std::size_t colon = words.find(": ");
  if (colon == std::string_view::npos) return std::string(words);
  return pretty_names(words.substr(0, colon)) + std::string(words.substr(colon));
}

Section doubts(const std::vector<std::string>& all) {
  std::vector<std::pair<std::string, std::string>> reasons;  // and what is doubted for it
  for (const std::string& doubt : all) {
    const std::string words = in_few_words(doubt);
    const std::size_t colon = words.find(": ");
    const std::string reason = colon == std::string::npos ? words : words.substr(colon + 2);
    const std::string what = colon == std::string::npos ? "" : words.substr(0, colon);
    const auto known = std::ranges::find(reasons, reason, &std::pair<std::string, std::string>::first);
    if (known == reasons.end())
      reasons.emplace_back(reason, what);
    else if (!what.empty())
      known->second += ", " + what;
  }
  Section section{"What is doubtful", {}};
  for (const auto& [reason, what] : reasons)
    section.blocks.emplace_back(Paragraph{what.empty() ? reason : what + ": " + reason});
  if (!reasons.empty())
    section.blocks.emplace_back(Paragraph{"In full, with sources: --json, and bathwright sources ION."});
  return section;
}

}  // namespace bathwright::sheets
