// Entries as rows of the table bathwright.entry, and as the JSON they are sent in.
#pragma once

#include <span>
#include <string>

#include "bathwright/base/result.hpp"
#include "bathwright/logbook/entry.hpp"
#include "bathwright/plant/station.hpp"
#include "link.hpp"

namespace bathwright::plant {

/// "SELECT every column FROM bathwright.entry AS entry " with `rest` behind it.
[[nodiscard]] std::string select_arrived(std::string_view rest);

/// The entry in a row of select_arrived. A kind that is not ours is a problem.
[[nodiscard]] Result<Arrived> read_arrived(const Rows& rows, int row);

/// All rows of select_arrived.
[[nodiscard]] Result<std::vector<Arrived>> read_all_arrived(const Result<Rows>& rows);

/// Sends entries of one chain in one statement: all arrive or none. `site` may be empty. Returns how many
/// were new.
[[nodiscard]] Result<std::int64_t> insert_entries(Link& link, const std::string& chain,
                                                  const std::string& site,
                                                  std::span<const logbook::Entry> entries);

}  // namespace bathwright::plant
