// A tank file with everything that is needed to compute its tank: the bath types, the one it names, the
// chemistry.
#pragma once

#include <bathwright/bath/chemistry.hpp>
#include <bathwright/plugin_host/registry.hpp>

#include "context.hpp"

namespace bathwright::command {

/// The program's own plugin folders, the user's, then those named with --plugins; the user's data and cache.
[[nodiscard]] plugin_host::Places plugin_places(const Context& context);

/// What those places have.
[[nodiscard]] plugin_host::BathTypes known_bath_types(const Context& context);

struct Shop {
  bath::Tank tank;
  bath::Chemistry chemistry;
  std::string made_with;  ///< the bath type as the log names it: identifier, version, hash of its file

  [[nodiscard]] const bath::BathType& type() const { return chemistry.type(); }
};

/// Reads the tank and prepares its chemistry. Fails on the file, on a bath type nobody provides, on aims at
/// quantities the bath type does not have, on temperatures it does not cover.
Result<Shop> open_shop(const Context& context, const std::string& tank_path);

using RunOnReadings =
    std::function<int(const Context&, const std::string& tank, const std::string& readings)>;
/// TANK and READINGS, for verbs that work readings out, and the action that takes them.
void add_tank_and_readings(CLI::App& verb, Context& context, Action& action, RunOnReadings run);

/// The same for a tank that was read already.
Result<Shop> shop_of(const Context& context, bath::Tank tank);

/// The state of a tank as the tank's own aims describe it, at the mark.
Result<bath::TankState> state_at_aims(const Shop& shop);

}  // namespace bathwright::command
