#include "scenario_table.hpp"

#include <fmt/format.h>

#include <bathwright/data/csv.hpp>
#include <cmath>
#include <fstream>
#include <limits>
#include <map>
#include <sstream>
#include <stdexcept>

#include "../app/program.hpp"

namespace scenario_table {
namespace {

using nlohmann::json;
namespace data = bathwright::data;

std::string content_of(const std::string& file) {
  std::ostringstream content;
  content << std::ifstream(file, std::ios::binary).rdbuf();
  return content.str();
}

const json* element_with(const json& list, const std::string& key, const std::string& value) {
  for (const json& element : list)
    if (element.is_object() && element.contains(key) && element[key].is_string() && element[key] == value)
      return &element;
  return nullptr;
}

/// Arguments of a run with the names of its files in full.
std::string in_full(std::string arguments) {
  for (const auto& [mark, folder] :
       {std::pair{"baths/", PROJECT_DIR "/baths/"}, {"files/", SCENARIO_DIR "/files/"}})
    for (std::size_t found = arguments.find(mark); found != std::string::npos;
         found = arguments.find(mark, found + std::string(folder).size()))
      arguments.replace(found, std::string(mark).size(), folder);
  return arguments;
}

data::CsvTable table(const std::string& name, std::initializer_list<std::string_view> numeric) {
  auto read =
      data::CsvTable::read(name, content_of(SCENARIO_DIR "/" + name), std::vector<std::string_view>(numeric));
  if (!read) throw std::runtime_error(read.problems().front().text());
  return *std::move(read);
}

}  // namespace

bool Figure::ok() const { return std::abs(off_percent(better != 0 ? better : by_hand)) <= tolerance_percent; }

json at(const json& document, const std::string& where) {
  const json* here = &document;
  std::istringstream path(where);
  for (std::string part; std::getline(path, part, '/');) {
    const std::size_t equals = part.find('=');
    if (part == "#") return here->is_array() ? json(here->size()) : json();
    if (here->is_array() && equals != std::string::npos) {
      here = element_with(*here, part.substr(0, equals), part.substr(equals + 1));
      if (!here) return {};
    } else if (here->is_array()) {
      const std::size_t place = part == "last" ? here->size() - 1 : std::stoul(part);
      if (place >= here->size()) return {};
      here = &(*here)[place];
    } else if (here->is_object() && here->contains(part)) {
      here = &(*here)[part];
    } else {
      return {};
    }
  }
  return *here;
}

std::vector<Figure> figures() {
  const auto runs = table("runs.csv", {});
  std::map<std::string, json> documents;
  const app_test::Bench bench;
  for (std::size_t i = 0; i < runs.size(); ++i)
    documents[std::string(runs[i]["run"])] =
        bench.run(in_full(std::string(runs[i]["arguments"])) + " --json").json();
  const auto rows = table("figures.csv", {"by_hand", "tolerance_percent", "times", "better"});
  std::vector<Figure> all;
  for (std::size_t i = 0; i < rows.size(); ++i) {
    const auto row = rows[i];
    const auto text = [&](const char* column) { return std::string(row[column]); };
    const auto number = [&](const char* column, double otherwise) {
      return row[column].empty() ? otherwise : row.number(column);
    };
    Figure figure{text("scenario"),    text("key"),           text("label"),
                  text("unit"),        row.number("by_hand"), row.number("tolerance_percent"),
                  text("run"),         text("where"),         number("times", 1),
                  number("better", 0), text("note"),          std::numeric_limits<double>::quiet_NaN()};
    if (!figure.run.empty())
      if (const json value = at(documents[figure.run], figure.where); value.is_number())
        figure.found = figure.times * value.get<double>();
    all.push_back(std::move(figure));
  }
  return all;
}

std::string markdown(const std::vector<Figure>& figures) {
  std::string text =
      "# The demonstration scenarios, figure by figure\n\n"
      "Written by the target `scenario_table`; do not edit. The figures by hand are those of a worked example that "
      "neglects the volume of what is added and other things a shop's spreadsheet does; the note says which, and the "
      "figure by hand that counts them stands under \"better\". A figure fits within its tolerance of the better one, "
      "or of the one by hand where there is none. Tanks and readings are in `files/`, the runs in `runs.csv`.\n\n"
      "| scenario | figure | unit | by hand | better | program | off % | fits | note |\n|---|---|---|---|---|---|---|---|---|\n";
  for (const Figure& f : figures) {
    const bool told = !f.run.empty();
    text += fmt::format("| {} | {} | {} | {:.6g} | {} | {} | {} | {} | {} |\n", f.scenario, f.label, f.unit,
                        f.by_hand, f.better != 0 ? fmt::format("{:.6g}", f.better) : "",
                        told ? fmt::format("{:.6g}", f.found) : "",
                        told ? fmt::format("{:+.3f}", f.off_percent(f.by_hand)) : "",
                        told ? (f.ok() ? "yes" : "NO") : "not told", f.note);
  }
  return text;
}

}  // namespace scenario_table
