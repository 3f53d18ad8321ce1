#include <fmt/format.h>

#include <algorithm>
#include <bathwright/base/letters.hpp>
#include <bathwright/base/nearest.hpp>
#include <bathwright/shopfiles/analyses_csv.hpp>
#include <bathwright/units/read.hpp>
#include <charconv>
#include <cmath>
#include <functional>
#include <limits>
#include <map>
#include <tuple>

#include "delimited_text.hpp"
#include "level_unit.hpp"
#include "ranges.hpp"
#include "sampled_time.hpp"

namespace bathwright::shopfiles {
namespace {

constexpr std::size_t longest_tank_bytes = 200;  // as in the log

Problem bad_file(std::string where, std::string what, std::string expected, std::string mend) {
  return {Fault::bad_input, std::move(where), std::move(what), std::move(expected), std::move(mend)};
}

/// `text` without its byte order mark, or why it is no text.
Result<std::string_view> plain_text(std::string_view name, std::string_view text) {
  const std::string utf8 = "a text in UTF-8", mend = "In the spreadsheet, save it as \"CSV UTF-8\".";
  if (text.size() > longest_csv_bytes)
    return bad_file(std::string(name), "is larger than 64 MiB", "a smaller file", "Split it.");
  if (text.starts_with("\xff\xfe") || text.starts_with("\xfe\xff"))
    return bad_file(std::string(name), "is written in UTF-16", utf8, mend);
  if (text.starts_with("\xef\xbb\xbf")) text.remove_prefix(3);
  for (std::string_view rest = text; !rest.empty();) {
    const std::size_t length = letter_length(rest);
    if (length > 0 && rest.front() != '\0') {
      rest.remove_prefix(length);
      continue;
    }
    const std::size_t before = text.size() - rest.size();
    const auto line = 1 + std::ranges::count(text.substr(0, before), '\n');
    return bad_file(at_line(name, static_cast<int>(line)),
                    length > 0 ? "a zero byte: this is not a text file" : "a letter that is not UTF-8", utf8,
                    mend);
  }
  return text;
}

/// The first row that is not blank, and what follows it.
struct Head {
  char delimiter;
  std::size_t line = 0;
  std::vector<std::string> headings;
  std::string fault;
  DelimitedText body;

  Head(std::string_view text, char delimiter_) : delimiter(delimiter_), body(text, delimiter_) {
    DelimitedRow row;
    while (headings.empty() && fault.empty() && body.next(row)) {
      if (row.is_blank() || is_separator_line(row)) continue;
      line = row.line;
      fault = row.fault;
      for (const std::string& field : row.fields) headings.push_back(on_one_line(field));
      body.expect_fields(headings.size());
    }
  }

  [[nodiscard]] std::size_t count(const std::string& heading) const {
    return static_cast<std::size_t>(std::ranges::count(headings, heading));
  }
  [[nodiscard]] std::size_t place(const std::string& heading) const {
    return static_cast<std::size_t>(std::ranges::find(headings, heading) - headings.begin());
  }

