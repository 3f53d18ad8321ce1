// A disk without space, at every size it may have.
#include <fmt/format.h>
#include <sched.h>
#include <sys/mount.h>
#include <sys/resource.h>

#include <csignal>

#include "processes.hpp"
#include "trials.hpp"

namespace faults {
namespace {

constexpr int largest_KiB = 400;  // holds the tables, the helper files and some entries
constexpr std::size_t entry_bytes = 10'000;
constexpr int most_entries = 60;  // more than fit

struct Filled {
  Acknowledged acknowledged;
  std::string message;
};

/// Opens and logs until it is refused.
Filled fill(const std::filesystem::path& path) {
  Filled filled;
  auto opened = open_log(path);
  if (!opened) {
    filled.message = words(opened.problems(), path);
    return filled;
  }
  auto log = *std::move(opened);
  for (int i = 0; i < most_entries; ++i) {
    const auto entry = log.append(numbered_note(i, entry_bytes));
    if (!entry) {
      filled.message = words(entry.problems(), path);
      break;
    }
    filled.acknowledged[entry->seq] = entry->hash;
  }
  return filled;
}

void judge(Filled filled, const std::filesystem::path& path, const std::string& where, FaultRow& row) {
  ++row.runs;
  row.messages.insert(filled.message);
  if (filled.message.find("the disk is full") == std::string::npos)
    row.breaks(where, "the message is \"" + filled.message + "\"");
  constexpr std::size_t in_flight = 0;  // what was refused must not turn up
  check_kept(path, filled.acknowledged, in_flight, where, row);
}

/// A file system in memory that only this process sees.
class SmallDisk {
 public:
  explicit SmallDisk(const std::filesystem::path& folder) : folder_(folder) {
    static const bool own_mounts =
        unshare(CLONE_NEWNS) == 0 && mount("none", "/", nullptr, MS_REC | MS_PRIVATE, nullptr) == 0;
    mounted_ = own_mounts && mount("none", folder_.c_str(), "tmpfs", 0, "size=1m") == 0;
  }
  ~SmallDisk() {
    if (mounted_) umount2(folder_.c_str(), MNT_DETACH);
  }
  SmallDisk(const SmallDisk&) = delete;
  SmallDisk& operator=(const SmallDisk&) = delete;
  bool mounted() const { return mounted_; }
  void resize(int size_KiB) const {
    mount("none", folder_.c_str(), "tmpfs", MS_REMOUNT, fmt::format("size={}k", size_KiB).c_str());
  }

 private:
  std::filesystem::path folder_;
  bool mounted_ = false;
};

FaultRow small_file_system(const Extent& extent) {
  FaultRow row{.fault = "disk full",
               .made = fmt::format("file system of {} to {} KiB in steps of {}; then space is given",
                                   extent.disk_sizes_step_KiB, largest_KiB, extent.disk_sizes_step_KiB)};
  for (int size_KiB = extent.disk_sizes_step_KiB; size_KiB <= largest_KiB;
       size_KiB += extent.disk_sizes_step_KiB) {
    const Scratch folder;
    const SmallDisk disk(folder.path());
    if (!disk.mounted()) {
      row.note = "not run: only root may mount a file system";
      return row;
    }
    disk.resize(size_KiB);
    const Filled filled = fill(folder / "shop.log");
    disk.resize(4096);
    judge(filled, folder / "shop.log", fmt::format("{} KiB", size_KiB), row);
  }
  return row;
}

/// What a quota or `ulimit -f` does.
FaultRow limited_file_size(const Extent& extent) {
  FaultRow row{.fault = "no file may grow further",
               .made = fmt::format("limit on file size of {} to {} KiB in steps of {}; then lifted",
                                   extent.disk_sizes_step_KiB, largest_KiB, extent.disk_sizes_step_KiB)};
  rlimit before{};
  getrlimit(RLIMIT_FSIZE, &before);
  const auto signal_before = std::signal(SIGXFSZ, SIG_IGN);
  for (int size_KiB = extent.disk_sizes_step_KiB; size_KiB <= largest_KiB;
       size_KiB += extent.disk_sizes_step_KiB) {
    const Scratch folder;
    rlimit limit = before;
    limit.rlim_cur = static_cast<rlim_t>(size_KiB) * 1024;
    setrlimit(RLIMIT_FSIZE, &limit);
    const Filled filled = fill(folder / "shop.log");
    setrlimit(RLIMIT_FSIZE, &before);
    judge(filled, folder / "shop.log", fmt::format("{} KiB", size_KiB), row);
  }
  std::signal(SIGXFSZ, signal_before);
  return row;
}

}  // namespace

std::vector<FaultRow> full_disks(const Extent& extent) {
  return {small_file_system(extent), limited_file_size(extent)};
}

}  // namespace faults
