// Pieces on sheets of paper: where each stands.
#pragma once

#include "pieces.hpp"

namespace bathwright::sheets::pdf {

struct Area {
  double left = 0, top = 0, width = 0, height = 0;
};

struct Placed {
  std::size_t page = 0;
  double left = 0, top = 0, shrunk = 1;  ///< below 1 where a piece alone is higher than a page
  Piece piece;
};

class Flow {
 public:
  /// `area`: what of each page is to be filled.
  explicit Flow(const Area& area) : area_(area), top_(area.top) {}

  /// One under the other, over the breaks of pages.
  void add(const Pieces& pieces);
  /// In two columns `apart` from left to left, as even as they get; those that do not fit go on a next page.
  void add_in_columns(const Pieces& pieces, double apart);

  [[nodiscard]] std::size_t pages() const { return page_ + 1; }
  [[nodiscard]] const std::vector<Placed>& placed() const { return placed_; }

 private:
  /// How many pieces from `first` fit into a height, none of them parted from what it belongs to; at least
  /// one.
  static std::size_t fitting(const Pieces& pieces, std::size_t first, double room);
  /// Returns where it ends.
  double place(const Pieces& pieces, std::size_t first, std::size_t end, double left, double top);
  [[nodiscard]] double room() const { return area_.top + area_.height - top_; }
  void break_page();

  Area area_;
  std::size_t page_ = 0;
  double top_;
  std::vector<Placed> placed_;
};

}  // namespace bathwright::sheets::pdf
