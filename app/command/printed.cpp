#include "printed.hpp"

#include <CLI/CLI.hpp>
#include <bathwright/base/whole_file.hpp>

namespace bathwright::command {

void add_printed_files(CLI::App& verb, PrintedFiles& files) {
  verb.add_option("--pdf", files.pdf, "also writes the sheet to this file as PDF, to print it");
  verb.add_option_function<std::string>(
          "--paper", [&files](const std::string& name) { files.paper = *sheets::paper_of(name); },
          "of the PDF: a4 or letter")
      ->check(CLI::IsMember({"a4", "letter"}))
      ->default_str("a4");
  verb.add_option("--html", files.html, "also writes the sheet to this file as HTML");
}

Outcome write_printed(const PrintedFiles& files, const sheets::Page& page) {
  if (!files.html.empty())
    if (Outcome written = write_whole(files.html, sheets::html_of(page)); !written) return written;
  if (files.pdf.empty()) return Done{};
  const auto pdf = sheets::pdf_of(page, files.paper);
  if (!pdf) return pdf.problems();
  return write_whole(files.pdf, *pdf);
}

}  // namespace bathwright::command
