// One line of the table of faults.
#pragma once

#include <cstdint>
#include <set>
#include <string>
#include <vector>

namespace faults {

struct FaultRow {
  std::string fault{};
  std::string made{};                 ///< how it was made
  std::int64_t runs = 0;              ///< times the fault was made
  std::int64_t acknowledged = 0;      ///< entries whose append had returned, over all runs
  std::int64_t found = 0;             ///< of those, entries read back unchanged afterwards
  std::set<std::string> messages{};   ///< what the person was told, each wording once
  std::vector<std::string> broken{};  ///< promises that did not hold, one line each; must stay empty
  std::string note{};                 ///< further figures
  bool losses_expected = false;       ///< a negative control: the trial shows that it can see a loss

  void breaks(const std::string& where, const std::string& what) { broken.push_back(where + ": " + what); }
};

/// How much of each fault to make.
struct Extent {
  int killed_writers;
  int power_cut_images;                   ///< of each boundary between two calls to the disk
  int short_run_stride, long_run_stride;  ///< 1 cuts at every boundary of a run, n at every n-th
  int long_run_entries;
  int disk_sizes_step_KiB;
  int entries_at_once;  ///< by all processes together
  int frame_stride;     ///< every n-th frame of the write-ahead file is damaged
  int damaged_entries;  ///< in the log whose pages are damaged one by one
};

inline constexpr Extent in_every_run{40, 2, 3, 60, 160, 24, 120, 5, 24};
inline constexpr Extent full{2000, 24, 1, 1, 250, 4, 10'000, 1, 200};

}  // namespace faults
