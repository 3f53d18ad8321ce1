#include <algorithm>
#include <bathwright/sheets/table.hpp>

namespace bathwright::sheets {
namespace {

constexpr std::size_t gap = 2, least_room = 12;

std::size_t before_mark(const std::string& number) { return std::min(number.find('.'), number.size()); }

/// Numbers padded on the right so that all decimal marks stand in one column.
std::vector<std::string> aligned(std::vector<std::string> cells) {
  std::size_t after = 0;
  for (const std::string& cell : cells) after = std::max(after, cell.size() - before_mark(cell));
  for (std::string& cell : cells) cell.append(after - (cell.size() - before_mark(cell)), ' ');
  return cells;
}

}  // namespace

Lines Table::lines() const {
  std::vector<std::vector<std::string>> cells(columns_.size());
  std::vector<std::size_t> widths;
  for (std::size_t c = 0; c < columns_.size(); ++c) {
    for (const auto& row : rows_) cells[c].push_back(row[c]);
    if (columns_[c].align == Align::number) cells[c] = aligned(std::move(cells[c]));
    std::size_t widest = columns(columns_[c].head);
    for (const std::string& cell : cells[c]) widest = std::max(widest, columns(cell));
    widths.push_back(widest);
  }
  std::size_t indent_of_last = gap;
  for (std::size_t c = 0; c + 1 < columns_.size(); ++c) indent_of_last += widths[c] + gap;

  Lines out;
  const auto put = [&](const auto& cell_of) {
    std::string before;  // everything but the last column, which alone is wrapped
    std::string last;
    for (std::size_t c = 0; c < columns_.size(); ++c) {
      const std::string& cell = cell_of(c);
      const std::string pad(widths[c] - columns(cell), ' ');
      before += std::string(gap, ' ');
      const bool number = columns_[c].align == Align::number;
      (c + 1 < columns_.size() ? before : last) += number ? pad + cell : cell + pad;
    }
    last.erase(last.find_last_not_of(' ') + 1);
    if (indent_of_last + least_room > width) {  // no room is left beside the others: below them
      before.erase(before.find_last_not_of(' ') + 1);
      out.push_back(before);
      if (!last.empty()) say(out, std::string(3 * gap, ' ') + last);
      return;
    }
    Lines wrapped;
    say(wrapped, std::string(indent_of_last, ' ') + last);
    wrapped.front().replace(0, indent_of_last, before);
    wrapped.front().erase(wrapped.front().find_last_not_of(' ') + 1);
    append(out, wrapped);
  };
  put([&](std::size_t c) -> const std::string& { return columns_[c].head; });
  for (std::size_t r = 0; r < rows_.size(); ++r)
    put([&](std::size_t c) -> const std::string& { return cells[c][r]; });
  return out;
}

}  // namespace bathwright::sheets
