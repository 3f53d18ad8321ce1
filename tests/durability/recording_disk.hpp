// A disk that remembers: every change SQLite makes to its files, in order, with the moments at which it asked
// for them to be on the disk. A shim over SQLite's own layer for the operating system (VFS); while one lives
// it is the default, so that the program under test needs no change. Not for building what a power cut
// leaves: that is disk_image.hpp.
#pragma once

#include <sqlite3.h>

#include <cstdint>
#include <memory>
#include <string>
#include <vector>

namespace faults {

/// One call that changes the disk, or asks it to keep a change.
struct DiskEvent {
  enum class Kind {
    create,       ///< the file's name came into its folder
    write,        ///< `bytes` at `offset`
    truncate,     ///< to `offset` bytes
    sync,         ///< the file's content is asked to be on the disk
    sync_folder,  ///< the names in the folder are asked to be on the disk
    remove,       ///< the file's name left its folder
    acknowledge   ///< not SQLite's: the caller was told that an entry is logged
  };
  Kind kind;
  std::string file{};  ///< its name without the folder; all files of a log share one folder
  std::int64_t offset = 0;
  std::string bytes{};
};

/// One at a time. Throws std::runtime_error where SQLite takes no other VFS.
class RecordingDisk {
 public:
  RecordingDisk();
  ~RecordingDisk();
  RecordingDisk(const RecordingDisk&) = delete;
  RecordingDisk& operator=(const RecordingDisk&) = delete;

  void acknowledge() { events_.push_back({DiskEvent::Kind::acknowledge}); }
  const std::vector<DiskEvent>& events() const { return events_; }

 private:
  std::vector<DiskEvent> events_;
};

}  // namespace faults
