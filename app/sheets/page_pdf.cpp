#include <cairo-pdf.h>

#include <bathwright/sheets/page_pdf.hpp>

#include <array>
#include <cmath>
#include <cstring>

#include "pdf/flow.hpp"

namespace bathwright::sheets {
namespace {

using pdf::Area;
using pdf::Flow;
using pdf::Ink;
using pdf::Pieces;
using pdf::Sizes;

constexpr double a_mm = 72 / 25.4, margin = 7.5 * a_mm, foot_room = 10, between_columns = 14;

struct Surface {
  void operator()(cairo_surface_t* surface) const { cairo_surface_destroy(surface); }
};

cairo_status_t append(void* bytes, const unsigned char* data, unsigned int length) {
  static_cast<std::string*>(bytes)->append(reinterpret_cast<const char*>(data), length);
  return CAIRO_STATUS_SUCCESS;
}

class Document {
 public:
  /// `ink` measures.
  Document(const Page& page, const Ink& ink, const Area& paper) : page_(page), ink_(ink), paper_(paper) {}

  /// As large as puts all but the background on one page; where none does, as large as is easy to read.
  [[nodiscard]] Flow laid_out() const {
    constexpr double largest = 10, easy = 9.5, smallest = 8, step = 0.2;
    std::size_t front_pages = 0;
    for (double size = largest; size > smallest - step / 2; size -= step)
      if (Flow flow = laid_out(Sizes(size), front_pages); front_pages == 1) return flow;
    return laid_out(Sizes(easy), front_pages);
  }

  void draw(const Flow& flow, std::size_t page, Ink& ink) const {
    frame(page, flow.pages(), ink);
    for (const pdf::Placed& one : flow.placed()) {
      if (one.page != page) continue;
      ink.shrink(one.left, one.top, one.shrunk);
      one.piece.draw(ink, one.left, one.top);
      ink.restore();
    }
  }

 private:
  /// front_pages: without what is background.
  [[nodiscard]] Flow laid_out(const Sizes& sizes, std::size_t& front_pages) const {
    Flow flow({paper_.left, paper_.top + title_room, paper_.width, paper_.height - title_room - foot_room});
    const double column = (paper_.width - between_columns) / 2;
    Pieces small_print, background;
    const auto columns = [&](Pieces& pieces) {
      flow.add_in_columns(pieces, column + between_columns);
      pieces.clear();
    };
    for (const Section& section : page_.sections) {
      if (section.reading == Reading::working) {
        columns(small_print);
        flow.add(pieces_of(section, ink_, sizes, paper_.width));
        continue;
      }
      Pieces& column_of = section.reading == Reading::background ? background : small_print;
      for (auto& piece : pieces_of(section, ink_, sizes, column)) column_of.push_back(std::move(piece));
    }
    columns(small_print);
    front_pages = flow.pages();
    columns(background);
    return flow;
  }

  /// What stands on every sheet: whose it is above, which of how many below.
  void frame(std::size_t page, std::size_t pages, Ink& ink) const {
    constexpr double title_size = 12, foot_size = 7.5;
    const double right_edge = paper_.left + paper_.width;
    const pdf::Words right = ink_.words(page_.right, {title_size, true, pdf::colours.accent});
    pdf::Words left = ink_.words(page_.left, {title_size, true});
    if (const double room = paper_.width - right.width() - between_columns; left.width() > room)
      left = ink_.words(page_.left, {title_size * room / left.width(), true});
    ink.put(left, paper_.left, paper_.top + right.baseline() - left.baseline());
    ink.put(right, right_edge - right.width(), paper_.top);
    ink.line(paper_.left, paper_.top + title_room - 3, right_edge, pdf::colours.ink, 0.8);
    const pdf::Look quiet{foot_size, false, pdf::colours.quiet};
    const double foot = paper_.top + paper_.height - foot_size - 2;
    ink.put(ink_.words(page_.left + ". " + page_.right, quiet), paper_.left, foot);
    const pdf::Words number =
        ink_.words("page " + std::to_string(page + 1) + " of " + std::to_string(pages), quiet);
    ink.put(number, right_edge - number.width(), foot);
  }

