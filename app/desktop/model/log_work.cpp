#include "log_work.hpp"

#include <algorithm>
#include <bathwright/sheets/log_sheet.hpp>

namespace bathwright::desktop {
namespace {

using work::Json;

LastSeen seen_in(const work::LastAnalysis& last) {
  LastSeen seen;
  seen.volume_L = last.volume.v;
  seen.at = last.book.from;
  seen.added_since = last.added_since;
  for (const Json& level : last.document.value("levels", Json::array())) {
    if (!level.is_object()) continue;
    const std::string state = level.value("state", ""), quantity = level.value("quantity", "");
    if (state == "stop") seen.stop.push_back(quantity);
    if (state == "below window") seen.low.push_back(quantity);
    if (state == "above window") seen.high.push_back(quantity);
  }
  return seen;
}

Outcome fill_in(LogNow& now, const LogQuestion& question, const logbook::Logbook& log) {
  const auto head = log.head();
  if (!head) return head.problems();
  if (*head) now.last = (*head)->seq;
  auto people = log.people();
  if (!people) return people.problems();
  now.people = *std::move(people);
  auto calendar = work::calendar_of(log);
  if (!calendar) return calendar.problems();
  now.calendar = *std::move(calendar);
  if (now.calendar) {
    const auto time = work::wall_clock().utc_now();
    if (const auto shift = hand_over::latest_shift(*now.calendar, time)) {
      auto told = hand_over::hand_over(log, *now.calendar, *shift, *question.tanks, time);
      if (!told) return told.problems();
      now.told = *std::move(told);
    }
  }
  for (const bath::Tank& tank : *question.tanks) {
    const auto last = work::last_analysis(question.session, tank.name);
    if (last && *last) now.seen[tank.name] = seen_in(**last);  // else the open tank's state says why
  }
  const auto open = log.open_slips();
  if (!open) return open.problems();
  for (const logbook::Entry& slip : *open) now.seen[slip.tank].slip_open = true;
  auto slip = work::open_slip(log, question.tank);
  if (!slip) return slip.problems();
  now.slip = *std::move(slip);
  logbook::Filter filter;
  filter.newest_first = true;
  filter.limit = most_entries;
  filter.text = question.filter;
  auto entries = log.list(filter);
  if (!entries) return entries.problems();
  now.entries = *std::move(entries);
  if (question.shown > 0) {
    const auto entry = log.find(question.shown);
    if (!entry) return entry.problems();
    const Json body = Json::parse(entry->body, nullptr, false);
    now.entry_text =
        sheets::log_entry(*entry, {}, body.is_discarded() ? entry->body : work::text_of(body, 2));
  }
  return Done{};
}

}  // namespace

LogNow read_log(const LogQuestion& question) {
  LogNow now;
  std::error_code failed;
  if (!std::filesystem::exists(work::log_path(question.session), failed)) return now;  // nothing logged yet
  const auto log = work::open_log_to_read(question.session);
  const Outcome done = log ? fill_in(now, question, *log) : Outcome(log.problems());
  if (!done) now.problems = done.problems();
  return now;
}

}  // namespace bathwright::desktop
