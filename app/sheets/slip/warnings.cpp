#include <bathwright/sheets/cautions.hpp>
#include <bathwright/sheets/doubts.hpp>
#include <bathwright/sheets/names.hpp>
#include <set>

#include "parts.hpp"

namespace bathwright::sheets::slip {
namespace {

/// All paragraphs of a section as one, the rest of its blocks left out.
std::string in_one(const Section& section) {
  std::string text;
  for (const Block& block : section.blocks)
    if (const auto* paragraph = std::get_if<Paragraph>(&block))
      text += (text.empty() ? "" : " ") + paragraph->text + (paragraph->text.ends_with('.') ? "" : ";");
  return text;
}

/// "H301, H331", of all that goes in.
std::string codes(const AdditionSlip& slip) {
  std::set<std::string> all;
  if (!slip.sheet.plans.empty())
    for (const auto& addition : slip.sheet.plans.front().additions)
      if (const bath::ShelfItem* item = slip.tank.on_shelf(addition.chemical))
        all.insert(item->stock.hazard_statements.begin(), item->stock.hazard_statements.end());
  std::string text;
  for (const std::string& code : all) text += (text.empty() ? "" : ", ") + code;
  return text;
}

/// "Na^+ was not analysed" and "Ca^2+ was not analysed" as one: what is said of several is said once.
std::vector<std::string> notes_by_what_they_say(const std::vector<std::string>& notes) {
  std::vector<std::pair<std::string, std::string>> said;  // what, of which
  for (const std::string& note : notes) {
    const std::size_t space = note.find(" was ");
    const std::string what = space == std::string::npos ? note : note.substr(space);
    const std::string of = space == std::string::npos ? "" : pretty(note.substr(0, space));
    auto known = said.begin();
    while (known != said.end() && (of.empty() || known->first != what)) ++known;
    if (known == said.end())
      said.emplace_back(what, of);
    else
      known->second += ", " + of;
  }
  std::vector<std::string> lines;
  for (const auto& [what, of] : said) lines.push_back(of + what);
  return lines;
}

}  // namespace

Section warnings(const AdditionSlip& slip) {
  Section section = cautions(slip.sheet.cautions);  // each on lines of its own: one of them is meant for you
  if (const std::string on_labels = codes(slip); !on_labels.empty())
    section.blocks.emplace_back(Paragraph{"On the labels: " + on_labels + "; see the SDS."});
  return section;
}

Section doubtful(const AdditionSlip& slip) {
  Section section{"What is doubtful", {}};
  std::string text;
  for (const std::string& note : notes_by_what_they_say(slip.analysis.notes))
    text += (text.empty() ? "" : " ") + note + ".";
  if (!text.empty()) section.blocks.emplace_back(Paragraph{text});
  if (const std::string model = in_one(doubts(slip.sheet.now.warnings)); !model.empty())
    section.blocks.emplace_back(Paragraph{model});
  return section;
}

}  // namespace bathwright::sheets::slip
