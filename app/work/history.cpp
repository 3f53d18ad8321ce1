#include "history.hpp"

#include <bathwright/sheets/log_sheet.hpp>

#include "documents.hpp"

namespace bathwright::work {
namespace {

sheets::Before results_of(const logbook::Entry& entry, const Json& document,
                          const std::optional<shifts::Calendar>& calendar) {
  sheets::Before before;
  before.when = sheets::local_time(entry.happened.empty() ? entry.at : entry.happened, calendar);
  if (document.contains("pH") && document["pH"].is_number())
    before.level["pH"] = document["pH"].get<double>();
  before.density_kg_per_L = density_in(document).value_or(0);
  if (!document.contains("results") || !document["results"].is_array()) return before;
  for (const Json& result : document["results"])
    if (result.is_object() && result.value("unit", "") == "g/L" && result.contains("quantity") &&
        result["quantity"].is_string() && result.contains("value") && result["value"].is_number())
      before.level[result["quantity"].get<std::string>()] = result["value"].get<double>();
  return before;
}

}  // namespace

Result<History> history_of(const Session& session, const std::string& tank, std::size_t count,
                           std::optional<std::int64_t> before) {
  History history;
  std::error_code failure;
  if (session.log_file.empty() || !std::filesystem::exists(log_path(session), failure)) return history;
  const auto log = open_log_to_read(session);
  if (!log) return log.problems();
  const auto calendar = calendar_of(*log);
  if (!calendar) return calendar.problems();
  logbook::Filter filter;
  filter.tank = tank;
  filter.kind = logbook::EntryKind::analysis;
  filter.newest_first = true;
  filter.limit = 100;  // as where a state to start from is looked for
  const auto entries = log->list(filter);
  if (!entries) return entries.problems();
  for (const auto& entry : *entries) {
    if (history.results.size() == count) break;
    const auto corrected = log->is_corrected(entry.seq);
    if (!corrected) return corrected.problems();
    Json document = Json::parse(entry.body, nullptr, false);
    if (*corrected || !document.is_object()) continue;
    if (!before || entry.seq < *before) history.results.push_back(results_of(entry, document, *calendar));
    if (history.latest) continue;
    history.latest = std::move(document);
    history.latest_seq = entry.seq;
  }
  return history;
}

}  // namespace bathwright::work