  static bool is_separator_line(const DelimitedRow& row) {
    return row.line == 1 && row.written.size() == 5 && row.written.starts_with("sep=");
  }
};

/// The delimiter a spreadsheet states in a first line "sep=;".
std::optional<char> stated_delimiter(std::string_view text) {
  if (!text.starts_with("sep=") || text.size() < 5) return {};
  const auto known = std::ranges::find(delimiters, text[4]);
  if (known == delimiters.end()) return {};
  return *known;
}

/// The head as split by the given or stated delimiter, or else by the one that yields most of the headings
/// wanted, and among those the most headings.
Result<Head> read_head(std::string_view name, std::string_view text, std::optional<char> delimiter,
                       const std::vector<std::string>& wanted) {
  if (!delimiter) delimiter = stated_delimiter(text);
  std::vector<Head> heads;
  for (const char one : delimiters)
    if (!delimiter || *delimiter == one) heads.emplace_back(text, one);
  const auto merit = [&](const Head& head) {
    const auto found =
        std::ranges::count_if(wanted, [&](const auto& heading) { return head.count(heading) > 0; });
    return std::pair(found, head.headings.size());
  };
  std::ranges::stable_sort(heads, std::greater<>(), merit);
  const Head& best = heads.front();
  if (best.line == 0)
    return bad_file(std::string(name), "holds nothing", "a row of headings, then the analyses", "");
  const std::string place = at_line(name, static_cast<int>(best.line));
  if (!best.fault.empty()) return bad_file(place, best.fault, "headings, each in its quotes or without", "");
  if (heads.size() > 1 && best.headings.size() > 1 && merit(heads[1]) == merit(best))
    return bad_file(place, "the headings can be split in two ways", "one delimiter", "State the delimiter.");
  return best;
}

std::vector<std::string> headings_of(const AnalysisColumns& columns) {
  std::vector<std::string> all = {columns.tank, columns.sampled};
  if (!columns.time.empty()) all.push_back(columns.time);
  if (!columns.pH.empty()) all.push_back(columns.pH);
  if (columns.temperature) all.push_back(columns.temperature->heading);
  if (columns.volume) all.push_back(columns.volume->heading);
  for (const QuantityColumn& column : columns.quantities) all.push_back(column.heading);
  return all;
}

Problems missing_columns(std::string_view name, const Head& head, const std::vector<std::string>& wanted) {
  Problems problems;
  const std::string place = at_line(name, static_cast<int>(head.line));
  for (const std::string& heading : wanted) {
    const std::size_t count = head.count(heading);
    if (count == 1) continue;
    const auto near = nearest(heading, head.headings);
    std::vector<std::string> shown;
    for (const std::string& one : head.headings) {
      if (shown.size() == 20) break;  // a message is one line
      shown.push_back(printable(one));
    }
    problems.push_back(bad_file(
        place,
        fmt::format("{} column is headed '{}'", count == 0 ? "no" : "more than one", printable(heading)),
        count == 0 ? fmt::format("one of {}", fmt::join(shown, " | ")) : "each heading once",
        count > 0 ? "Rename one of them."
        : near    ? "Did you mean " + printable(*near) + "?"
                  : ""));
  }
  return problems;
}

/// Of a whole text with a decimal point; NaN where it is no number.
double value_of(const std::string& number) {
  double value = 0;
  const char* last = number.data() + number.size();
  const auto [end, error] = std::from_chars(number.data(), last, value);
  return error == std::errc{} && end == last ? value : std::numeric_limits<double>::quiet_NaN();
}

/// The number in a cell with a decimal point, or what is wrong with it.
Result<std::string> plain_number(std::string_view cell, char decimal_sign, const std::string& where) {
  const char other_sign = decimal_sign == ',' ? '.' : ',';
  const std::string shown = '\'' + printable(cell) + '\'';
  if (cell.starts_with('<') || cell.starts_with('>'))
    return bad_file(where, shown + " is a limit, not a value",
                    "a number, or nothing where it was not measured",
                    "Leave the cell empty, or write the value found.");
  if (cell.find(other_sign) != cell.npos)
    return bad_file(
        where, fmt::format("{} holds a '{}', and the decimal sign is '{}'", shown, other_sign, decimal_sign),
        "digits with one decimal sign, none between thousands",
        "Write the number without it, or state the other decimal sign for the file.");
  if (cell.starts_with('+')) cell.remove_prefix(1);
  std::string number(cell);
  std::ranges::replace(number, decimal_sign, '.');
  if (!std::isfinite(value_of(number)))
    return bad_file(where, shown + " is not a number", "a number without its unit, or nothing", "");
  return number;
}

class Importer {
 public:
  Importer(std::string_view name, const AnalysisColumns& columns, const Head& head, shifts::TimeZone zone)
      : name_(name), columns_(columns), head_(head), zone_(zone) {
    for (const QuantityColumn& column : columns.quantities)
      units_.push_back(LevelUnit::of(column.quantity, column.unit, "").value());  // check() has tried it
  }

