// Text in rows and fields: delimiters, quotes, line ends; what a field means is not known here. Private to
// shopfiles.
#pragma once

#include <array>
#include <cstddef>
#include <string>
#include <string_view>
#include <vector>

namespace bathwright::shopfiles {

inline constexpr std::array<char, 3> delimiters = {',', ';', '\t'};

struct DelimitedRow {
  std::size_t line = 0;             ///< on which it begins, from 1
  std::string_view written;         ///< without its line end
  std::vector<std::string> fields;  ///< without quotes, white space at both ends removed
  std::string fault;  ///< what is wrong with its quotes; then the row is one line, and has no fields

  [[nodiscard]] bool is_blank() const;
};

/// Takes one row after the other off a text. A row with a fault is one line, so that a stray quote costs no
/// other row.
class DelimitedText {
 public:
  DelimitedText(std::string_view text, char delimiter) : rest_(text), delimiter_(delimiter) {}

  /// How many fields a row has: a field in quotes that holds such rows is one never closed.
  void expect_fields(std::size_t count) { width_ = count; }

  /// False at the end.
  bool next(DelimitedRow& row);

 private:
  std::string fields_of(std::string_view text, std::vector<std::string>& fields, std::size_t& length) const;
  std::string quoted_field(std::string_view text, std::size_t& at, std::string& field) const;
  [[nodiscard]] bool looks_like_rows(std::string_view field) const;

  std::string_view rest_;
  char delimiter_;
  std::size_t line_ = 1;
  std::size_t width_ = 0;  // fields expected of a row; 0: not known
};

/// `text` with every run of white space, line ends among it, as one blank, and none at either end.
[[nodiscard]] std::string on_one_line(std::string_view text);

}  // namespace bathwright::shopfiles
