// A page as a PDF, to print, and as it looks before: A4 or Letter, upright.
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/sheets/page.hpp>
#include <bathwright/sheets/picture.hpp>
#include <cstdint>
#include <string_view>

namespace bathwright::sheets {

enum class Paper : std::uint8_t { a4, letter };

/// "a4", "letter". Fails (bad_input) on another name.
Result<Paper> paper_of(std::string_view name);

/// The bytes of the file. Letters are 10 to 8 points, the largest of these that puts all but the background
/// on one page; where it takes several, 9.5; small print is smaller. No task and no row of a table is divided
/// between pages; each has the title and its number. Fails (io) where it cannot be drawn.
Result<std::string> pdf_of(const Page& page, Paper paper);

/// Each sheet of that PDF as a screen shows it. Fails (io) where it cannot be drawn.
Result<std::vector<Picture>> pictures_of(const Page& page, Paper paper, double dots_per_inch);

}  // namespace bathwright::sheets
