// What a station keeps, and the steps that sending, asking and verifying share.
#pragma once

#include "bathwright/plant/station.hpp"
#include "link.hpp"

namespace bathwright::plant {

struct Station::State {
  Link link;
  std::string site;
  bool format_known = false;

  /// That the server's tables are of this program's version; asked once.
  Outcome check_format();

  /// Every entry of the chain, in order. Reads in pages, so that no answer takes long.
  Result<std::vector<logbook::Entry>> entries_of(const std::string& chain);
};

}  // namespace bathwright::plant