  void take(const DelimitedRow& row) {
    if (row.is_blank()) return;
    ++imported_.rows;
    row_ = &row;
    reasons_.clear();
    ImportedAnalysis analysis;
    if (!row.fault.empty()) {
      reject("", row.fault, "each field in its quotes or without",
             "Close it, and double a quote that belongs to the text.");
    } else if (row.fields.size() != head_.headings.size()) {
      reject("", fmt::format("has {} fields", row.fields.size()),
             fmt::format("{}, as there are headings", head_.headings.size()),
             fmt::format("Put a field in quotes that holds a {}.", head_.delimiter == ','   ? "comma"
                                                                   : head_.delimiter == ';' ? "semicolon"
                                                                                            : "tab"));
    } else {
      analysis = read_fields();
    }
    if (!reasons_.empty())
      imported_.rejected.push_back({row.line, std::string(row.written), std::move(reasons_)});
    else if (leave_out_repeated(analysis))
      imported_.analyses.push_back(std::move(analysis));
  }

  ImportedAnalyses conclude() { return std::move(imported_); }

 private:
  std::string_view cell(const std::string& heading) const { return row_->fields[head_.place(heading)]; }

  std::string where(const std::string& heading) const {
    const std::string place = at_line(name_, static_cast<int>(row_->line));
    return heading.empty() ? place : place + ": " + printable(heading);
  }

  void reject(const std::string& heading, const Problems& problems) {
    for (const Problem& problem : problems) reasons_.push_back({heading, problem});
  }
  void reject(const std::string& heading, std::string what, std::string expected, std::string mend) {
    reject(heading, {bad_file(where(heading), std::move(what), std::move(expected), std::move(mend))});
  }

  /// What `read` makes of the number in a cell; nothing where that is empty or not good.
  template <class Read>
  auto measured(const std::string& heading, Read read)
      -> std::optional<std::decay_t<decltype(read(std::string(), std::string()).value())>> {
    const std::string_view written = heading.empty() ? std::string_view{} : cell(heading);
    if (written.empty()) return {};
    const auto number = plain_number(written, columns_.decimal_sign, where(heading));
    if (!number) {
      reject(heading, number.problems());
      return {};
    }
    auto value = read(*number, where(heading));
    if (value) return *std::move(value);
    reject(heading, value.problems());
    return {};
  }

  std::string read_tank() {
    const std::string_view tank = cell(columns_.tank);
    if (tank.empty()) reject(columns_.tank, "is empty", "the tank's identifier", "");
    if (tank.size() > longest_tank_bytes)
      reject(columns_.tank, "is longer than 200 bytes", "the tank's identifier", "");
    if (std::ranges::any_of(tank, [](char c) { return (c >= 0 && c < 0x20) || c == 0x7f; }))
      reject(columns_.tank, "holds a line break or another control character", "text on one line", "");
    return std::string(tank);
  }

  shifts::UtcTime read_sampled() {
    std::string written(cell(columns_.sampled));
    if (!columns_.time.empty()) written.append(" ").append(cell(columns_.time));
    const auto moment = read_sampled_time(written, columns_.dates, zone_, where(columns_.sampled));
    if (moment) return *moment;
    reject(columns_.sampled, moment.problems());
    return {};
  }

  ImportedAnalysis read_fields() {
    ImportedAnalysis analysis;
    analysis.line = row_->line;
    analysis.tank = read_tank();
    analysis.sampled = read_sampled();
    for (std::size_t i = 0; i < units_.size(); ++i) {
      const QuantityColumn& column = columns_.quantities[i];
      const auto value = measured(column.heading, [&](const std::string& number, const std::string& place) {
        return units_[i].read(number, place);
      });
      if (value) analysis.levels.push_back({column.quantity, *value});
    }
    analysis.pH = measured(columns_.pH, read_pH);
    if (columns_.temperature)
      analysis.temperature =
          measured(columns_.temperature->heading, [&](const std::string& number, const std::string& place) {
            return units::read_temperature(number + ' ' + columns_.temperature->unit, place);
          });
    if (columns_.volume)
      analysis.volume =
          measured(columns_.volume->heading, [&](const std::string& number, const std::string& place) {
            return read_positive_volume(number, columns_.volume->unit, place);
          });
    if (reasons_.empty() && holds_nothing(analysis))
      reject("", "holds nothing measured", "a number in at least one column",
             "Remove the row, or fill it in.");
    return analysis;
  }

