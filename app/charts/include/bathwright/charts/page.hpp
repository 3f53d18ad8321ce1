// A page of charts: what is saved as a picture or printed.
#pragma once

#include <bathwright/charts/chart.hpp>

namespace bathwright::charts {

struct Page {
  std::string title;               ///< "E-02 electroless nickel"
  std::vector<std::string> words;  ///< lines under the title: what, from which state, under which policy
  std::vector<Chart> charts;       ///< in reading order, two beside each other
  std::string foot;                ///< how to read the signs, and who decides
};

/// Lays the page out in a size. A page without charts says so.
void draw(const Page& page, Canvas& canvas, double width, double height,
          const Palette& palette = day_palette);

/// The height that gives every chart of the page its usual size, for a page as wide as that.
[[nodiscard]] double usual_height(const Page& page, double width);

}  // namespace bathwright::charts
