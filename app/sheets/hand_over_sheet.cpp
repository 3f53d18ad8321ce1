#include <algorithm>
#include <bathwright/sheets/hand_over_sheet.hpp>
#include <bathwright/sheets/log_sheet.hpp>
#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/table.hpp>

namespace bathwright::sheets {
namespace {

/// "12 entries: 3 analyses, 2 additions, 1 failed-pin".
std::string counts(const std::vector<logbook::Entry>& entries) {
  if (entries.empty()) return "Nothing was logged in this shift.";
  std::string text = std::to_string(entries.size()) + (entries.size() == 1 ? " entry: " : " entries: ");
  bool first = true;
  for (const std::string& kind : logbook::entry_kind_names()) {
    const auto count =
        std::ranges::count_if(entries, [&](const auto& one) { return logbook::name(one.kind) == kind; });
    if (count == 0) continue;
    text += (first ? "" : ", ") + std::to_string(count) + " " + kind;
    first = false;
  }
  return text + ".";
}

std::string approval(const hand_over::HandOver::OpenSlip& open) {
  if (!open.approved_by.empty()) return "Approved by " + open.approved_by + ".";
  return open.must_be_approved ? "NOT APPROVED: nothing is added against it before it is."
                               : "Approved by nobody.";
}

}  // namespace

Lines hand_over_sheet(const hand_over::HandOver& told, const shifts::Calendar& calendar,
                      const std::string& by) {
  const auto local = [&](shifts::UtcTime time) { return calendar.zone().local_text(time); };
  Lines lines;
  title(lines, "Hand-over of shift " + told.shift.label,
        local(told.shift.from) + " to " + local(told.shift.to));

  heading(lines, "Open slips");
  if (told.open_slips.empty()) say(lines, "None.");
  for (const auto& open : told.open_slips) {
    say(lines,
        "  Slip " + std::to_string(open.slip.seq) + ", tank " + open.slip.tank + ", of " +
            local_time(open.slip.at, calendar) + " by " + open.slip.by +
            ": find out what of it is in the tank, then log it and close the slip.",
        4);
    say(lines, "    " + approval(open));
  }

  heading(lines, "Out of window");
  if (told.out_of_window.empty()) say(lines, "Nothing that was analysed in this shift.");
  Table out({{"tank"},
             {"of"},
             {"found", Align::number},
             {"low", Align::number},
             {"high", Align::number},
             {"entry", Align::number}});
  for (const auto& one : told.out_of_window)
    out.add({one.tank, one.quantity, figure(one.found), figure(one.low), figure(one.high),
             std::to_string(one.seq)});
  if (!out.empty()) append(lines, out.lines());

  heading(lines, "Due before the end of the next shift");
  if (told.due.empty()) say(lines, "Nothing that has a schedule.");
  Table due({{"due"}, {"tank"}, {"what"}});
  for (const auto& one : told.due)
    due.add({one.last ? (one.overdue ? "overdue since " : "") + local(one.at) : "never done", one.tank,
             one.what});
  if (!due.empty()) append(lines, due.lines());

  heading(lines, "Logged");
  say(lines, counts(told.entries));
  if (!told.entries.empty()) append(lines, log_list(told.entries, {}, calendar));

  lines.emplace_back();
  if (told.head) {
    say(lines,
        "Entry " + std::to_string(told.head->seq) + " is the last. Its hash, to compare the log with later:");
    say(lines, "  " + told.head->hash);
  }
  lines.emplace_back();
  lines.push_back("Handed over by " + by + "          taken over by ____________________");
  return lines;
}

}  // namespace bathwright::sheets