  static Result<double> read_pH(const std::string& number, const std::string& place) {
    const double pH = value_of(number);
    if (pH >= possible_pH.low && pH <= possible_pH.high) return pH;
    return Problem{Fault::out_of_range, place, number + " cannot be a pH",
                   fmt::format("a number from {} to {}", possible_pH.low, possible_pH.high),
                   "Check the decimal point."};
  }

  static Result<units::Litres> read_positive_volume(const std::string& number, const std::string& unit,
                                                    const std::string& place) {
    auto volume = units::read_volume(number + ' ' + unit, place);
    if (!volume || volume->v > 0) return volume;
    return Problem{Fault::out_of_range, place, "is zero", "a volume above zero",
                   "Leave the cell empty where it was not measured."};
  }

  static bool holds_nothing(const ImportedAnalysis& analysis) {
    return analysis.levels.empty() && !analysis.pH && !analysis.temperature && !analysis.volume;
  }

  /// Whether an earlier row gave this value; the first to do so is remembered.
  bool is_repeated(const ImportedAnalysis& analysis, const std::string& heading, double value) {
    const auto [given, is_new] =
        lines_.try_emplace({analysis.tank, analysis.sampled, heading, value}, analysis.line);
    if (!is_new)
      imported_.repeated.push_back({analysis.line, given->second, heading, analysis.tank, analysis.sampled});
    return !is_new;
  }

  /// False where nothing is left.
  bool leave_out_repeated(ImportedAnalysis& analysis) {
    std::erase_if(analysis.levels, [&](const ImportedLevel& level) {
      const auto column = std::ranges::find(columns_.quantities, level.quantity, &QuantityColumn::quantity);
      return is_repeated(analysis, column->heading, level.value.v);
    });
    if (analysis.pH && is_repeated(analysis, columns_.pH, *analysis.pH)) analysis.pH.reset();
    if (analysis.temperature && is_repeated(analysis, columns_.temperature->heading, analysis.temperature->v))
      analysis.temperature.reset();
    if (analysis.volume && is_repeated(analysis, columns_.volume->heading, analysis.volume->v))
      analysis.volume.reset();
    return !holds_nothing(analysis);
  }

  std::string_view name_;
  const AnalysisColumns& columns_;
  const Head& head_;
  shifts::TimeZone zone_;
  std::vector<LevelUnit> units_;  // of columns_.quantities
  ImportedAnalyses imported_;
  std::map<std::tuple<std::string, shifts::UtcTime, std::string, double>, std::size_t> lines_;
  const DelimitedRow* row_ = nullptr;
  std::vector<Rejection> reasons_;  // against the row being read
};

}  // namespace

Result<ImportedAnalyses> import_analyses_text(std::string_view name, std::string_view text,
                                              const AnalysisColumns& columns) {
  if (Problems problems = check(columns); !problems.empty()) return problems;
  const auto plain = plain_text(name, text);
  if (!plain) return plain.problems();
  const std::vector<std::string> wanted = headings_of(columns);
  auto head = read_head(name, *plain, columns.delimiter, wanted);
  if (!head) return head.problems();
  if (Problems problems = missing_columns(name, *head, wanted); !problems.empty()) return problems;
  const auto zone = shifts::TimeZone::find(columns.zone);
  if (!zone) return zone.problems();
  Importer importer(name, columns, *head, *zone);
  DelimitedText body = head->body;
  for (DelimitedRow row; body.next(row);) importer.take(row);
  return importer.conclude();
}

Result<ImportedAnalyses> import_analyses(const std::string& path, const AnalysisColumns& columns) {
  const auto text = read_text_file(path, longest_csv_bytes);
  if (!text) return text.problems();
  return import_analyses_text(path, *text, columns);
}

Result<std::vector<std::string>> csv_headings(std::string_view name, std::string_view text,
                                              std::optional<char> delimiter) {
  const auto plain = plain_text(name, text);
  if (!plain) return plain.problems();
  auto head = read_head(name, *plain, delimiter, {});
  if (!head) return head.problems();
  return head->headings;
}

}  // namespace bathwright::shopfiles
