// A sheet that was printed to a PDF, as a screen shows it.
#pragma once

#include <bathwright/sheets/page_pdf.hpp>
#include <filesystem>
#include <memory>

namespace bathwright::desktop {

struct PrintedSheet {
  sheets::Page page;
  sheets::Paper paper = sheets::Paper::a4;
  std::filesystem::path file;
};

/// Writes the PDF; what came of it, in words: what is signed stands whether or not a file of it could be
/// written.
[[nodiscard]] std::string print(const PrintedSheet& sheet);

struct Preview {
  std::vector<std::shared_ptr<const sheets::Picture>> sheets;
  Problems problems;
};

[[nodiscard]] Preview preview_of(const PrintedSheet& sheet);

}  // namespace bathwright::desktop
