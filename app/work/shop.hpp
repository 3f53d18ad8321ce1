// A tank file with everything that is needed to compute its tank: the bath types, the one it names, the
// chemistry.
#pragma once

#include <bathwright/bath/chemistry.hpp>
#include <bathwright/plugin_host/registry.hpp>

#include "session.hpp"

namespace bathwright::work {

/// The program's own plugin folders, the user's, then those named with --plugins; the user's data and cache.
[[nodiscard]] plugin_host::Places plugin_places(const Session& session);

/// What those places have.
[[nodiscard]] plugin_host::BathTypes known_bath_types(const Session& session);

struct Shop {
  bath::Tank tank;
  bath::Chemistry chemistry;
  std::string made_with;  ///< the bath type as the log names it: identifier, version, hash of its file

  [[nodiscard]] const bath::BathType& type() const { return chemistry.type(); }
};

/// Reads the tank and prepares its chemistry. Fails on the file, on a bath type nobody provides, on aims at
/// quantities the bath type does not have, on temperatures it does not cover.
Result<Shop> open_shop(const Session& session, const std::string& tank_path);

/// The same for a tank that was read already.
Result<Shop> shop_of(const Session& session, bath::Tank tank);

}  // namespace bathwright::work
