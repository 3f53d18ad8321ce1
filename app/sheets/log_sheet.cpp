#include <algorithm>
#include <bathwright/sheets/log_sheet.hpp>
#include <sstream>

namespace bathwright::sheets {
namespace {

std::string numbers(const std::vector<std::int64_t>& all) {
  std::string text;
  for (const std::int64_t number : all) text += (text.empty() ? "" : ", ") + std::to_string(number);
  return text;
}

}  // namespace

std::string local_time(const std::string& iso, const std::optional<shifts::Calendar>& calendar) {
  const auto time = logbook::utc_from_iso(iso);
  if (time && calendar) return calendar->zone().local_text(*time);
  constexpr std::size_t minute_end = 16;
  std::string text = iso.substr(0, minute_end);
  if (text.size() == minute_end) text[10] = ' ';
  return text;
}

Table log_table(const std::vector<logbook::Entry>& entries, const Corrections& corrected_by,
                const std::optional<shifts::Calendar>& calendar) {
  Table table({{"no.", Align::number}, {calendar ? "logged" : "logged (UTC)"}, {"kind"}, {"by"}, {"tank"}});
  for (const logbook::Entry& entry : entries) {
    std::string kind(logbook::name(entry.kind));
    if (entry.about) kind += " of " + std::to_string(*entry.about);
    if (const auto found = corrected_by.find(entry.seq); found != corrected_by.end())
      kind += ", corrected by " + numbers(found->second);
    table.add({std::to_string(entry.seq), local_time(entry.at, calendar), kind,
               entry.witness.empty() ? entry.by : entry.by + ", " + entry.witness, entry.tank});
  }
  return table;
}

Lines log_list(const std::vector<logbook::Entry>& entries, const Corrections& corrected_by,
               const std::optional<shifts::Calendar>& calendar) {
  Lines lines;
  if (entries.empty()) {
    say(lines, "No entry fits.");
    return lines;
  }
  // Entries without a shift, as of people and settings, stand where they were logged.
  for (auto first = entries.begin(); first != entries.end();) {
    const auto named = std::find_if(first, entries.end(), [](const auto& one) { return !one.shift.empty(); });
    const std::string shift = named == entries.end() ? "" : named->shift;
    const auto end = std::find_if(first, entries.end(),
                                  [&](const auto& one) { return !one.shift.empty() && one.shift != shift; });
    if (!shift.empty()) heading(lines, "Shift " + shift);
    append(lines, log_table({first, end}, corrected_by, calendar).lines());
    first = end;
  }
  if (calendar) say(lines, "Times of " + calendar->zone().name() + ".");
  return lines;
}

Lines log_entry(const logbook::Entry& entry, const std::vector<std::int64_t>& corrections,
                std::string_view body) {
  Lines lines;
  title(lines, "Entry " + std::to_string(entry.seq) + ", " + std::string(logbook::name(entry.kind)),
        entry.at);
  if (entry.about) say(lines, "about entry " + std::to_string(*entry.about));
  if (!corrections.empty()) say(lines, "corrected by " + numbers(corrections) + ": read that too");
  const auto line = [&](const char* head, const std::string& text) {
    if (!text.empty()) lines.push_back(head + text);
  };
  line("tank     ", entry.tank);
  line("shift    ", entry.shift);
  line("done     ", entry.happened);
  line("by       ", entry.by + (entry.role.empty() ? ", not signed" : ", signed as " + entry.role));
  line("witness  ", entry.witness);
  line("station  ", entry.station);
  line("program  ", entry.program);
  line("computed ", entry.bath_type);
  line("hash     ", entry.hash);
  line("follows  ", entry.previous);
  lines.emplace_back();
  std::istringstream text{std::string(body)};
  for (std::string next; std::getline(text, next);) lines.push_back(next);
  return lines;
}

Lines log_verification(const logbook::Verification& v, std::size_t anchors) {
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
  if (anchors > 0)
    say(lines,
        std::to_string(anchors) + (anchors == 1 ? " hash" : " hashes") + " noted elsewhere: all in the log.");
  if (v.entries > 0) {
    say(lines, "Last hash, to note elsewhere (a log cut off at its end shows only by it):");
    say(lines, "  " + v.head);
  }
  return lines;
}

}  // namespace bathwright::sheets
