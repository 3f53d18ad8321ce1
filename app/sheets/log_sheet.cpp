#include <bathwright/sheets/log_sheet.hpp>
#include <bathwright/sheets/table.hpp>
#include <sstream>

namespace bathwright::sheets {
namespace {

/// "2026-03-02T05:40:00.000Z" as "2026-03-02 05:40".
std::string to_the_minute(const std::string& iso) {
  constexpr std::size_t minute_end = 16;
  std::string text = iso.substr(0, minute_end);
  if (text.size() == minute_end) text[10] = ' ';
  return text;
}

std::string numbers(const std::vector<std::int64_t>& all) {
  std::string text;
  for (const std::int64_t number : all) text += (text.empty() ? "" : ", ") + std::to_string(number);
  return text;
}

}  // namespace

Lines log_list(const std::vector<logbook::Entry>& entries, const Corrections& corrected_by) {
  Lines lines;
  if (entries.empty()) {
    say(lines, "No entry fits.");
    return lines;
  }
  Table table({{"no.", Align::number}, {"logged (UTC)"}, {"kind"}, {"tank"}, {"shift"}, {"by"}});
  for (const auto& entry : entries) {
    std::string kind(logbook::name(entry.kind));
    if (entry.about) kind += " of " + std::to_string(*entry.about);
    if (const auto found = corrected_by.find(entry.seq); found != corrected_by.end())
      kind += ", corrected by " + numbers(found->second);
    table.add({std::to_string(entry.seq), to_the_minute(entry.at), kind, entry.tank, entry.shift, entry.by});
  }
  append(lines, table.lines());
  return lines;
}

Lines log_entry(const logbook::Entry& entry, std::string_view body) {
  Lines lines;
  title(lines, "Entry " + std::to_string(entry.seq) + ", " + std::string(logbook::name(entry.kind)),
        entry.at);
  if (entry.about) say(lines, "about entry " + std::to_string(*entry.about));
  lines.push_back("tank     " + entry.tank);
  lines.push_back("shift    " + (entry.shift.empty() ? "not given" : entry.shift));
  lines.push_back("by       " + entry.by + ", at " + entry.station + ", with " + entry.program);
  lines.push_back("hash     " + entry.hash);
  lines.push_back("follows  " + entry.previous);
  lines.emplace_back();
  std::istringstream text{std::string(body)};
  for (std::string line; std::getline(text, line);) lines.push_back(line);
  return lines;
}

Lines log_verification(const logbook::Verification& v) {
  Lines lines;
  for (const auto& finding : v.problems) say(lines, finding.words, 2);
  for (const auto& finding : v.clock_steps) say(lines, "Note: " + finding.words, 2);
  const std::string entries = std::to_string(v.entries) + (v.entries == 1 ? " entry" : " entries");
  if (!v.ok) {
    say(lines,
        entries + " walked; the log is not as it was written. Keep the file and tell who answers for it.");
    return lines;
  }
  say(lines, entries + ", each as it was logged.");
  if (v.entries > 0) {
    say(lines, "Last hash, to note elsewhere (a log cut off at its end shows only by it):");
    say(lines, "  " + v.head);
  }
  return lines;
}

}  // namespace bathwright::sheets
