// Which phases are present: letting one in, and which gives way when not all can stay.
#pragma once

#include "workspace.hpp"

namespace bathwright::speciation {

/// Whether the activity of water is fixed (it then belongs to every condition) or one more unknown. Two
/// hydrates of a salt can stand side by side only where it is unknown.
enum class WaterActivity { fixed, free };

/// ln of the ion product over the constant: positive above saturation.
[[nodiscard]] double ln_saturation(const Workspace& w, const Phase& phase);

/// Makes a supersaturated phase active. When its condition depends on those of the active phases, the
/// precipitate that runs out first as it forms is made inactive. False when none can give way.
bool let_in(Workspace& w, std::size_t entering, WaterActivity water);

}  // namespace bathwright::speciation
