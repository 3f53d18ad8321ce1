// A page of charts as a file: SVG, PNG or PDF, by the end of its name.
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/charts/page.hpp>
#include <filesystem>

namespace bathwright::charts {

/// Writes the page to a temporary file beside and renames it, so that a file is whole or not there. SVG and
/// PNG are 1120 wide and as high as the charts need (PNG at twice as many pixels); PDF is A4, broad side
/// down, with as many pages as the charts need. Fails on another ending of the name and where the file cannot
/// be written.
Outcome write_page(const std::filesystem::path& file, const Page& page);

/// The page as the text of an SVG element, to stand in another document: one for each, for the letters of two
/// would be mixed up.
[[nodiscard]] std::string svg_of(const Page& page);

}  // namespace bathwright::charts
