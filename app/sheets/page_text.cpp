#include <algorithm>
#include <bathwright/sheets/page.hpp>

namespace bathwright::sheets {
namespace {

/// Each kind of block as lines below those before.
struct Printer {
  void operator()(const Paragraph& paragraph) { say(lines, "  " + paragraph.text, 2); }

  void operator()(const Stop& stop) { stops(lines, {stop.text}); }

  void operator()(const Fields& fields) {
    std::size_t widest = 0;
    for (const Field& field : fields) widest = std::max(widest, columns(field.label));
    for (const Field& field : fields) {
      const std::string label = field.label + std::string(widest - columns(field.label) + 2, ' ');
      Lines wrapped;
      say(wrapped, std::string(columns(label), ' ') + field.value);
      wrapped.front().replace(0, columns(label), label);
      append(lines, wrapped);
    }
  }

  void operator()(const Table& table) { append(lines, table.lines()); }

  void operator()(const Task& task) {
    title(lines, task.title, task.mark);
    for (const std::string& stop : task.stops) say(lines, "   STOP " + stop, 3);
    for (const std::string& line : task.lines) say(lines, "   " + line, 2);
  }

  void operator()(const SignatureLines& signatures) {
    constexpr std::size_t half = width / 2;
    std::size_t widest = 0;
    for (const auto& one : signatures) widest = std::max(widest, columns(one.role));
    std::string row;
    for (const auto& one : signatures) {
      std::string cell = one.role + std::string(widest - columns(one.role) + 1, ' ');
      cell += one.name.empty() ? std::string(half - columns(cell) - 2, '_') : one.name;
      const bool right = !row.empty();
      if (right && columns(cell) + half > width) {  // a name too long to stand beside another
        lines.push_back(std::move(row));
        row.clear();
      } else if (right) {
        row += std::string(half - columns(row), ' ');
      }
      row += cell;
      if (right || columns(row) + 1 > half) {
        lines.push_back(std::move(row));
        row.clear();
      }
    }
    if (!row.empty()) lines.push_back(std::move(row));
  }

  void operator()(const Charts&) {}

  Lines lines;
};

}  // namespace

void append(Lines& lines, const Section& section) {
  if (section.blocks.empty()) return;
  if (section.heading.empty())
    lines.emplace_back();
  else
    heading(lines, section.heading);
  Printer printer;
  for (const Block& block : section.blocks) std::visit(printer, block);
  append(lines, printer.lines);
}

Lines text_of(const Page& page) {
  Lines lines;
  title(lines, page.left, page.right);
  Printer printer;
  for (const Section& section : page.sections) {
    // A page is printed: its headings are rules already, and every line counts.
    if (!section.heading.empty()) {
      Lines head;
      heading(head, section.heading);
      printer.lines.push_back(std::move(head.back()));
    }
    for (const Block& block : section.blocks) std::visit(printer, block);
  }
  append(lines, printer.lines);
  return lines;
}

}  // namespace bathwright::sheets
