// A sealed, allowed and probed plugin loaded into this process. Not for: many files (registry.hpp).
#pragma once

#include "host_side.hpp"
#include "sealed_copy.hpp"

namespace bathwright::plugin_host {

struct LoadedPlugin {
  std::vector<bath::BathType> types;  ///< at least one; parked after faults (parking.hpp)
  Notes notes;                        ///< what the plugin had to say while loading
};

/// Runs the plugin's code with the rights of the user.
Result<LoadedPlugin> load(SealedCopy plugin);

}  // namespace bathwright::plugin_host
