#include <bathwright/charts/page_file.hpp>
#include <bathwright/sheets/page.hpp>

namespace bathwright::sheets {
namespace {

std::string escaped(std::string_view text) {
  std::string out;
  for (const char c : text) {
    if (c == '&')
      out += "&amp;";
    else if (c == '<')
      out += "&lt;";
    else if (c == '>')
      out += "&gt;";
    else if (c == '"')
      out += "&quot;";
    else
      out += c;
  }
  return out;
}

std::string element(std::string_view tag, std::string_view content, std::string_view kind = {}) {
  return "<" + std::string(tag) + (kind.empty() ? "" : " class=\"" + std::string(kind) + "\"") + ">" +
         std::string(content) + "</" + std::string(tag) + ">";
}

std::string html_of(const Table& table) {
  std::string out = "<table><tr>";
  for (const Column& column : table.heads())
    out += element("th", escaped(column.head), column.align == Align::number ? "number" : "");
  out += "</tr>\n";
  for (const auto& row : table.rows()) {
    out += "<tr>";
    for (std::size_t c = 0; c < row.size(); ++c)
      out += element("td", escaped(row[c]), table.heads()[c].align == Align::number ? "number" : "");
    out += "</tr>\n";
  }
  return out + "</table>\n";
}

struct Printer {
  std::string operator()(const Paragraph& paragraph) const {
    return element("p", escaped(paragraph.text)) + "\n";
  }
  std::string operator()(const Stop& stop) const {
    return element("p", element("b", "STOP") + " " + escaped(stop.text), "stop") + "\n";
  }
  std::string operator()(const Fields& fields) const {
    std::string out = "<dl>\n";
    for (const Field& field : fields)
      out += element("dt", escaped(field.label)) + element("dd", escaped(field.value)) + "\n";
    return out + "</dl>\n";
  }
  std::string operator()(const Table& table) const { return html_of(table); }
  std::string operator()(const Task& task) const {
    std::string out =
        "<div class=\"task\">\n" +
        element("p", element("b", escaped(task.title)) + element("span", escaped(task.mark)), "split") + "\n";
    for (const std::string& stop : task.stops) out += (*this)(Stop{stop});
    for (const std::string& line : task.lines) out += (*this)(Paragraph{line});
    return out + "</div>\n";
  }
  std::string operator()(const SignatureLines& signatures) const {
    std::string out = "<div class=\"signatures\">\n";
    for (const SignatureLine& one : signatures)
      out += element("p", escaped(one.role) + " " + element("span", escaped(one.name), "line")) + "\n";
    return out + "</div>\n";
  }
  std::string operator()(const Charts& drawn) const {
    return element("div", charts::svg_of({"", {}, drawn.charts, ""}), "charts") + "\n";
  }
};

constexpr std::string_view style = R"(
@page { margin: 8mm 12mm }
body { font: 8.5pt/1.2 sans-serif; max-width: 190mm; margin: 1em auto; color: #000; background: #fff }
@media print { body { margin: 0 auto } }
h1 { font-size: 13pt; margin: 0 }
h2 { font-size: 9.5pt; margin: .45em 0 .15em; border-bottom: 1px solid #000 }
p { margin: .1em 0 }
.split { display: flex; justify-content: space-between; gap: 2em }
.stop { border: 2px solid #000; padding: .2em .5em }
dl { display: grid; grid-template-columns: max-content 1fr; gap: .1em 1em; margin: .3em 0 }
dt { font-weight: bold } dd { margin: 0 }
table { border-collapse: collapse; margin: .2em 0 }
th, td { border: 1px solid #999; padding: .1em .5em; text-align: left; font-variant-numeric: tabular-nums }
.number { text-align: right }
.notes { columns: 2; column-gap: 6mm; font-size: 7.5pt; text-align: left }
.task { margin: .25em 0; break-inside: avoid }
.task p + p { margin-left: 1.2em }
.signatures { display: grid; grid-template-columns: 1fr 1fr; gap: .6em 2em; margin-top: .5em; break-inside: avoid }
.signatures p { display: flex; gap: .6em }
.charts svg { width: 100%; height: auto }
.line { flex: 1; border-bottom: 1px solid #000 }
)";

/// Much text and nothing to write on: in two columns, smaller.
bool is_fine_print(const Section& section) {
  constexpr std::size_t much = 400;
  std::size_t length = 0;
  for (const Block& block : section.blocks) {
    const auto* paragraph = std::get_if<Paragraph>(&block);
    if (!paragraph) return false;
    length += paragraph->text.size();
  }
  return length > much;
}

}  // namespace

std::string html_of(const Page& page) {
  std::string out = "<!DOCTYPE html>\n<html lang=\"en\">\n<head><meta charset=\"utf-8\">" +
                    element("title", escaped(page.left)) + element("style", style) + "</head>\n<body>\n";
  out +=
      element("div", element("h1", escaped(page.left)) + element("p", escaped(page.right)), "split") + "\n";
  for (const Section& section : page.sections) {
    if (!section.heading.empty()) out += element("h2", escaped(section.heading)) + "\n";
    std::string blocks;
    for (const Block& block : section.blocks) blocks += std::visit(Printer{}, block);
    out += is_fine_print(section) ? element("div", blocks, "notes") + "\n" : blocks;
  }
  return out + "</body>\n</html>\n";
}

}  // namespace bathwright::sheets
