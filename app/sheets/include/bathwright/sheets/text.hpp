// Lines of a sheet: UTF-8, at most 80 columns. Read next: table.hpp for columns.
#pragma once

#include <string>
#include <string_view>
#include <vector>

namespace bathwright::sheets {

inline constexpr std::size_t width = 80;

using Lines = std::vector<std::string>;

/// Columns a text takes on the page: its code points (no wide or combining characters are used).
[[nodiscard]] std::size_t columns(std::string_view utf8);

/// Appends `text`, broken between words; the lines after the first are indented by `hang` columns more than
/// the first's own spaces. A word too long for a line is cut.
void say(Lines& lines, std::string_view text, std::size_t hang = 0);

/// Appends an empty line and a heading ruled to the page's width.
void heading(Lines& lines, std::string_view words);

/// Appends what stands left and right on one line.
void title(Lines& lines, std::string_view left, std::string_view right);

/// Appends each as a finding that stops the work.
void stops(Lines& lines, const std::vector<std::string>& findings);

void append(Lines& lines, const Lines& more);

}  // namespace bathwright::sheets
