#include <algorithm>
#include <bathwright/sheets/hand_over_sheet.hpp>
#include <bathwright/sheets/log_sheet.hpp>
#include <bathwright/sheets/names.hpp>

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

/// "analysis of Ni²⁺" of "analysis of Ni^2+".
std::string in_words(const std::string& what) {
  const std::size_t last = what.rfind(' ') + 1;
  return what.substr(0, last) + pretty(what.substr(last));
}

LevelUnit unit_of(const std::string& quantity, const Units& units) {
  if (quantity == "pH") return {"", 1};
  const auto formula = matter::Formula::parse(quantity);
  return formula ? units.level({quantity, quantity, *formula, {}}) : units.any_level();
}

}  // namespace

Page hand_over_page(const hand_over::HandOver& told, const shifts::Calendar& calendar, const std::string& by,
                    const Units& units) {
  const auto local = [&](shifts::UtcTime time) { return calendar.zone().local_text(time); };
  Page page{
      "Hand-over of shift " + told.shift.label, local(told.shift.from) + " to " + local(told.shift.to), {}};

  Section slips{"Open slips", {}};
  if (told.open_slips.empty()) slips.blocks.emplace_back(Paragraph{"None."});
  for (const auto& open : told.open_slips)
    slips.blocks.emplace_back(
        Task{"Slip " + std::to_string(open.slip.seq) + ", tank " + open.slip.tank,
             "settled _____ by _______",
             {},
             {"of " + local_time(open.slip.at, calendar) + " by " + open.slip.by +
                  ": find out what of it is in the tank, then log it and close the slip",
              approval(open)}});
  page.add(std::move(slips));

  Section outside{"Out of window", {}};
  const std::string note = units.note();  // "": the unit that goes without saying
  std::vector<Column> heads = {{"tank"}, {"of"}};
  if (!note.empty()) heads.push_back({"in"});
  for (const char* head : {"found", "low", "high", "entry"}) heads.push_back({head, Align::number});
  Table out(std::move(heads));
  for (const auto& one : told.out_of_window) {
    const LevelUnit unit = unit_of(one.quantity, units);
    std::vector<std::string> row = {one.tank, pretty(one.quantity)};
    if (!note.empty()) row.push_back(unit.symbol);
    for (const double level : {one.found, one.low, one.high}) row.push_back(figure(unit.of(level)));
    row.push_back(std::to_string(one.seq));
    out.add(std::move(row));
  }
  if (out.empty())
    outside.blocks.emplace_back(Paragraph{"Nothing that was analysed in this shift."});
  else
    outside.blocks.emplace_back(std::move(out));
  page.add(std::move(outside));

  Section next{"Due before the end of the next shift", {}};
  Table due({{"due"}, {"tank"}, {"what"}});
  for (const auto& one : told.due)
    due.add({one.last ? (one.overdue ? "overdue since " : "") + local(one.at) : "never done", one.tank,
             in_words(one.what)});
  if (due.empty())
    next.blocks.emplace_back(Paragraph{"Nothing that has a schedule."});
  else
    next.blocks.emplace_back(std::move(due));
  page.add(std::move(next));

  Section logged{"Logged", {}};
  logged.blocks.emplace_back(Paragraph{counts(told.entries) + " Times of " + calendar.zone().name() + "."});
  if (!told.entries.empty()) logged.blocks.emplace_back(log_table(told.entries, {}, calendar));
  page.add(std::move(logged));

  Section end;
  if (!note.empty()) end.blocks.emplace_back(Paragraph{note});
  if (told.head) {
    end.blocks.emplace_back(Paragraph{"Entry " + std::to_string(told.head->seq) +
                                      " is the last. Its hash, to compare the log with later:"});
    end.blocks.emplace_back(Paragraph{told.head->hash});
  }
  end.blocks.emplace_back(SignatureLines{{"handed over by", by}, {"taken over by", ""}});
  page.add(std::move(end));
  return page;
}

}  // namespace bathwright::sheets
