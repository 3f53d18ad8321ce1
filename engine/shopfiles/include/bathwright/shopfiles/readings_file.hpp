// Reads a file of bench readings. Every key, its unit and its default: baths/README.md.
#pragma once

#include <bathwright/analysis/readings.hpp>
#include <bathwright/base/result.hpp>
#include <string>
#include <string_view>

namespace bathwright::shopfiles {

/// The readings in the TOML file at `path`. Fails with every problem of the file, sorted by line, each with
/// `file:line: key`. Whether a method or quantity is known is for analysis, which has the bath type.
Result<analysis::Readings> read_readings(const std::string& path);

/// The same from text already in memory; `name` stands for the file in messages and in Readings::file.
Result<analysis::Readings> read_readings_text(std::string_view name, std::string_view text);

}  // namespace bathwright::shopfiles
