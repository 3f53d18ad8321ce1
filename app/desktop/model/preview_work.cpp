#include "preview_work.hpp"

#include "work/whole_file.hpp"

namespace bathwright::desktop {

std::string print(const PrintedSheet& sheet) {
  const auto pdf = sheets::pdf_of(sheet.page, sheet.paper);
  const Outcome written = pdf ? work::write_whole(sheet.file, *pdf) : Outcome(pdf.problems());
  return written ? "To print: " + sheet.file.string() + "."
                 : "It could not be printed: " + text(written.problems());
}

Preview preview_of(const PrintedSheet& sheet) {
  constexpr double dots_per_inch = 115;  // A4 about as wide as the page of the window
  Preview preview;
  auto pictures = sheets::pictures_of(sheet.page, sheet.paper, dots_per_inch);
  if (!pictures) {
    preview.problems = pictures.problems();
    return preview;
  }
  for (sheets::Picture& picture : std::vector<sheets::Picture>(*std::move(pictures)))
    preview.sheets.push_back(std::make_shared<const sheets::Picture>(std::move(picture)));
  return preview;
}

}  // namespace bathwright::desktop
