#include <fmt/format.h>

#include <algorithm>
#include <bathwright/sheets/log_sheet.hpp>
#include <bathwright/sheets/names.hpp>
#include <chrono>

#include "views.hpp"

namespace bathwright::desktop {
namespace {

using sheets::figure;
using sheets::pretty;

/// The first thing an entry says, for a row of a table.
std::string first_words(const logbook::Entry& entry) {
  const work::Json body = work::Json::parse(entry.body, nullptr, false);
  if (!body.is_object()) return "";
  for (const char* key : {"note", "reason", "outcome", "name"})
    if (body.contains(key) && body[key].is_string()) return body[key].get<std::string>();
  if (body.contains("chemical") && body["chemical"].is_string()) {
    const work::Json amount = body.value("amount", work::Json());
    return (amount.is_number()   ? figure(amount.get<double>()) + " " + body.value("unit", "")
            : amount.is_string() ? amount.get<std::string>()
                                 : std::string()) +
           " " + body["chemical"].get<std::string>();
  }
  if (body.contains("results") && body["results"].is_array()) {
    std::string text;
    for (const work::Json& result : body["results"])
      if (result.is_object() && result.value("value", work::Json()).is_number())
        text += (text.empty() ? "" : ", ") + pretty(result.value("quantity", "")) + " " +
                figure(result["value"].get<double>(), 3);
    return text;
  }
  const work::Json* plan = body.contains("plan") ? &body["plan"] : nullptr;
  if (!plan && body.contains("plans") && body["plans"].is_array() && !body["plans"].empty())
    plan = &body["plans"].front();
  if (plan && plan->is_object() && plan->contains("additions") && (*plan)["additions"].is_array()) {
    std::string text;
    for (const work::Json& one : (*plan)["additions"])
      if (one.is_object() && one.value("amount", work::Json()).is_number())
        text += (text.empty() ? "" : ", ") + figure(one["amount"].get<double>(), 3) + " " +
                one.value("unit", "") + " " + one.value("chemical", "");
    return text;
  }
  return "";
}

LogRow row_of(const logbook::Entry& entry, const std::optional<shifts::Calendar>& calendar) {
  LogRow row;
  row.number = entry.seq;
  row.seq = std::to_string(entry.seq);
  row.at = sheets::local_time(entry.happened.empty() ? entry.at : entry.happened, calendar);
  row.kind = std::string(logbook::name(entry.kind));
  row.tank = entry.tank;
  row.by = entry.by + (entry.witness.empty() ? "" : " and " + entry.witness);
  row.words = first_words(entry);
  if (entry.about)
    row.words = "of entry " + std::to_string(*entry.about) + (row.words.empty() ? "" : ": " + row.words);
  return row;
}

}  // namespace

LineView line_view(const ShopFolder& shop, const LogNow& log, int selected) {
  LineView view;
  view.selected = selected;
  view.folder = shop.folder.string();
  for (const UnreadFile& one : shop.unread)
    view.unread.push_back({one.file.filename().string(), text(one.problems)});
  for (const bath::Tank& tank : *shop.tanks) {
    TankOnLine shown;
    const std::size_t space = tank.name.find(' ');
    shown.name = tank.name.substr(0, space);
    if (space != std::string::npos) shown.kind = tank.name.substr(space + 1);
    const double mark = tank.working_volume.v;
    shown.vessel = {1, tank.freeboard.v / mark, false};
    shown.word = "not analysed";
    const auto seen = log.seen.find(tank.name);
    if (seen != log.seen.end()) {
      const LastSeen& last = seen->second;
      if (last.volume_L) {
        shown.vessel.level = *last.volume_L / mark;
        shown.vessel.level_known = true;
        shown.word = "in window";
      }
      if (!last.high.empty())
        shown.state = charts::State::act, shown.word = pretty(last.high.front()) + " high";
      if (!last.low.empty()) shown.state = charts::State::act, shown.word = "add " + pretty(last.low.front());
      if (shown.state == charts::State::act && last.added_since) shown.word = "added: analyse again";
      if (!last.stop.empty())
        shown.state = charts::State::stop, shown.word = "stop: " + pretty(last.stop.front());
      if (last.slip_open && shown.state != charts::State::stop)
        shown.state = charts::State::act, shown.word = "slip is open";
    }
    view.tanks.push_back(std::move(shown));
    view.shop = tank.shop;
  }
  return view;
}

SlipView slip_view(const std::optional<work::OpenSlip>& slip, const std::optional<shifts::Calendar>& calendar,
                   const Units& units) {
  SlipView view;
  if (!slip) return view;
  view.number = slip->seq;
  view.issued = "issued " + sheets::local_time(slip->at, calendar) + " by " + slip->by;
  view.approved_by_second = !slip->approved_by.empty();
  view.approved = view.approved_by_second ? "approved by " + slip->approved_by
                                          : "nobody has approved it yet: a second person reads it and signs";
  view.all_done = true;
  for (const work::SlipStep& step : slip->steps) {
    SlipView::Row row;
    row.step = step.number;
    const std::string amount = units.amount(step.amount, step.unit);
    row.what = std::to_string(step.number) + "  " +
               (step.takes_out ? "take out " + amount + " of bath" : amount + " " + step.name);
    if (step.portions > 1) row.what += fmt::format(", {} of {}", step.portion, step.portions);
    row.how = step.how;
    if (step.wait_h > 0) row.wait = "then wait " + sheets::waiting(step.wait_h) + ", stirred";
    if (step.done_as)
      row.done = "entry " + std::to_string(*step.done_as) + ", " + sheets::local_time(step.done_at, calendar);
    view.all_done = view.all_done && step.done_as.has_value();
    view.steps.push_back(std::move(row));
  }
  return view;
}

ShiftView shift_view(const LogNow& log, shifts::UtcTime now) {
  ShiftView view;
  if (!log.calendar || !log.told) {
    view.shift = "No shifts are set";
    view.clock = "Settings has them: the strip then shows this shift's work and what is due.";
    return view;
  }
  const shifts::ShiftSpan& shift = log.told->shift;
  const std::string from = log.calendar->zone().local_text(shift.from),
                    to = log.calendar->zone().local_text(shift.to);
  view.shift = shift.label;
  view.clock = from.substr(from.size() - 5) + " to " + to.substr(to.size() - 5) + ", now " +
               log.calendar->zone().local_text(now).substr(11);
  const auto share = [&](shifts::UtcTime time) {
    return std::chrono::duration<double>(time - shift.from) /
           std::chrono::duration<double>(shift.to - shift.from);
  };
  view.elapsed = std::clamp(share(now), 0.0, 1.0);
  for (auto entry = log.told->entries.rbegin(); entry != log.told->entries.rend(); ++entry) {
    view.entries.push_back(row_of(*entry, log.calendar));
    if (const auto time = logbook::utc_from_iso(entry->at)) view.entries.back().place = share(*time);
  }
  for (const auto& [slip, approved_by, must_be_approved] : log.told->open_slips)
    view.open.push_back("slip " + std::to_string(slip.seq) + " of " +
                        slip.tank.substr(0, slip.tank.find(' ')) +
                        (must_be_approved && approved_by.empty() ? ", waits for approval" : ""));
  for (const shifts::Due& due : log.told->due)
    view.due.push_back(due.tank.substr(0, due.tank.find(' ')) + " " +
                       pretty(due.what.substr(due.what.rfind(' ') + 1)) + (due.overdue ? " (overdue)" : ""));
  return view;
}

LogView log_view(const LogNow& log) {
  LogView view;
  for (const logbook::Entry& entry : log.entries) view.rows.push_back(row_of(entry, log.calendar));
  view.shown_text = log.entry_text;
  for (const Problem& problem : log.problems) view.faults.push_back(problem.text());
  return view;
}

}  // namespace bathwright::desktop
