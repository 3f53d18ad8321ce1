// The anchors: one for each lot of entries that arrived, chained over all stations, so that the order of
// arrival is sealed. The server makes them (migrations.hpp); here they are read and computed again.
#pragma once

#include <cstdint>
#include <string>
#include <vector>

#include "bathwright/base/result.hpp"
#include "link.hpp"

namespace bathwright::plant {

/// That entries first_seq to last_seq of a chain arrived in one piece.
struct StoredAnchor {
  std::int64_t number = 0;  ///< 1, 2, 3 ... without gaps
  std::string site, chain;
  std::int64_t first_seq = 0, last_seq = 0;
  std::string last_hash;     ///< of entry last_seq
  std::int64_t arrival = 0;  ///< of entry last_seq; those before it arrived right before it
  std::string received, login;
  std::string previous;  ///< hash of anchor `number` - 1; 64 zeros for the first
  std::string hash;      ///< SHA-256 over all of the above (FORMAT.md)
};

/// What the hash of an anchor must be.
[[nodiscard]] std::string anchor_hash(const StoredAnchor& anchor);

/// All of them, in order.
[[nodiscard]] Result<std::vector<StoredAnchor>> read_anchors(Link& link);

}  // namespace bathwright::plant
