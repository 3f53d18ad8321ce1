#include "docs_page.hpp"

#include <map>
#include <sstream>

namespace bathwright::conformance {
namespace {

/// What stands under each heading, down to the next; headings of all depths count alike.
std::map<std::string, std::string> sections_of(const std::string& page) {
  std::map<std::string, std::string> sections;
  std::string* current = nullptr;
  std::istringstream lines(page);
  for (std::string line; std::getline(lines, line);) {
    if (line.starts_with('#')) {
      const auto first = line.find_first_not_of("# "), last = line.find_last_not_of("# \r");
      current = first == std::string::npos ? nullptr : &sections[line.substr(first, last - first + 1)];
    } else if (current) {
      *current += line + '\n';
    }
  }
  return sections;
}

}  // namespace

std::vector<Check> check_page(const bath::BathType& type, const std::string& where, const std::string& page) {
  const auto sections = sections_of(page);
  const auto text_under = [&](const char* heading) -> std::string {
    const auto found = sections.find(heading);
    return found == sections.end() ? "" : found->second;
  };
  Check headings{Group::docs, "README.md says what is modelled, what is not, limits, sources and hazards"};
  for (const char* heading : {"Modelled", "Not modelled", "Limits", "Sources", "Hazards"})
    if (text_under(heading).find_first_not_of(" \t\r\n") == std::string::npos)
      headings.problems.push_back({Fault::inconsistent_data, where,
                                   "nothing stands under a heading \"" + std::string(heading) + '"',
                                   "## " + std::string(heading) + " and what there is to say", ""});
  Check cited{Group::docs, "README.md cites every source"};
  const std::string sources = text_under("Sources");
  for (const bath::Source& source : type.sources)
    if (sources.find('`' + source.key + '`') == std::string::npos)
      cited.problems.push_back({Fault::inconsistent_data, where,
                                "the source '" + source.key + "' is not cited under Sources",
                                '`' + source.key + "` with what it is used for", ""});
  return {headings, cited};
}

}  // namespace bathwright::conformance
