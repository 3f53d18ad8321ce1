#include "flow.hpp"

#include <algorithm>

namespace bathwright::sheets::pdf {
namespace {

constexpr double hair = 1e-6;

/// Of pieces from `first` to `end` in a column of their own: a table that goes on has its head again.
double height_from(const Pieces& pieces, std::size_t first, std::size_t end) {
  double height = first < end && pieces[first].head ? pieces[first].head->height : 0;
  for (std::size_t i = first; i < end; ++i) height += pieces[i].height;
  return height;
}

}  // namespace

std::size_t Flow::fitting(const Pieces& pieces, std::size_t first, double room) {
  std::size_t end = first;
  while (end < pieces.size() && height_from(pieces, first, end + 1) <= room + hair) ++end;
  if (end == pieces.size()) return end;
  while (end > first && pieces[end - 1].with_next) --end;
  return end;
}

double Flow::place(const Pieces& pieces, std::size_t first, std::size_t end, double left, double top) {
  const auto put = [&](const Piece& piece) {
    const double shrunk = std::min(1.0, area_.height / piece.height);
    placed_.push_back({page_, left, top, shrunk, piece});
    top += shrunk * piece.height;
  };
  if (first < end && pieces[first].head) put(*pieces[first].head);
  for (std::size_t i = first; i < end; ++i) put(pieces[i]);
  return top;
}

void Flow::break_page() {
  ++page_;
  top_ = area_.top;
}

void Flow::add(const Pieces& pieces) {
  for (std::size_t first = 0; first < pieces.size();) {
    // In the middle of a page a table's head stands already above its next row.
    std::size_t end = fitting(pieces, first, room());
    if (end == first && top_ > area_.top) {
      break_page();
      continue;
    }
    end = std::max(end, first + 1);  // alone higher than a page: shrunk
    top_ = place(pieces, first, end, area_.left, top_);
    first = end;
  }
}

void Flow::add_in_columns(const Pieces& pieces, double apart) {
  for (std::size_t first = 0; first < pieces.size();) {
    // The lowest height in which two columns hold all the rest.
    double height = height_from(pieces, first, pieces.size()) / 2;
    const auto ends_within = [&](double h) {
      const std::size_t middle = fitting(pieces, first, h);
      return fitting(pieces, middle, h) == pieces.size();
    };
    while (height < room() && !ends_within(height)) height += 2;
    height = std::min(height, room());
    const std::size_t middle = fitting(pieces, first, height), end = fitting(pieces, middle, height);
    if (end == first) {
      if (top_ <= area_.top) {
        add({pieces.begin() + static_cast<std::ptrdiff_t>(first), pieces.end()});
        return;
      }
      break_page();
      continue;
    }
    const double left_foot = place(pieces, first, middle, area_.left, top_);
    top_ = std::max(left_foot, place(pieces, middle, end, area_.left + apart, top_));
    first = end;
    if (first < pieces.size()) break_page();
  }
}

}  // namespace bathwright::sheets::pdf
