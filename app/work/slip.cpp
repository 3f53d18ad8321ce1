#include "slip.hpp"

#include <bathwright/sheets/log_sheet.hpp>
#include <cmath>

#include "documents.hpp"

namespace bathwright::work {
namespace {

/// Whether a document of `analyse` judged one of the tank's aims by other limits than it has now.
bool other_limits(const bath::Tank& tank, const Json& document) {
  if (!document.contains("levels") || !document["levels"].is_array()) return false;
  constexpr double rounding = 1e-9;
  for (const Json& level : document["levels"]) {
    if (!level.is_object()) continue;
    const bath::Aim* aim = tank.aim(level.value("quantity", ""));
    if (!aim) continue;
    for (const auto& [key, now] : {std::pair{"low", aim->low}, {"aim", aim->aim}, {"high", aim->high}})
      if (level.contains(key) && level[key].is_number() &&
          std::abs(level[key].get<double>() - now) > rounding * (1 + std::abs(now)))
        return true;
  }
  return false;
}

std::string revision_in(const Json& document) {
  const Json limits = document.value("limits", Json::object());
  return limits.is_object() ? limits.value("revision", "") : "";
}

}  // namespace

std::vector<std::string> slip_stops(const bath::Tank& tank, const Analysed& analysed,
                                    const dosing::AdditionSheet& sheet, const History& history) {
  std::vector<std::string> stops;
  if (!sheet.plans.empty())
    for (const auto& addition : sheet.plans.front().additions) {
      const bath::ShelfItem* item = tank.on_shelf(addition.chemical);
      if (item && item->expired_on(analysed.readings.sampled))
        stops.push_back("Lot " + (item->lot.empty() ? std::string() : item->lot + " ") + "of " +
                        item->stock.name + " expired on " + item->expires +
                        ": take another, and enter it in the tank file.");
    }
  const std::string revision = tank.limits.revision;
  if (history.latest && !revision.empty() && revision == revision_in(*history.latest) &&
      other_limits(tank, *history.latest))
    stops.push_back("The limits are not those of entry " + std::to_string(*history.latest_seq) +
                    ", though both are revision " + revision + ": whoever sets limits gives them a new one.");
  return stops;
}

std::string hindrance(const dosing::AdditionSheet& sheet, const Analysed& analysed,
                      const std::vector<std::string>& stops) {
  const bool own = !sheet.plans.empty() && sheet.plans.front().kind == "own list";
  if (own && !sheet.refused.empty()) return sheet.refused.front().reason;
  if (own && !sheet.plans.front().feasible) return "a check stops a step of this list";
  if (sheet.plans.empty() || !sheet.plans.front().feasible) return "no plan meets every aim";
  if (sheet.plans.front().additions.empty()) return "there is nothing to add";
  if (!analysed.analysis.suspects.empty())
    return "a reading is suspect: " + analysed.analysis.suspects.front().what;
  if (!analysed.changed_since.empty()) return analysed.changed_since.front();
  return stops.empty() ? "" : stops.front();
}

Result<LoggedDose> log_dose(const Session& session, const Shop& shop, const std::string& readings_path,
                            const Analysed& analysed, const Json& doc, bool issue_slip) {
  LoggedDose logged;
  std::vector<logbook::NewEntry> entries;
  const auto add = [&](logbook::EntryKind kind, Json body) -> Outcome {
    auto entry = entry_computed(shop, readings_path, kind, std::move(body));
    if (!entry) return entry.problems();
    entries.push_back(*std::move(entry));
    return Done{};
  };
  if (analysed.logged_as) {
    logged.analysis_was_there = true;
    logged.entries.push_back(*analysed.logged_as);
  } else if (Outcome added = add(logbook::EntryKind::analysis,
                                 analysis_document(shop.tank, shop.chemistry, analysed.analysis));
             !added) {
    return added.problems();
  }
  if (Outcome added = add(logbook::EntryKind::plan, doc); !added) return added.problems();
  if (issue_slip)
    if (Outcome added =
            add(logbook::EntryKind::slip, {{"plan", doc["plans"].front()}, {"cautions", doc["cautions"]}});
        !added)
      return added.problems();
  auto opened = open_log_to_write(session);
  if (!opened) return opened.problems();
  OpenLog open = *std::move(opened);
  const auto written = append_all(session, open, std::move(entries));
  if (!written) return written.problems();
  const auto calendar = calendar_of(open.log);
  if (!calendar) return calendar.problems();
  for (const auto& entry : *written) logged.entries.push_back(entry.seq);
  if (issue_slip) logged.slip = logged.entries.back();
  logged.at = sheets::local_time(written->back().at, *calendar);
  logged.path = open.path;
  return logged;
}

sheets::Lines lines_of(const LoggedDose& logged) {
  sheets::Lines lines;
  std::string numbers;
  for (const std::int64_t seq : logged.entries)
    numbers += (numbers.empty() ? "" : ", ") + std::to_string(seq);
  if (logged.analysis_was_there)
    sheets::say(lines,
                "The analysis is already logged as entry " + std::to_string(logged.entries.front()) + ".");
  sheets::say(lines, "Logged in " + logged.path.string() + ": entries " + numbers + ".");
  if (logged.slip)
    sheets::say(lines, "Slip " + std::to_string(*logged.slip) + " is open: log each step with --slip " +
                           std::to_string(*logged.slip) + ", then bathwright log close " +
                           std::to_string(*logged.slip) + ".");
  return lines;
}

sheets::Page page_of(const Session& session, const Shop& shop, const DoseToPrint& dose) {
  const bool issued = dose.logged && dose.logged->slip;
  sheets::Signature signature;
  signature.prepared_by = signer(session);
  signature.shift = session.shift;
  signature.program = program_and_version();
  if (dose.logged) signature.issued = dose.logged->at;
  if (issued) {
    signature.slip = dose.logged->slip;
    signature.approved_by = session.witness;
  }
  return sheets::addition_page({shop.tank, shop.type(), dose.analysed.readings, dose.analysed.analysis,
                                dose.sheet, dose.analysed.changed_since, dose.stops, dose.history.results,
                                std::move(signature), dose.units});
}

}  // namespace bathwright::work
