// The tables of the log file: made here, recognised here, and nowhere else. FORMAT.md describes them.
#pragma once

#include <vector>

#include "bathwright/base/result.hpp"
#include "bathwright/logbook/logbook.hpp"
#include "database.hpp"

namespace bathwright::logbook {

/// Makes sure the database is a log of this program's version: makes the tables in an empty file in mode
/// create and brings up those of an earlier version. In mode read_only it is a copy in memory that is brought
/// up. Any other file is left as it is and answered with a problem.
[[nodiscard]] Outcome prepare_schema(Database& database, OpenMode mode);

/// The tables of an empty log of this version.
[[nodiscard]] Database tables_in_memory();

/// Adds a finding for each table, index or trigger that is missing, altered or foreign.
void check_guards(const Database& database, std::vector<Finding>& findings);

}  // namespace bathwright::logbook
