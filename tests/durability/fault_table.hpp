// The table of faults as Markdown.
#pragma once

#include <string>
#include <vector>

#include "fault_row.hpp"

namespace faults {

/// Makes every fault. `seed` decides moments, sectors and bytes; the same seed does not give the same moments
/// of a kill, which hang on the machine.
[[nodiscard]] std::vector<FaultRow> make_all(const Extent& extent, unsigned seed);

[[nodiscard]] std::string markdown(const std::vector<FaultRow>& rows, unsigned seed);

/// One line for each promise that did not hold where it should; and for a negative control that saw no loss.
[[nodiscard]] std::vector<std::string> failures(const std::vector<FaultRow>& rows);

}  // namespace faults
