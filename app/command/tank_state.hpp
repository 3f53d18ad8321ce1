// The state a verb starts from: today's readings, else the last logged analysis, else the tank's aims.
#pragma once

#include "log_access.hpp"
#include "shop.hpp"

namespace bathwright::command {

struct StartingState {
  bath::TankState state;
  std::string from;  ///< "readings of n-07-morning.toml"
};

Result<StartingState> starting_state(const Context& context, const Shop& shop,
                                     const std::string& readings_path);

/// The readings worked out, with the last logged analysis as the book.
Result<analysis::Analysis> analyse(const Context& context, const Shop& shop,
                                   const std::string& readings_path);

}  // namespace bathwright::command
