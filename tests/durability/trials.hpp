// The faults that are made, each as one or more rows of the table.
#pragma once

#include <random>
#include <vector>

#include "fault_row.hpp"

namespace faults {

/// Writers killed (SIGKILL) at a random moment, some while they make the file.
[[nodiscard]] FaultRow killed_writers(const Extent& extent, std::mt19937& random);

/// Power cuts on a simulated disk, and two controls on disks that lie.
[[nodiscard]] std::vector<FaultRow> power_cuts(const Extent& extent, std::mt19937& random);

/// A disk that fills up: a small file system in memory where the user may mount one, and a limit on file
/// size.
[[nodiscard]] std::vector<FaultRow> full_disks(const Extent& extent);

/// What others do around an open log: permissions, removal, locks, the wall clock.
[[nodiscard]] std::vector<FaultRow> surroundings();

/// Two and four processes that write at once.
[[nodiscard]] std::vector<FaultRow> writers_at_once(const Extent& extent);

/// Every page of a log damaged, one at a time, and every frame of its write-ahead log.
[[nodiscard]] std::vector<FaultRow> damaged_pages(const Extent& extent, std::mt19937& random);

}  // namespace faults
