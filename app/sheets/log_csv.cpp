#include <bathwright/sheets/log_csv.hpp>
#include <bathwright/sheets/log_sheet.hpp>
#include <nlohmann/json.hpp>

namespace bathwright::sheets {
namespace {

using Json = nlohmann::json;

class Writer {
 public:
  explicit Writer(const CsvForm& form) : form_(form) {}

  void row(const std::vector<Json>& cells) {
    for (std::size_t i = 0; i < cells.size(); ++i) {
      if (i > 0) text_ += form_.decimal_comma ? ';' : ',';
      text_ += cells[i].is_string() ? quoted(cells[i].get_ref<const std::string&>()) : number(cells[i]);
    }
    text_ += "\r\n";
  }
  const std::string& text() const { return text_; }

 private:
  static std::string quoted(std::string_view cell) {
    if (cell.empty()) return "";
    std::string text = "\"";
    // A cell that begins so would be computed, not shown (common practice against such injection).
    if (std::string_view("=+-@\t\r").find(cell.front()) != std::string_view::npos) text += '\'';
    for (const char c : cell) text += c == '"' ? std::string("\"\"") : std::string(1, c);
    return text + '"';
  }
  std::string number(const Json& cell) const {
    std::string digits = cell.is_null() ? "" : cell.dump();
    if (form_.decimal_comma)
      for (char& c : digits) c = c == '.' ? ',' : c;
    return digits;
  }

  CsvForm form_;
  std::string text_ = "\xEF\xBB\xBF";
};

Json field(const Json& object, const char* key) {
  if (!object.is_object() || !object.contains(key)) return nullptr;
  const Json& value = object[key];
  return value.is_string() || value.is_number() ? value : Json(nullptr);
}

}  // namespace

std::string log_csv(const std::vector<logbook::Entry>& entries,
                    const std::optional<shifts::Calendar>& calendar, const CsvForm& form) {
  Writer csv(form);
  csv.row({"no",         "kind",         "tank",     "shift",
           "logged UTC", "logged local", "done UTC", "by",
           "role",       "witness",      "station",  "about",
           "quantity",   "value",        "unit",     "standard uncertainty",
           "from",       "body",         "program",  "bath type",
           "hash"});
  for (const auto& entry : entries) {
    const Json body = Json::parse(entry.body, nullptr, false);
    const auto row = [&](const Json& result, const std::string& text) {
      csv.row({entry.seq,
               std::string(logbook::name(entry.kind)),
               entry.tank,
               entry.shift,
               entry.at,
               calendar ? local_time(entry.at, calendar) : "",
               entry.happened,
               entry.by,
               entry.role,
               entry.witness,
               entry.station,
               entry.about ? Json(*entry.about) : Json(nullptr),
               field(result, "quantity"),
               field(result, "value"),
               field(result, "unit"),
               field(result, "standard_uncertainty"),
               field(result, "from"),
               text,
               entry.program,
               entry.bath_type,
               entry.hash});
    };
    row(nullptr, entry.body);
    if (entry.kind == logbook::EntryKind::analysis && body.is_object() && body.contains("results") &&
        body["results"].is_array())
      for (const Json& result : body["results"]) row(result, "");
  }
  return csv.text();
}

}  // namespace bathwright::sheets
