// A day of the calendar in a shop file. Private to shopfiles.
#pragma once

#include "schema.hpp"

namespace bathwright::shopfiles {

/// The day under `key` as ISO 8601, "2027-06-30", written with or without quotes; empty where there is none
/// or no day that exists.
std::string read_date(Table& table, const Key& key);

}  // namespace bathwright::shopfiles
