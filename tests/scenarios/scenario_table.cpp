#include "scenario_table.hpp"

#include <fmt/format.h>

#include <algorithm>
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

/// A key as it is written in a path: "~1" stands for a '/' of its own (as in RFC 6901).
std::string key_of(std::string part) {
  for (std::size_t at = part.find("~1"); at != std::string::npos; at = part.find("~1", at + 1))
    part.replace(at, 2, "/");
  return part;
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

bool Figure::fits_by_hand() const { return std::abs(off_percent(by_hand)) <= tolerance_percent; }
bool Figure::ok() const { return std::abs(off_percent(better != 0 ? better : by_hand)) <= tolerance_percent; }

json at(const json& document, const std::string& where) {
  const json* here = &document;
  std::istringstream path(where);
  for (std::string part; std::getline(path, part, '/');) {
    part = key_of(std::move(part));
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
  const auto count = [&](auto&& which) { return std::ranges::count_if(figures, which); };
  const auto told = [](const Figure& f) { return !f.run.empty(); };
  const auto by_hand = [&](const Figure& f) { return told(f) && f.fits_by_hand(); };
  std::string text = fmt::format(
      "# The demonstration scenarios, figure by figure\n\n"
      "Written by the target `scenario_table`; do not edit. The scenarios are worked by hand as a shop's spreadsheet does "
      "it: the volume of what is added is neglected, levels stand still between two additions. Tanks, readings and "
      "policies are in `files/`, the runs in `runs.csv`. Of {} figures the program tells {}: {} fit within the "
      "tolerance, {} miss. A miss is judged again under \"better\", worked by hand with what the note says the "
      "scenario left out: {} of them fit that. \"Not told\" is a step of the calculation that no command prints, or "
      "what the note says.\n\n"
      "| scenario | figure | unit | by hand | program | off % | within % | fits | better | off % | fits | note |\n"
      "|---|---|---|---|---|---|---|---|---|---|---|---|\n",
      figures.size(), count(told), count(by_hand),
      count([&](const Figure& f) { return told(f) && !f.fits_by_hand(); }),
      count([&](const Figure& f) { return told(f) && !f.fits_by_hand() && f.better != 0 && f.ok(); }));
  const auto yes = [](bool fits) { return fits ? "yes" : "MISS"; };
  for (const Figure& f : figures) {
    text += fmt::format("| {} | {} | {} | {:.6g} | ", f.scenario, f.label, f.unit, f.by_hand);
    if (told(f))
      text += fmt::format("{:.6g} | {:+.3f} | {:g} | {} | ", f.found, f.off_percent(f.by_hand),
                          f.tolerance_percent, yes(f.fits_by_hand()));
    else
      text += "| | | not told | ";
    if (told(f) && f.better != 0)
      text += fmt::format("{:.6g} | {:+.3f} | {} | ", f.better, f.off_percent(f.better), yes(f.ok()));
    else
      text += "| | | ";
    text += f.note + " |\n";
  }
  return text;
}

}  // namespace scenario_table
