// A TOML text as a tree of plain values, each with its line. The only door to the TOML library. Read next: schema.hpp, which asks a tree for the keys of a file type.
#pragma once

#include <bathwright/base/result.hpp>
#include <cstddef>
#include <string>
#include <string_view>
#include <vector>

namespace bathwright::toml_schema {

struct Node {
  enum class Kind { text, number, truth, moment, list, table };
  Kind kind = Kind::table;
  int line = 1;             ///< 1-based
  std::string key;          ///< under which it stands in a table; empty in a list and for the whole file
  std::string text;         ///< of text; of a local date, with or without a time, in ISO 8601; empty for other moments
  double number = 0;        ///< of a number
  bool truth = false;       ///< of true or false
  std::vector<Node> items;  ///< of a list or table, in the order of the file
};

/// Far above any real shop file; what is beyond is not one.
inline constexpr std::size_t longest_file_bytes = 1 << 20, longest_text_bytes = 1000, longest_key_bytes = 100;
inline constexpr int deepest_nesting = 5;

/// The whole file at `path`, or of a longer one the first `longest` bytes and one more. Fails where it cannot
/// be read.
Result<std::string> read_text_file(const std::string& path, std::size_t longest = longest_file_bytes);

/// The tree of `text`; `name` stands for the file in messages. Fails, with the line, on what is not TOML (the
/// first fault only), and on what is empty, not UTF-8 text, or beyond the limits above.
Result<Node> parse_toml(std::string_view name, std::string_view text);

/// "baths/n-07.toml:14"
std::string at_line(std::string_view name, int line);

/// A key or text from a file, fit for a one-line message: shortened, control characters as "?".
std::string printable(std::string_view text);

}  // namespace bathwright::toml_schema
