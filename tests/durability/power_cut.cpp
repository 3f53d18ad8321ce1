// The power is cut between any two calls to the disk of a run of appends.
#include <fmt/format.h>

#include <algorithm>
#include <fstream>
#include <iterator>
#include <stdexcept>

#include "disk_image.hpp"
#include "processes.hpp"
#include "trials.hpp"

namespace faults {
namespace {

namespace fs = std::filesystem;
using Kind = DiskEvent::Kind;

constexpr const char* log_name = "shop.log";

/// A run on a recording disk: what was there before, what happened, what was acknowledged in which order.
struct Recording {
  std::string name;
  std::string before;  ///< content of the log before the run; empty: there was none
  std::vector<std::pair<std::int64_t, std::string>> logged_before, acknowledged;
  std::vector<DiskEvent> events;
};

/// `sessions` times the log is opened, `each` entries of `bytes` are logged, and it is closed.
Recording record(const std::string& name, const fs::path& begin_with, int sessions, int each,
                 std::size_t bytes) {
  const Scratch folder(Scratch::Place::memory);
  const fs::path log_path = folder / log_name;
  Recording recording{.name = name, .before = {}, .logged_before = {}, .acknowledged = {}, .events = {}};
  if (!begin_with.empty()) {
    std::ifstream file(begin_with, std::ios::binary);
    recording.before.assign(std::istreambuf_iterator<char>(file), {});
    fs::copy_file(begin_with, log_path);
    const Scratch aside(Scratch::Place::memory);
    fs::copy_file(begin_with, aside / log_name);
    const auto log = must(open_log(aside / log_name));
    for (const auto& entry : must(log.list())) recording.logged_before.emplace_back(entry.seq, entry.hash);
  }
  RecordingDisk disk;
  for (int session = 0; session < sessions; ++session) {
    auto log = must(open_log(log_path));
    for (int i = 0; i < each; ++i) {
      const auto entry = must(log.append(numbered_note(i, bytes)));
      recording.acknowledged.emplace_back(entry.seq, entry.hash);
      disk.acknowledge();
    }
  }
  recording.events = disk.events();
  return recording;
}

/// Pages that went from the write-ahead log into the main file while entries were logged, not only at the
/// close.
std::int64_t pages_checkpointed(const Recording& recording) {
  const auto& events = recording.events;
  const auto acknowledges = [](const DiskEvent& event) { return event.kind == Kind::acknowledge; };
  const auto first = std::find_if(events.begin(), events.end(), acknowledges);
  const auto last = std::find_if(events.rbegin(), events.rend(), acknowledges).base();
  return std::count_if(first, last, [](const DiskEvent& event) {
    return event.kind == Kind::write && event.file == log_name;
  });
}

/// The next program logs one entry and falls, too, with the log open: beneath its write-ahead frames lie
/// those that the first left.
void check_after_second_fall(const fs::path& path, Acknowledged& acknowledged, std::size_t in_flight,
                             const std::string& where, FaultRow& row) {
  auto opened = open_log(path);
  if (!opened) return row.breaks(where, "does not open: " + text(opened.problems()));
  auto log = *std::move(opened);
  const auto entry = log.append(numbered_note(0, 10));
  if (!entry) return row.breaks(where, "takes no further entry: " + text(entry.problems()));
  acknowledged[entry->seq] = entry->hash;
  const Scratch fallen(Scratch::Place::memory);
  for (const char* end : {"", "-wal"})
    fs::copy_file(path.string() + end, fallen / (log_name + std::string(end)));
  check_kept(fallen / log_name, acknowledged, in_flight, where + ", second fall", row);
}

/// Cuts at every `stride`-th boundary between two events, `images` times where the outcome is open.
FaultRow cut_everywhere(const Recording& recording, Honesty honesty, int stride, int images,
                        std::mt19937& random) {
  FaultRow row;
  SimulatedDisk disk(honesty);
  if (!recording.before.empty()) disk.put(log_name, recording.before);
  Acknowledged so_far(recording.logged_before.begin(), recording.logged_before.end());
  auto next = recording.acknowledged.begin();
  std::size_t boundary = 0;
  for (const DiskEvent& event : recording.events) {
    disk.happen(event);
    if (event.kind == Kind::acknowledge) so_far.insert(*next++);
    if (boundary++ % static_cast<std::size_t>(stride) != 0) continue;
    const int here = disk.has_unsynced_changes() ? images : 1;
    for (int image = 0; image < here; ++image) {
      const auto survivors = image == 0 ? Survivors::none : image == 2 ? Survivors::all : Survivors::some;
      const Scratch folder(Scratch::Place::memory);
      disk.cut(folder.path(), survivors, random);
      Acknowledged acknowledged = so_far;
      constexpr std::size_t in_flight = 1;
      const std::string where = fmt::format("{}, behind event {}, image {}", recording.name, boundary, image);
      constexpr int one_in = 4;
      if (survivors == Survivors::some && random() % one_in == 0)
        check_after_second_fall(folder / log_name, acknowledged, in_flight, where, row);
      else
        check_kept(folder / log_name, acknowledged, in_flight, where, row);
      ++row.runs;
    }
  }
  return row;
}

}  // namespace

std::vector<FaultRow> power_cuts(const Extent& extent, std::mt19937& random) {
  const Recording creation = record("creation", {}, 3, 4, 100);
  const Recording migration = record("migration", VERSION_1_LOG, 2, 3, 100);
  const Recording long_run = record("long run", {}, 1, extent.long_run_entries, 6000);

  if (pages_checkpointed(long_run) == 0)
    throw std::runtime_error("the long run is too short for a checkpoint");
  constexpr int long_run_images = 2;  // its boundaries are many and alike
  std::vector<FaultRow> rows;
  const auto add = [&](const Recording& recording, std::string fault, std::string made, Honesty honesty,
                       int stride, int images) {
    FaultRow row = cut_everywhere(recording, honesty, stride, images, random);
    row.fault = std::move(fault);
    row.made = std::move(made);
    row.note = fmt::format("{} calls to the disk, {} pages checkpointed between entries",
                           recording.events.size(), pages_checkpointed(recording));
    rows.push_back(std::move(row));
  };
  const std::string how =
      "what was not synced is kept, dropped or torn at random in sectors of 512 bytes, names included";
  add(creation, "power cut while the log is made, opened and closed", how, Honesty::honest,
      extent.short_run_stride, extent.power_cut_images);
  add(migration, "power cut while a log of the first format is opened and goes on", how, Honesty::honest,
      extent.short_run_stride, extent.power_cut_images);
  add(long_run, "power cut in a run of appends with checkpoints", how, Honesty::honest,
      extent.long_run_stride, long_run_images);
  constexpr int control_stride = 4;
  const std::string control = "negative control, losses expected: ";
  add(creation, control + "the disk ignores every sync", how, Honesty::ignores_sync, control_stride, 3);
  add(creation, control + "the disk ignores the sync of the folder", how, Honesty::ignores_folder_sync,
      control_stride, 3);
  for (FaultRow& row : rows) row.losses_expected = row.fault.starts_with(control);
  return rows;
}

}  // namespace faults
