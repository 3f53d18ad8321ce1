#include "bathwright/hand_over/hand_over.hpp"

#include <bathwright/logbook/approval.hpp>
#include <chrono>
#include <map>
#include <nlohmann/json.hpp>

namespace bathwright::hand_over {
namespace {

using Json = nlohmann::json;

/// What an analysis found itself: levels carried over from the book were not analysed.
std::map<std::string, double> found_in(const logbook::Entry& analysis) {
  std::map<std::string, double> found;
  const Json body = Json::parse(analysis.body, nullptr, false);
  if (!body.is_object()) return found;
  if (body.contains("pH") && body["pH"].is_number()) found["pH"] = body["pH"];
  if (!body.contains("results") || !body["results"].is_array()) return found;
  for (const Json& result : body["results"]) {
    if (!result.is_object() || !result.contains("value") || !result["value"].is_number()) continue;
    const std::string from = result.value("from", "");
    if (from == "titration" || from == "found") found[result.value("quantity", "")] = result["value"];
  }
  return found;
}

/// When each controlled quantity of a tank was last analysed.
Result<std::map<std::string, shifts::UtcTime>> last_analysed(const logbook::Logbook& log,
                                                             const bath::Tank& tank) {
  std::map<std::string, shifts::UtcTime> last;
  logbook::Filter filter;
  filter.tank = tank.name;
  filter.kind = logbook::EntryKind::analysis;
  filter.newest_first = true;
  filter.limit = 50;
  const auto wanted = [&] {
    for (const bath::Aim& aim : tank.aims)
      if (aim.every_h && !last.contains(aim.quantity)) return true;
    return false;
  };
  while (wanted()) {
    const auto entries = log.list(filter);
    if (!entries) return entries.problems();
    if (entries->empty()) break;
    for (const auto& entry : *entries) {
      const auto corrected = log.is_corrected(entry.seq);
      if (!corrected) return corrected.problems();
      if (*corrected) continue;
      if (const auto time = logbook::utc_from_iso(entry.happened.empty() ? entry.at : entry.happened))
        for (const auto& [quantity, value] : found_in(entry)) last.try_emplace(quantity, *time);
    }
    filter.after_seq = entries->back().seq;
  }
  return last;
}

void judge(const logbook::Entry& analysis, const bath::Tank& tank, std::vector<OutOfWindow>& out) {
  const auto found = found_in(analysis);
  for (const bath::Aim& aim : tank.aims) {
    const auto level = found.find(aim.quantity);
    if (level != found.end() && (level->second < aim.low || level->second > aim.high))
      out.push_back({tank.name, aim.quantity, level->second, aim.low, aim.high, analysis.seq});
  }
}

}  // namespace

Result<shifts::ShiftSpan> latest_shift(const shifts::Calendar& calendar, shifts::UtcTime now) {
  const auto moment = std::chrono::milliseconds(1);
  const auto recent = calendar.shifts_between(now - std::chrono::days(7), now + moment);
  if (!recent.empty()) return recent.back();
  return Problem{Fault::bad_input, "shifts", "none began in the last week", "a shift to hand over",
                 "Look at the log's shifts."};
}

Result<HandOver> hand_over(const logbook::Logbook& log, const shifts::Calendar& calendar,
                           const shifts::ShiftSpan& shift, const std::vector<bath::Tank>& tanks,
                           shifts::UtcTime now) {
  HandOver told;
  told.shift = shift;
  logbook::Filter filter;
  filter.from = shift.from;
  filter.to = shift.to;
  auto entries = log.list(filter);
  if (!entries) return entries.problems();
  told.entries = *std::move(entries);
  const auto open = log.open_slips();
  if (!open) return open.problems();
  for (const logbook::Entry& slip : *open) {
    const auto approved = logbook::approved_by(log, slip);
    if (!approved) return approved.problems();
    const auto must = logbook::asks_approval(log, slip.tank);
    if (!must) return must.problems();
    told.open_slips.push_back({slip, *approved, *must});
  }
  auto head = log.head();
  if (!head) return head.problems();
  told.head = *std::move(head);

  std::vector<shifts::Due> all;
  for (const bath::Tank& tank : tanks) {
    const logbook::Entry* analysis = nullptr;
    for (const auto& entry : told.entries) {
      if (entry.tank != tank.name || entry.kind != logbook::EntryKind::analysis) continue;
      const auto corrected = log.is_corrected(entry.seq);
      if (!corrected) return corrected.problems();
      if (!*corrected) analysis = &entry;
    }
    if (analysis) judge(*analysis, tank, told.out_of_window);
    const auto last = last_analysed(log, tank);
    if (!last) return last.problems();
    for (const bath::Aim& aim : tank.aims) {
      if (!aim.every_h) continue;
      const auto found = last->find(aim.quantity);
      const shifts::Schedule schedule{tank.name, "analysis of " + aim.quantity,
                                      std::chrono::round<std::chrono::minutes>(
                                          std::chrono::duration<double, std::ratio<3600>>(*aim.every_h))};
      all.push_back(
          shifts::due(schedule, found == last->end() ? std::nullopt : std::optional(found->second), now));
    }
  }
  told.due = shifts::due_by_end_of_next_shift(std::move(all), calendar, now);
  return told;
}

}  // namespace bathwright::hand_over
