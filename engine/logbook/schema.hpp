// The tables of the log file: made here, recognised here, and nowhere else. FORMAT.md describes them.
#pragma once

#include <vector>

#include "bathwright/base/result.hpp"
#include "bathwright/logbook/logbook.hpp"
#include "database.hpp"

namespace bathwright::logbook {

/// Makes sure the file holds a log of the version this program knows; makes the tables in an empty file in
/// mode create. Any other file is left as it is and answered with a problem.
[[nodiscard]] Outcome prepare_schema(const Database& database, OpenMode mode);

/// Adds a finding for each table, index or trigger that is missing, altered or foreign.
void check_guards(const Database& database, std::vector<Finding>& findings);

}  // namespace bathwright::logbook
