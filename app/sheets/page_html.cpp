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
};

constexpr std::string_view style = R"(
@page { margin: 12mm }
body { font: 9.5pt/1.3 sans-serif; max-width: 190mm; margin: 1em auto; color: #000; background: #fff }
h1 { font-size: 13pt; margin: 0 }
h2 { font-size: 10pt; margin: .8em 0 .2em; border-bottom: 1px solid #000 }
p { margin: .15em 0 }
.split { display: flex; justify-content: space-between; gap: 2em }
.stop { border: 2px solid #000; padding: .2em .5em }
dl { display: grid; grid-template-columns: max-content 1fr; gap: .1em 1em; margin: .3em 0 }
dt { font-weight: bold } dd { margin: 0 }
table { border-collapse: collapse; margin: .2em 0 }
th, td { border: 1px solid #999; padding: .1em .5em; text-align: left; font-variant-numeric: tabular-nums }
.number { text-align: right }
.task { margin: .3em 0; break-inside: avoid }
.task p + p { margin-left: 1.2em }
.signatures { display: grid; grid-template-columns: 1fr 1fr; gap: .8em 2em; margin-top: .8em; break-inside: avoid }
.signatures p { display: flex; gap: .6em }
.line { flex: 1; border-bottom: 1px solid #000 }
)";

}  // namespace

std::string html_of(const Page& page) {
  std::string out = "<!DOCTYPE html>\n<html lang=\"en\">\n<head><meta charset=\"utf-8\">" +
                    element("title", escaped(page.left)) + element("style", style) + "</head>\n<body>\n";
  out +=
      element("div", element("h1", escaped(page.left)) + element("p", escaped(page.right)), "split") + "\n";
  for (const Section& section : page.sections) {
    if (!section.heading.empty()) out += element("h2", escaped(section.heading)) + "\n";
    for (const Block& block : section.blocks) out += std::visit(Printer{}, block);
  }
  return out + "</body>\n</html>\n";
}

}  // namespace bathwright::sheets
