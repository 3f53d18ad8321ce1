// What a power cut may leave on the disk, built from recorded events.
//
// The model: what was synced is there. Of what was written since, each 512-byte sector stands as any one of
// the writes to it left it, independent of every other sector; the length of the file, and each name in the
// folder, likewise stand as they were at any moment since the last sync. A sector is written whole or not at
// all (SQLite's "powersafe overwrite", its default on this system).
#pragma once

#include <filesystem>
#include <map>
#include <memory>
#include <random>
#include <string>
#include <vector>

#include "recording_disk.hpp"

namespace faults {

/// What the disk does with a request to sync.
enum class Honesty {
  honest,
  ignores_sync,         ///< says done and keeps nothing: the negative control
  ignores_folder_sync,  ///< keeps files but forgets names
};

/// Which of the changes that were not synced are on the disk after the cut.
enum class Survivors { none, all, some };

class SimulatedDisk {
 public:
  explicit SimulatedDisk(Honesty honesty) : honesty_(honesty) {}

  /// A file that was there, safely, before the recording began.
  void put(const std::string& name, std::string bytes);

  void happen(const DiskEvent& event);

  /// True while a cut could leave more than one state.
  [[nodiscard]] bool has_unsynced_changes() const;

  /// Makes the files in `folder`, which must be empty, as the disk holds them if the power is cut now.
  void cut(const std::filesystem::path& folder, Survivors survivors, std::mt19937& random) const;

 private:
  struct File {
    std::string synced;
    std::vector<DiskEvent> unsynced;  ///< writes and truncations in order
  };
  using Name = std::vector<std::shared_ptr<File>>;  ///< what it stood for, one after the other; null: no file

  static std::string content(const File& file, Survivors survivors, std::mt19937& random);

  std::map<std::string, Name> names_;  ///< the first of each is synced, the last is current
  Honesty honesty_;
};

}  // namespace faults
