// Reads a file that asks for constants to be fitted to measurements. Every key: baths/README.md.
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/regression/fit.hpp>
#include <string>
#include <string_view>

namespace bathwright::shopfiles {

/// The task in the TOML file at `path`. Fails with every problem of the file, sorted by line, each with
/// `file:line: key`. Whether a constant exists and the measurements determine it is for regression::fit.
Result<regression::Task> read_fit(const std::string& path);

/// The same from text already in memory; `name` stands for the file in messages.
Result<regression::Task> read_fit_text(std::string_view name, std::string_view text);

}  // namespace bathwright::shopfiles
