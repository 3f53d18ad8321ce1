// Several processes with the same log open.
#include <fmt/format.h>

#include <chrono>

#include "processes.hpp"
#include "trials.hpp"

namespace faults {
namespace {

FaultRow at_once(int processes, int entries) {
  FaultRow row{.fault = fmt::format("{} processes write at once", processes),
               .made = fmt::format("{} entries each, as fast as they can, on the disk", entries / processes)};
  const Scratch folder;
  const auto path = folder / "shop.log";
  const auto begin = std::chrono::steady_clock::now();
  Processes writers(processes, [&](int, const Channel& parent) {
    auto opened = open_log(path);
    if (!opened) {
      parent.say(words(opened.problems(), path));
      return 1;
    }
    auto log = *std::move(opened);
    for (int i = 0; i < entries / processes; ++i) {
      const auto entry = log.append(numbered_note(i, 200));
      if (!entry) {
        parent.say(words(entry.problems(), path));
        return 2;
      }
      parent.acknowledge(*entry);
    }
    return 0;
  });
  Heard heard = writers.finish();
  const std::chrono::duration<double> took = std::chrono::steady_clock::now() - begin;
  row.runs = 1;
  row.messages.insert(heard.words.begin(), heard.words.end());
  if (heard.statuses != std::vector<int>(static_cast<std::size_t>(processes), 0))
    row.breaks(row.fault, "a writer gave up");
  if (heard.doubled != 0) row.breaks(row.fault, fmt::format("{} numbers given twice", heard.doubled));
  if (heard.acknowledged.size() != static_cast<std::size_t>(entries) ||
      heard.acknowledged.rbegin()->first != entries)
    row.breaks(row.fault, "the numbers have gaps");
  row.note = fmt::format("{:.1f} s, {:.0f} entries a second; no gap, none twice", took.count(),
                         entries / took.count());
  constexpr std::size_t in_flight = 0;
  check_kept(path, heard.acknowledged, in_flight, row.fault, row);
  return row;
}

}  // namespace

std::vector<FaultRow> writers_at_once(const Extent& extent) {
  return {at_once(2, extent.entries_at_once), at_once(4, extent.entries_at_once)};
}

}  // namespace faults
