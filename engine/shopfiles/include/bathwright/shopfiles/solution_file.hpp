// Reads a solution written as formulae, for speciation without a tank. Every key: baths/README.md.
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/solution/recipe.hpp>
#include <string>
#include <string_view>

namespace bathwright::shopfiles {

/// The solution in the TOML file at `path`. Fails with every problem of the file, sorted by line, each with
/// `file:line: key`. Whether a solid or gas is in the tables is for the caller.
Result<solution::Recipe> read_solution(const std::string& path);

/// The same from text already in memory; `name` stands for the file in messages.
Result<solution::Recipe> read_solution_text(std::string_view name, std::string_view text);

}  // namespace bathwright::shopfiles
