// bathwright log import: a laboratory's CSV file of analyses into the log.
#include <CLI/CLI.hpp>
#include <bathwright/sheets/text.hpp>
#include <bathwright/shopfiles/analyses_csv.hpp>
#include <fstream>
#include <iterator>
#include <map>
#include <set>

#include "shared_options.hpp"
#include "verbs.hpp"

namespace bathwright::command::log_verb {
namespace {

namespace fs = std::filesystem;

Json body_of(const shopfiles::ImportedAnalysis& row, const std::string& file) {
  Json body;
  body["results"] = Json::array();
  for (const auto& level : row.levels)
    body["results"].push_back({{"quantity", level.quantity},
                               {"value", level.value.v},
                               {"unit", "g/L"},
                               {"standard_uncertainty", nullptr},
                               {"from", "found"}});
  if (row.pH) body["pH"] = *row.pH;
  if (row.temperature) body["temperature_C"] = row.temperature->v;
  if (row.volume) body["volume_L"] = row.volume->v;
  body["inputs"] = {{"file", fs::path(file).filename().string()}, {"line", row.line}};
  return body;
}

logbook::NewEntry entry_of(const shopfiles::ImportedAnalysis& row, const std::string& file) {
  logbook::NewEntry entry;
  entry.kind = logbook::EntryKind::analysis;
  entry.tank = row.tank;
  entry.happened = row.sampled;
  entry.body = text_of(body_of(row, file));
  return entry;
}

/// What an analysis says, apart from where it came from.
using Said = std::tuple<std::string, std::string, std::string>;

Said said(const std::string& tank, const std::string& happened, const std::string& body_text) {
  const Json body = Json::parse(body_text, nullptr, false);
  Json figures;
  for (const char* key : {"results", "pH", "temperature_C", "volume_L"})
    if (body.is_object() && body.contains(key)) figures[key] = body[key];
  return {tank, happened, figures.dump()};
}

/// The analyses that the log has already, each with its entry.
Result<std::map<Said, std::int64_t>> logged_before(const logbook::Logbook& log,
                                                   const std::vector<shopfiles::ImportedAnalysis>& rows) {
  std::map<Said, std::int64_t> before;
  std::set<std::string> tanks;
  for (const auto& row : rows)
    if (tanks.insert(row.tank).second) {
      logbook::Filter filter;
      filter.tank = row.tank;
      filter.kind = logbook::EntryKind::analysis;
      const auto entries = log.list(filter);
      if (!entries) return entries.problems();
      for (const auto& entry : *entries) before[said(entry.tank, entry.happened, entry.body)] = entry.seq;
    }
  return before;
}

Problem no_columns(const std::string& file, const std::string& columns) {
  std::ifstream in(file, std::ios::binary);
  const std::string text{std::istreambuf_iterator<char>(in), {}};
  std::string headings;
  if (const auto found = shopfiles::csv_headings(file, text))
    for (const std::string& heading : *found)
      headings += (headings.empty() ? "" : ", ") + ('"' + heading + '"');
  return {Fault::bad_input, columns, "is not there",
          "a file that says which column is what (baths/README.md has an example)",
          headings.empty() ? "" : "the columns of " + file + " are: " + headings};
}

struct Imported {
  shopfiles::ImportedAnalyses read;
  std::vector<std::pair<std::size_t, std::int64_t>> known;  ///< line, entry that says the same
  std::vector<logbook::Entry> logged;
};

Result<Imported> import_file(const Context& context, const std::string& file,
                             const std::string& columns_file) {
  std::error_code failure;
  if (!fs::exists(columns_file, failure)) return no_columns(file, columns_file);
  const auto columns = shopfiles::read_columns(columns_file);
  if (!columns) return columns.problems();
  auto read = shopfiles::import_analyses(file, *columns);
  if (!read) return read.problems();
  Imported imported{*std::move(read), {}, {}};
  if (imported.read.analyses.empty()) return imported;
  auto opened = open_log_to_write(context);
  if (!opened) return opened.problems();
  OpenLog open = *std::move(opened);
  const auto before = logged_before(open.log, imported.read.analyses);
  if (!before) return before.problems();
  std::vector<logbook::NewEntry> fresh;
  for (const auto& row : imported.read.analyses) {
    logbook::NewEntry entry = entry_of(row, file);
    const auto known = before->find(said(entry.tank, logbook::iso_utc(*entry.happened), entry.body));
    if (known == before->end())
      fresh.push_back(std::move(entry));
    else
      imported.known.emplace_back(row.line, known->second);
  }
  auto logged = append_all(context, open, std::move(fresh));
  if (!logged) return logged.problems();
  imported.logged = *std::move(logged);
  return imported;
}

Json json_of(const Imported& imported) {
  Json doc = document({});
  doc["rows"] = imported.read.rows;
  doc["logged"] = Json::array();
  for (const auto& entry : imported.logged) doc["logged"].push_back(entry.seq);
  doc["already_logged"] = Json::array();
  for (const auto& [line, seq] : imported.known)
    doc["already_logged"].push_back({{"line", line}, {"seq", seq}});
  doc["rejected"] = Json::array();
  for (const auto& row : imported.read.rejected)
    for (const auto& reason : row.reasons)
      doc["rejected"].push_back({{"line", row.line},
                                 {"column", reason.column},
                                 {"written", row.written},
                                 {"what", reason.problem.what},
                                 {"expected", reason.problem.expected},
                                 {"try", reason.problem.try_this}});
  doc["repeated"] = Json::array();
  for (const auto& one : imported.read.repeated)
    doc["repeated"].push_back({{"line", one.line}, {"first_line", one.first_line}, {"column", one.column}});
  return doc;
}

sheets::Lines lines_of(const Imported& imported) {
  sheets::Lines lines;
  sheets::say(lines,
              std::to_string(imported.read.rows) + " rows read, " + std::to_string(imported.logged.size()) +
                  " analyses logged" +
                  (imported.logged.empty() ? "."
                                           : ": entries " + std::to_string(imported.logged.front().seq) +
                                                 " to " + std::to_string(imported.logged.back().seq) + "."));
  for (const auto& [line, seq] : imported.known)
    sheets::say(
        lines, "  line " + std::to_string(line) + ": the log has it already, as entry " + std::to_string(seq),
        4);
  for (const auto& one : imported.read.repeated)
    sheets::say(lines,
                "  line " + std::to_string(one.line) + ": " + one.column + " was given on line " +
                    std::to_string(one.first_line) + " already; left out",
                4);
  for (const auto& row : imported.read.rejected) {
    sheets::say(lines, "  line " + std::to_string(row.line) + " is not logged: " + row.written, 4);
    for (const auto& reason : row.reasons) sheets::say(lines, "    " + reason.problem.text(), 2);
  }
  return lines;
}

int run(const Context& context, const std::string& file, const std::string& columns) {
  const auto imported = import_file(context, file, columns);
  if (!imported) return fail(context, imported.problems());
  if (context.json)
    print(json_of(*imported));
  else
    print(lines_of(*imported));
  return imported->read.rejected.empty() ? Exit::all_well : Exit::finding;
}

}  // namespace

void add_import(CLI::App& log, Context& context, Action& action) {
  auto* verb = log.add_subcommand("import", "a laboratory's analyses from CSV")->fallthrough();
  auto file = std::make_shared<std::string>();
  auto columns = std::make_shared<std::string>();
  verb->add_option("FILE", *file, "the CSV file")->required()->check(CLI::ExistingFile);
  verb->add_option("--columns", *columns, "the file that says which column is what, TOML")->required();
  add_signature(*verb, context);
  verb->callback([&context, &action, file, columns] {
    action = [&context, file, columns] { return run(context, *file, *columns); };
  });
  verb->footer(
      "Example: bathwright log import week-9.csv --columns laboratory.toml --by \"M. Okafor\"\n"
      "Rows the log has already are passed over; a row that cannot be read is told with its line, and the others\n"
      "are logged. baths/README.md describes the file of columns.\n");
}

}  // namespace bathwright::command::log_verb
