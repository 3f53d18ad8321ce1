// Reads a tank file. Every key, its unit and its default: baths/README.md.
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/bath/tank.hpp>
#include <bathwright/matter/stock.hpp>
#include <string>
#include <string_view>

namespace bathwright::shopfiles {

/// The tank described in the TOML file at `path`. Aims and largest rises come out in g/L, prices per kg or L.
///   catalogue  what is known of the chemicals that the shelf names
/// Fails with every problem of the file, sorted by line, each with `file:line: key`. Whether the bath type
/// exists and knows the quantities aimed at is for the caller, who has the bath types.
Result<bath::Tank> read_tank(const std::string& path, const matter::StockCatalogue& catalogue);

/// The same from text already in memory; `name` stands for the file in messages and in Tank::file.
Result<bath::Tank> read_tank_text(std::string_view name, std::string_view text,
                                  const matter::StockCatalogue& catalogue);

}  // namespace bathwright::shopfiles
