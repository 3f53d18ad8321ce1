#include <cairo-pdf.h>

#include <bathwright/sheets/page_pdf.hpp>

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
  Document(const Page& page, Ink& ink, const Area& paper) : page_(page), ink_(ink), paper_(paper) {}

  /// As large as puts all but the background on one page; where none does, as large as is easy to read.
  void draw() {
    constexpr double largest = 10, easy = 9.5, smallest = 8, step = 0.2;
    std::size_t front_pages = 0;
    for (double size = largest; size > smallest - step / 2; size -= step)
      if (const Flow flow = laid_out(Sizes(size), front_pages); front_pages == 1) return put(flow);
    put(laid_out(Sizes(easy), front_pages));
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

  void put(const Flow& flow) {
    std::size_t page = 0;
    frame(page, flow.pages());
    for (const pdf::Placed& one : flow.placed()) {
      while (page < one.page) {
        ink_.next_page();
        frame(++page, flow.pages());
      }
      ink_.shrink(one.left, one.top, one.shrunk);
      one.piece.draw(ink_, one.left, one.top);
      ink_.restore();
    }
    ink_.next_page();
  }

  /// What stands on every sheet: whose it is above, which of how many below.
  void frame(std::size_t page, std::size_t pages) {
    constexpr double title_size = 12, foot_size = 7.5;
    const double right_edge = paper_.left + paper_.width;
    const pdf::Words right = ink_.words(page_.right, {title_size, true, pdf::colours.accent});
    pdf::Words left = ink_.words(page_.left, {title_size, true});
    if (const double room = paper_.width - right.width() - between_columns; left.width() > room)
      left = ink_.words(page_.left, {title_size * room / left.width(), true});
    ink_.put(left, paper_.left, paper_.top + right.baseline() - left.baseline());
    ink_.put(right, right_edge - right.width(), paper_.top);
    ink_.line(paper_.left, paper_.top + title_room - 3, right_edge, pdf::colours.ink, 0.8);
    const pdf::Look quiet{foot_size, false, pdf::colours.quiet};
    const double foot = paper_.top + paper_.height - foot_size - 2;
    ink_.put(ink_.words(page_.left + ". " + page_.right, quiet), paper_.left, foot);
    const pdf::Words number =
        ink_.words("page " + std::to_string(page + 1) + " of " + std::to_string(pages), quiet);
    ink_.put(number, right_edge - number.width(), foot);
  }

  static constexpr double title_room = 18;
  const Page& page_;
  Ink& ink_;
  Area paper_;
};

}  // namespace

Result<std::string> pdf_of(const Page& page, Paper paper) {
  const double across = paper == Paper::a4 ? 210 * a_mm : 612, down = paper == Paper::a4 ? 297 * a_mm : 792;
  std::string bytes;
  const std::unique_ptr<cairo_surface_t, Surface> surface(
      cairo_pdf_surface_create_for_stream(append, &bytes, across, down));
  cairo_pdf_surface_set_metadata(surface.get(), CAIRO_PDF_METADATA_TITLE,
                                 (page.left + ", " + page.right).c_str());
  {
    Ink ink(surface.get());
    Document(page, ink, {margin, margin, across - 2 * margin, down - 2 * margin}).draw();
  }
  cairo_surface_finish(surface.get());
  if (const auto status = cairo_surface_status(surface.get()); status != CAIRO_STATUS_SUCCESS)
    return Problem{Fault::io, page.left, std::string("could not be drawn: ") + cairo_status_to_string(status),
                   "", "Print the text or the HTML instead."};
  return bytes;
}

Result<Paper> paper_of(std::string_view name) {
  if (name == "a4" || name == "A4") return Paper::a4;
  if (name == "letter" || name == "Letter") return Paper::letter;
  return Problem{Fault::bad_input, "paper", "is \"" + std::string(name) + "\"", "a4 or letter", ""};
}

}  // namespace bathwright::sheets
