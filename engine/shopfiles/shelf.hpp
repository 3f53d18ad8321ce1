// The [shelf] of a tank file. Private to shopfiles.
#pragma once

#include <bathwright/bath/tank.hpp>
#include <bathwright/matter/stock.hpp>
#include <vector>

#include "schema.hpp"

namespace bathwright::shopfiles {

/// Every chemical of the table, in the order of the file; those with a problem are left out and reported.
std::vector<bath::ShelfItem> read_shelf(Table& shelf, const matter::StockCatalogue& catalogue);

}  // namespace bathwright::shopfiles
