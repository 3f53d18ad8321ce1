// kill -9 at a random moment.
#include <fmt/format.h>

#include <chrono>
#include <thread>

#include "processes.hpp"
#include "trials.hpp"

namespace faults {
namespace {

int append_until_killed(const std::filesystem::path& path, const Channel& parent) {
  auto opened = open_log(path);
  if (!opened) return 1;
  auto log = *std::move(opened);
  for (std::int64_t number = 1;; ++number) {
    const auto entry = log.append(numbered_note(number, 200));
    if (!entry) return 1;
    parent.acknowledge(*entry);
  }
}

}  // namespace

FaultRow killed_writers(const Extent& extent, std::mt19937& random) {
  FaultRow row{.fault = "writer killed", .made = "SIGKILL 0 to 30 ms after its start or its first entry"};
  constexpr int runs_per_file = 6;  // fresh files, so that some writers die while the file is made
  const Scratch folder;
  std::filesystem::path path;
  Acknowledged acknowledged;
  std::int64_t before_first = 0;
  for (int run = 0; run < extent.killed_writers; ++run) {
    if (run % runs_per_file == 0) {
      path = folder / fmt::format("shop-{}.log", run);
      acknowledged.clear();
    }
    Processes writer(1, [&](int, const Channel& parent) { return append_until_killed(path, parent); });
    // Every second writer lives to its first acknowledgement, however slow the machine is.
    if (run % 2 == 1) writer.wait_for_entry();
    std::this_thread::sleep_for(std::chrono::microseconds(random() % 30'000));
    writer.kill_all();
    const Heard heard = writer.finish();
    const std::string where = fmt::format("run {}", run);
    if (heard.statuses != std::vector<int>{-1}) row.breaks(where, "the writer ended by itself");
    if (heard.acknowledged.empty()) ++before_first;
    acknowledged.insert(heard.acknowledged.begin(), heard.acknowledged.end());
    ++row.runs;
    // Every second writer finds the log as the one before it left it; only then is it looked into and closed.
    if (run % 2 == 0) continue;
    constexpr std::size_t in_flight = 2;  // one of each
    check_kept(path, acknowledged, in_flight, where, row);
  }
  row.note = fmt::format("{} killed before their first entry", before_first);
  return row;
}

}  // namespace faults
