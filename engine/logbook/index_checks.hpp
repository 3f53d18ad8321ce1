// That each index of the table `entry` holds just the entries' keys: an index that lost one would hide an
// entry from a list. SQLite's own check looks every entry up in every index, which takes ten times as long.
#pragma once

#include <array>
#include <cstdint>
#include <string>
#include <vector>

#include "bathwright/logbook/logbook.hpp"
#include "database.hpp"

namespace bathwright::logbook {

/// Sums a keyed hash (SipHash) of the key of each entry, once over the table and once over each index.
class IndexChecks {
 public:
  explicit IndexChecks(const Database& database);

  /// A row of select_entries.
  void take(const Statement& row);

  /// Walks the indexes and adds a finding for each whose sum is another.
  void compare(const Database& database, std::vector<Finding>& findings) const;

 private:
  struct Index {
    std::string name;
    std::vector<std::string> names;  ///< of its columns
    std::vector<int> columns;        ///< where select_entries has them
    std::string condition;           ///< of a partial index
    std::uint64_t sum = 0;
  };
  [[nodiscard]] std::uint64_t hash(const Statement& row, const std::vector<int>& columns, int seq) const;

  std::array<unsigned char, 16> secret_{};
  std::vector<Index> indexes_;
};

}  // namespace bathwright::logbook
