// The blocks of a page as pieces that stand on paper undivided.
#pragma once

#include <bathwright/sheets/page.hpp>
#include <functional>

#include "ink.hpp"

namespace bathwright::sheets::pdf {

struct Piece {
  double height = 0;
  std::function<void(Ink&, double left, double top)> draw;
  bool with_next = false;             ///< a heading: never the last of a column
  std::shared_ptr<const Piece> head;  ///< of a table's row: what stands above it again in a new column
};
using Pieces = std::vector<Piece>;

[[nodiscard]] double height_of(const Pieces& pieces);

/// Of letters, points.
struct Sizes {
  explicit Sizes(double of_body) : body(of_body), small(0.88 * of_body) {}
  double body, small;
};

/// A section in a column as wide as `width`; a narrow table has the paragraphs after it beside it.
[[nodiscard]] Pieces pieces_of(const Section& section, const Ink& ink, const Sizes& sizes, double width);

}  // namespace bathwright::sheets::pdf