  static constexpr double title_room = 18;
  const Page& page_;
  const Ink& ink_;
  Area paper_;
};

using SurfaceOwner = std::unique_ptr<cairo_surface_t, Surface>;

struct Measures {
  explicit Measures(Paper paper)
      : across(paper == Paper::a4 ? 210 * a_mm : 612), down(paper == Paper::a4 ? 297 * a_mm : 792) {}
  [[nodiscard]] Area area() const { return {margin, margin, across - 2 * margin, down - 2 * margin}; }
  double across, down;  ///< points
};

Problem not_drawn(const Page& page, cairo_status_t status) {
  return {Fault::io, page.left, std::string("could not be drawn: ") + cairo_status_to_string(status), "",
          "Print the text or the HTML instead."};
}

}  // namespace

Result<std::string> pdf_of(const Page& page, Paper paper) {
  const Measures sheet(paper);
  std::string bytes;
  const SurfaceOwner surface(cairo_pdf_surface_create_for_stream(append, &bytes, sheet.across, sheet.down));
  cairo_pdf_surface_set_metadata(surface.get(), CAIRO_PDF_METADATA_TITLE,
                                 (page.left + ", " + page.right).c_str());
  {
    Ink ink(surface.get());
    const Document document(page, ink, sheet.area());
    const Flow flow = document.laid_out();
    for (std::size_t p = 0; p < flow.pages(); ++p) {
      document.draw(flow, p, ink);
      ink.next_page();
    }
  }
  cairo_surface_finish(surface.get());
  if (const auto status = cairo_surface_status(surface.get()); status != CAIRO_STATUS_SUCCESS)
    return not_drawn(page, status);
  return bytes;
}

namespace {

constexpr int fine = 2;  // cairo puts letters on whole dots: drawn finer, their spacing is that of the paper

/// Each dot the mean of fine x fine of the surface, whose dots are whole numbers, 0x00RRGGBB.
Picture picture_of(cairo_surface_t* surface) {
  cairo_surface_flush(surface);
  Picture picture{
      cairo_image_surface_get_width(surface) / fine, cairo_image_surface_get_height(surface) / fine, {}};
  const unsigned char* data = cairo_image_surface_get_data(surface);
  const int stride = cairo_image_surface_get_stride(surface);
  picture.rgba.reserve(4 * static_cast<std::size_t>(picture.width) *
                       static_cast<std::size_t>(picture.height));
  for (int y = 0; y < picture.height; ++y)
    for (int x = 0; x < picture.width; ++x) {
      std::array<unsigned, 3> sum{};
      for (int i = 0; i < fine * fine; ++i) {
        std::uint32_t dot = 0;
        std::memcpy(&dot, data + (fine * y + i / fine) * stride + 4 * (fine * x + i % fine), sizeof dot);
        for (unsigned c = 0; c < sum.size(); ++c) sum[c] += dot >> (16 - 8 * c) & 0xFFU;
      }
      for (const unsigned one : sum) picture.rgba.push_back(static_cast<std::uint8_t>(one / (fine * fine)));
      picture.rgba.push_back(0xFF);
    }
  return picture;
}

}  // namespace

Result<std::vector<Picture>> pictures_of(const Page& page, Paper paper, double dots_per_inch) {
  constexpr double points_an_inch = 72;
  const Measures sheet(paper);
  const double scale = dots_per_inch / points_an_inch;
  const auto dots = [&](double points) { return fine * static_cast<int>(std::lround(scale * points)); };
  const SurfaceOwner nowhere(cairo_pdf_surface_create_for_stream(nullptr, nullptr, sheet.across, sheet.down));
  const Ink measuring(nowhere.get());
  const Document document(page, measuring, sheet.area());
  const Flow flow = document.laid_out();
  std::vector<Picture> pictures;
  for (std::size_t p = 0; p < flow.pages(); ++p) {
    const SurfaceOwner surface(
        cairo_image_surface_create(CAIRO_FORMAT_RGB24, dots(sheet.across), dots(sheet.down)));
    {
      Ink ink(surface.get(), fine * scale);
      ink.full_square(0, 0, std::max(sheet.across, sheet.down), pdf::colours.card);
      document.draw(flow, p, ink);
    }
    if (const auto status = cairo_surface_status(surface.get()); status != CAIRO_STATUS_SUCCESS)
      return not_drawn(page, status);
    pictures.push_back(picture_of(surface.get()));
  }
  return pictures;
}

Result<Paper> paper_of(std::string_view name) {
  if (name == "a4" || name == "A4") return Paper::a4;
  if (name == "letter" || name == "Letter") return Paper::letter;
  return Problem{Fault::bad_input, "paper", "is \"" + std::string(name) + "\"", "a4 or letter", ""};
}

}  // namespace bathwright::sheets
