// A bath type as a plugin states it (plugins/include/bathwright_plugin.h), copied into the value the engine
// works with, once every check has passed. Not for: files (loader.hpp).
#pragma once

#include <bathwright/bath/bath_type.hpp>

struct bw_bath_type;

namespace bathwright::plugin_host {

/// A field of a bath type's tables. Row 1 is the first; row 0 stands for a field of the bath type itself.
struct Place {
  std::string table;
  std::size_t row = 0;
  std::string field;
};

/// Copies and checks a plugin's tables. Fails with every problem found, each naming plugin, table, row (1 is
/// the first) and field:
///   sizes        rows at least as long as in version 1.0; longer rows are read as far as they are known
///   text         there where required, UTF-8, not too long
///   numbers      finite, or NaN where unknown is allowed; windows ordered; a source for each
///   references   unique ids; every id that is referred to exists
///   chemistry    formulae read; own reactions conserve atoms and charge; components are basis species, one
///                found by charge and H^+ by pH; watched solids exist and can form from the components
///   safety       cyanide, chromium(VI), fluoride or peroxide only with a caution of level stop
/// Keeps of the plugin nothing but its functions. `places` becomes the place of each problem, in their order,
/// for a caller who can say it better.
Result<bath::BathType> read_bath_type(const bw_bath_type& stated, std::vector<Place>* places = nullptr);

}  // namespace bathwright::plugin_host
