// A page as what stands on it, whatever it is printed as: text, HTML, or PDF (page_pdf.hpp).
#pragma once

#include <bathwright/charts/chart.hpp>
#include <bathwright/sheets/table.hpp>
#include <cstdint>
#include <variant>

namespace bathwright::sheets {

struct Paragraph {
  std::string text;
};

/// A finding that stops the work.
struct Stop {
  std::string text;
};

/// "Sample   N-07-0302, by M. Okafor", one under the other.
struct Field {
  std::string label, value;
};
using Fields = std::vector<Field>;

/// Something to do or to weigh, with room to write beside it what was done.
struct Task {
  std::string title, mark;  ///< "2. boric acid", "done ____ by ______"
  std::vector<std::string> stops, lines;
};

/// A line to sign on; `name` where somebody has signed already.
struct SignatureLine {
  std::string role, name;
};
using SignatureLines = std::vector<SignatureLine>;

/// Two beside each other; left out where a page is only text.
struct Charts {
  std::vector<charts::Chart> charts;
};

using Block = std::variant<Paragraph, Stop, Fields, Table, Task, SignatureLines, Charts>;

/// How a section is read, for paper, where room is short.
enum class Reading : std::uint8_t {
  working,      ///< with the hands full
  small_print,  ///< once, before: smaller, in two columns
  background    ///< at the desk: small print behind everything else, on the back of the sheet
};

struct Section {
  std::string heading;  ///< empty: none
  std::vector<Block> blocks;
  Reading reading = Reading::working;
};

struct Page {
  std::string left, right;  ///< of the title line
  std::vector<Section> sections;

  /// Sections without blocks are left out.
  void add(Section section) {
    if (!section.blocks.empty()) sections.push_back(std::move(section));
  }
};

/// 80 columns wide.
[[nodiscard]] Lines text_of(const Page& page);

/// Of a section alone, for a sheet of lines; nothing where it has no blocks.
void append(Lines& lines, const Section& section);

/// One document with its style inside; prints on A4 and Letter alike.
[[nodiscard]] std::string html_of(const Page& page);

}  // namespace bathwright::sheets
