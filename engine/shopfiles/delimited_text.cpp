#include "delimited_text.hpp"

#include <algorithm>

namespace bathwright::shopfiles {
namespace {

constexpr std::string_view line_ends = "\r\n";
constexpr std::size_t most_lines_in_quotes = 100;  // of a remark; what is longer is a quote never closed

bool is_blank_character(char c) { return c == ' ' || c == '\t' || c == '\r' || c == '\n'; }

std::string_view trimmed(std::string_view text) {
  while (!text.empty() && is_blank_character(text.front())) text.remove_prefix(1);
  while (!text.empty() && is_blank_character(text.back())) text.remove_suffix(1);
  return text;
}

/// Length of the line end at the start of `text`: CR LF is one.
std::size_t line_end(std::string_view text) {
  if (text.starts_with("\r\n")) return 2;
  return !text.empty() && line_ends.find(text.front()) != line_ends.npos ? 1 : 0;
}

std::size_t lines_in(std::string_view text) {
  std::size_t lines = 0;
  for (std::size_t at = text.find_first_of(line_ends); at != text.npos; ++lines)
    at = text.find_first_of(line_ends, at + line_end(text.substr(at)));
  return lines;
}

}  // namespace

bool DelimitedRow::is_blank() const {
  return fault.empty() && std::ranges::all_of(fields, &std::string::empty);
}

std::string on_one_line(std::string_view text) {
  std::string line;
  for (const char c : trimmed(text)) {
    if (!is_blank_character(c))
      line += c;
    else if (line.back() != ' ')
      line += ' ';
  }
  return line;
}

/// A field in quotes that holds whole rows is not closed where it should be.
bool DelimitedText::looks_like_rows(std::string_view field) const {
  for (std::size_t at = field.find_first_of(line_ends); at != field.npos;) {
    field.remove_prefix(at + line_end(field.substr(at)));
    at = field.find_first_of(line_ends);
    const auto count = std::ranges::count(field.substr(0, at), delimiter_);
    if (width_ > 1 && static_cast<std::size_t>(count) + 1 == width_) return true;
  }
  return false;
}

/// Reads from behind the opening quote at `at` to behind the closing one. Returns the fault, if any.
std::string DelimitedText::quoted_field(std::string_view text, std::size_t& at, std::string& field) const {
  std::size_t lines = 0;
  for (;; ++at) {
    const std::size_t piece = text.find_first_of("\"\r\n", at);
    if (piece == text.npos || lines > most_lines_in_quotes) return "a quote is opened and not closed";
    field.append(text.substr(at, piece - at));
    at = piece;
    if (text[at] != '"') {
      ++lines;
      field += text[at];
    } else if (text.substr(at).starts_with("\"\"")) {
      field += text[at++];
    } else {
      ++at;
      return looks_like_rows(field) ? "a quote is opened and not closed before the next row" : "";
    }
  }
}

/// Reads one row; `length` is what it takes of `text`, without its line end. Returns the fault, if any.
std::string DelimitedText::fields_of(std::string_view text, std::vector<std::string>& fields,
                                     std::size_t& length) const {
  const char ends[] = {delimiter_, '\r', '\n'};
  for (std::size_t at = 0;; ++at) {
    std::string field;
    if (at < text.size() && text[at] == '"') {
      if (std::string fault = quoted_field(text, ++at, field); !fault.empty()) return fault;
    } else {
      const std::size_t end = std::min(text.find_first_of(std::string_view(ends, 3), at), text.size());
      field = text.substr(at, end - at);
      at = end;
    }
    fields.emplace_back(trimmed(field));
    length = at;
    if (at == text.size() || line_end(text.substr(at)) > 0) return "";
    if (text[at] != delimiter_) return "text stands behind a closing quote";
  }
}

bool DelimitedText::next(DelimitedRow& row) {
  if (rest_.empty()) return false;
  row.line = line_;
  row.fields.clear();
  std::size_t length = 0;
  row.fault = fields_of(rest_, row.fields, length);
  if (!row.fault.empty()) {
    row.fields.clear();
    length = std::min(rest_.find_first_of(line_ends), rest_.size());
  }
  row.written = rest_.substr(0, length);
  line_ += lines_in(row.written) + 1;
  rest_.remove_prefix(length);
  rest_.remove_prefix(line_end(rest_));
  return true;
}

}  // namespace bathwright::shopfiles
