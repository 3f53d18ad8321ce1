// The tables of constants that are built into the program (engine/data/*.csv), as text. They are compiled in
// so that a program and its constants can never be separated; every row keeps its source.
#pragma once

#include <bathwright/data/csv.hpp>
#include <initializer_list>
#include <string_view>

namespace bathwright::data {

/// The text of a built-in table, e.g. built_in_text("activity/pitzer_binary.csv"); empty if there is none.
[[nodiscard]] std::string_view built_in_text(std::string_view path);

/// Names of all built-in tables, sorted.
[[nodiscard]] std::span<const std::string_view> built_in_names();

/// A built-in table, parsed. Asserts that it exists and is well formed: a test reads every one of them.
[[nodiscard]] CsvTable built_in_table(std::string_view path, std::initializer_list<std::string_view> numeric);

}  // namespace bathwright::data
