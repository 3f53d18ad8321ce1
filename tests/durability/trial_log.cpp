#include "trial_log.hpp"

#include <fmt/format.h>

namespace faults {

namespace fs = std::filesystem;
using logbook::Entry, logbook::Logbook, logbook::OpenMode;

bathwright::Result<Logbook> open_log(const fs::path& path, OpenMode mode, std::chrono::milliseconds wait,
                                     const logbook::Clock* clock) {
  static const logbook::SystemClock system_clock;
  return Logbook::open(path, mode, clock ? *clock : system_clock, {.wait = wait});
}

std::string mark(std::int64_t number) { return fmt::format("#{:05}#", number); }

logbook::NewEntry numbered_note(std::int64_t number, std::size_t bytes) {
  std::string text;
  while (text.size() < bytes) text += mark(number);
  return {.kind = logbook::EntryKind::note,
          .tank = "nickel-1",
          .shift = "night",
          .by = "line operator",
          .body = R"({"text":")" + text + R"("})"};
}

std::string words(const bathwright::Problems& problems, const fs::path& log) {
  std::string what = problems.front().what;
  const std::string folder = log.parent_path().string();
  for (std::size_t at = 0; !folder.empty() && (at = what.find(folder)) != std::string::npos;)
    what.replace(at, folder.size(), "F");
  return what;
}

void check_kept(const fs::path& path, Acknowledged& acknowledged, std::size_t in_flight,
                const std::string& where, FaultRow& row) {
  row.acknowledged += static_cast<std::int64_t>(acknowledged.size());
  auto opened = open_log(path);
  if (!opened) return row.breaks(where, "does not open: " + text(opened.problems()));
  Logbook log = *std::move(opened);
  const auto entries = log.list();
  if (!entries) return row.breaks(where, "cannot be listed: " + text(entries.problems()));

  Acknowledged held;
  for (const Entry& entry : *entries) held[entry.seq] = entry.hash;
  std::int64_t found = 0;
  for (const auto& [seq, hash] : acknowledged) {
    const auto same = held.find(seq);
    if (same != held.end() && same->second == hash) ++found;
  }
  row.found += found;
  const auto lost = static_cast<std::int64_t>(acknowledged.size()) - found;
  if (lost != 0) row.breaks(where, fmt::format("{} of {} acknowledged lost", lost, acknowledged.size()));
  if (lost == 0 && held.size() > acknowledged.size() + in_flight)
    row.breaks(where,
               fmt::format("{} entries that were never acknowledged", held.size() - acknowledged.size()));
  if (const auto report = log.verify(); !report.ok)
    row.breaks(where, "verify finds: " + report.problems.front().words);

  const auto next = log.append(numbered_note(0, 10));
  if (!next) return row.breaks(where, "takes no further entry: " + text(next.problems()));
  held[next->seq] = next->hash;
  acknowledged = std::move(held);
}

}  // namespace faults
