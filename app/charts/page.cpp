#include <algorithm>
#include <bathwright/charts/page.hpp>

namespace bathwright::charts {
namespace {

constexpr double margin = 28, gap = 20, title_size = 20, word_size = 13, word_line = 18;
constexpr double chart_height = 210, foot_room = 26;

std::size_t columns_of(const Page& page) { return page.charts.size() > 1 ? 2 : 1; }
std::size_t rows_of(const Page& page) {
  return std::max<std::size_t>(1, (page.charts.size() + columns_of(page) - 1) / columns_of(page));
}
double head_room(const Page& page) {
  if (page.title.empty() && page.words.empty()) return 0;  // stands in another document
  return margin + title_size + 8 + word_line * static_cast<double>(page.words.size()) + gap / 2;
}

}  // namespace

double usual_height(const Page& page, double /*width*/) {
  return head_room(page) + static_cast<double>(rows_of(page)) * (chart_height + gap) + foot_room;
}

void draw(const Page& page, Canvas& canvas, double width, double height, const Palette& palette) {
  canvas.fill({0, 0, width, height}, palette.card);
  canvas.text({margin, margin + title_size / 2}, page.title, {palette.ink, title_size, Align::start, true});
  double y = margin + title_size / 2 + word_line + 4;
  for (const std::string& words : page.words) {
    canvas.text({margin, y}, words, {palette.quiet, word_size});
    y += word_line;
  }
  const double top = head_room(page), bottom = height - foot_room;
  const auto columns = static_cast<double>(columns_of(page)), rows = static_cast<double>(rows_of(page));
  const double chart_width = (width - 2 * margin - (columns - 1) * gap) / columns,
               chart_room = (bottom - top) / rows - gap;
  if (page.charts.empty())
    canvas.text({margin, top + word_line}, "Nothing to draw: no level changes and no limit is near.",
                {palette.ink, word_size});
  for (std::size_t i = 0; i < page.charts.size(); ++i) {
    const auto column = static_cast<double>(i % columns_of(page)),
               row = static_cast<double>(i / columns_of(page));
    draw(page.charts[i], canvas,
         {margin + column * (chart_width + gap), top + row * (chart_room + gap), chart_width, chart_room},
         palette);
  }
  canvas.text({margin, height - 12}, page.foot, {palette.quiet, word_size - 1});
}

}  // namespace bathwright::charts
