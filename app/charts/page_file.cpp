#include <cairo-pdf.h>
#include <cairo-svg.h>

#include <algorithm>
#include <bathwright/base/whole_file.hpp>
#include <bathwright/charts/page_file.hpp>
#include <cctype>
#include <memory>
#include <system_error>

#include "cairo_canvas.hpp"

namespace bathwright::charts {
namespace {

struct ReleaseSurface {
  void operator()(cairo_surface_t* surface) const { cairo_surface_destroy(surface); }
};
using Surface = std::unique_ptr<cairo_surface_t, ReleaseSurface>;

constexpr double width = 1120;

cairo_status_t append(void* bytes, const unsigned char* data, unsigned int length) {
  static_cast<std::string*>(bytes)->append(reinterpret_cast<const char*>(data), length);
  return CAIRO_STATUS_SUCCESS;
}

cairo_status_t finish(const Surface& surface) {
  cairo_surface_finish(surface.get());
  return cairo_surface_status(surface.get());
}

cairo_status_t write_svg(std::string& bytes, const Page& page) {
  const double height = usual_height(page, width);
  const Surface surface(cairo_svg_surface_create_for_stream(append, &bytes, width, height));
  CairoCanvas canvas(surface.get(), 1);
  draw(page, canvas, width, height);
  return finish(surface);
}

cairo_status_t write_png(std::string& bytes, const Page& page) {
  constexpr double scale = 2;
  const double height = usual_height(page, width);
  const Surface surface(cairo_image_surface_create(CAIRO_FORMAT_RGB24, static_cast<int>(scale * width),
                                                   static_cast<int>(scale * height)));
  CairoCanvas canvas(surface.get(), scale);
  draw(page, canvas, width, height);
  return cairo_surface_write_to_png_stream(surface.get(), append, &bytes);
}

/// A4 lying, six charts a page.
cairo_status_t write_pdf(std::string& bytes, const Page& page) {
  constexpr double points_a_mm = 72 / 25.4, paper_width = 297 * points_a_mm, paper_height = 210 * points_a_mm;
  constexpr double scale = paper_width / width, height = paper_height / scale;
  constexpr std::size_t charts_a_page = 6;
  const Surface surface(cairo_pdf_surface_create_for_stream(append, &bytes, paper_width, paper_height));
  CairoCanvas canvas(surface.get(), scale);
  const std::size_t pages =
      std::max<std::size_t>(1, (page.charts.size() + charts_a_page - 1) / charts_a_page);
  for (std::size_t p = 0; p < pages; ++p) {
    Page part = page;
    const std::size_t first = p * charts_a_page, last = std::min(first + charts_a_page, page.charts.size());
    part.charts.assign(page.charts.begin() + static_cast<std::ptrdiff_t>(first),
                       page.charts.begin() + static_cast<std::ptrdiff_t>(last));
    draw(part, canvas, width, height);
    canvas.next_page();
  }
  return finish(surface);
}

}  // namespace

std::string svg_of(const Page& page) {
  std::string bytes;
  write_svg(bytes, page);
  return bytes.substr(std::min(bytes.find("<svg"), bytes.size()));  // without the head of a file
}

Outcome write_page(const std::filesystem::path& file, const Page& page) {
  std::string ending = file.extension().string();
  std::ranges::transform(ending, ending.begin(), [](unsigned char c) { return std::tolower(c); });
  auto* const write = ending == ".svg"   ? write_svg
                      : ending == ".png" ? write_png
                      : ending == ".pdf" ? write_pdf
                                         : nullptr;
  if (!write)
    return Problem{Fault::bad_input, file.string(), "is no kind of picture that is written here",
                   "a name that ends in .svg, .png or .pdf", ""};
  std::error_code failed;
  if (file.has_parent_path() && !std::filesystem::is_directory(file.parent_path(), failed))
    return Problem{Fault::io, file.string(), "could not be written: there is no such folder", "",
                   "Check the folder and its rights."};
  std::string bytes;
  if (const cairo_status_t status = write(bytes, page); status != CAIRO_STATUS_SUCCESS)
    return Problem{Fault::io, file.string(),
                   std::string("could not be drawn: ") + cairo_status_to_string(status), "", ""};
  return write_whole(file, bytes);
}

}  // namespace bathwright::charts
