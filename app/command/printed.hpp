// A page as files to print: --pdf, --html, --paper.
#pragma once

#include <bathwright/sheets/page_pdf.hpp>

#include "context.hpp"

namespace bathwright::command {

struct PrintedFiles {
  std::string pdf, html;  ///< empty: not asked for
  sheets::Paper paper = sheets::Paper::a4;
};

void add_printed_files(CLI::App& verb, PrintedFiles& files);

/// Writes those that were asked for.
Outcome write_printed(const PrintedFiles& files, const sheets::Page& page);

}  // namespace bathwright::command
