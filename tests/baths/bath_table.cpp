#include "bath_table.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <limits>

#include "../app/program.hpp"

namespace bath_table {
namespace {

namespace fs = std::filesystem;
using nlohmann::json;

constexpr double none = std::numeric_limits<double>::quiet_NaN();

double number(const json& value) { return value.is_number() ? value.get<double>() : none; }

std::string figure(double value, const char* format = "{:.2f}") {
  const std::string text = std::isnan(value) ? "" : fmt::format(fmt::runtime(format), value);
  return text.find_first_not_of("-0.") == std::string::npos && text.starts_with('-') ? text.substr(1) : text;
}

std::string range(const Limits& limits) {
  if (std::isnan(limits.low) && std::isnan(limits.high)) return "";
  return figure(limits.low, "{:g}") + " to " + figure(limits.high, "{:g}");
}

/// The solid nearest to forming, or farthest beyond: "H3BO3 -0.21".
std::string tightest(const json& tank, const char* key) {
  std::string name;
  double least = std::numeric_limits<double>::infinity();
  for (const json& solid : tank.at("headroom")) {
    const double room = number(solid.at(key));
    if (room < least) least = room, name = solid.at("solid");
  }
  return name.empty() ? "" : name + " " + figure(least);
}

/// What the bath type puts first among its quantities, as a free ion or molecule.
std::string key_species(const Row& row) {
  if (row.type.at("quantities").empty()) return "";
  const json& counts = row.type.at("quantities")[0].at("counts");
  const std::string first = counts.empty() ? "" : counts.begin().key();
  for (const json& species : row.tank.at("species"))
    if (species.at("name") == first) return first + " " + figure(number(species.at("log10_activity")));
  return "";
}

}  // namespace

Limits window(const json& type, const std::string& subject) {
  for (const json& w : type.at("windows"))
    if (w.at("subject") == subject) return {number(w.at("low")), number(w.at("high"))};
  return {none, none};
}

std::vector<std::string> shipped_bath_types() {
  const app_test::Bench bench;
  std::vector<std::string> ids;
  for (const json& one : bench.run("plugins list --json").json().at("plugins"))
    if (one.at("state") == "ready") ids.push_back(one.at("id"));
  return ids;
}

std::vector<Row> demonstration_tanks() {
  std::vector<fs::path> files;
  for (const auto& entry : fs::directory_iterator(PROJECT_DIR "/baths"))
    if (entry.path().extension() == ".toml") files.push_back(entry.path());
  std::ranges::sort(files);
  const app_test::Bench bench;
  std::vector<Row> rows;
  for (const fs::path& file : files) {
    const auto run = bench.run("tank '" + file.string() + "' --json");
    Row row{"baths/" + file.filename().string(), run.status, run.err, run.json(), {}};
    if (row.tank.is_object() && row.tank.contains("bath_type"))
      row.type =
          bench.run("plugins show '" + row.tank.at("bath_type").get<std::string>() + "' --json").json();
    rows.push_back(std::move(row));
  }
  return rows;
}

std::string markdown(const std::vector<Row>& rows) {
  std::string text =
      "# The bath types and their demonstration tanks\n\n"
      "Written by the target `bath_table`; do not edit. Each row is what `bathwright tank FILE --json` says of the tank "
      "at its aims: what the pH comes to against the window of the trade, log10 of the activity of what the bath type "
      "names first, the solid nearest to forming (log10 of K over the ion product, below zero is supersaturated) at the "
      "working and the idle temperature. \"valid\" is the engine's own word on its answer; \"doubts\" counts its "
      "warnings, \"missing\" the interactions among them that nobody published.\n\n"
      "| bath type | tank | degC | pH | usual pH | I mol/kg | key free species | tightest at work | tightest at rest | "
      "kg/L | model | valid | doubts | missing |\n"
      "|---|---|---|---|---|---|---|---|---|---|---|---|---|---|\n";
  for (const Row& row : rows) {
    if (!row.tank.contains("pH")) {
      text += fmt::format("| | {} | failed: {} |\n", row.file, row.message);
      continue;
    }
    const json& t = row.tank;
    text += fmt::format("| {} | {} | {} | {} | {} | {} | {} | {} | {} | {} | {} | {} | {} | {} |\n",
                        t.at("bath_type").get<std::string>(), row.file,
                        figure(number(t.at("temperature_C")), "{:g}"), figure(number(t.at("pH"))),
                        range(window(row.type, "pH")), figure(number(t.at("ionic_strength"))),
                        key_species(row), tightest(t, "working_log10"), tightest(t, "idle_log10"),
                        figure(number(t.at("density_kg_per_L")), "{:.3f}"), t.at("model").get<std::string>(),
                        t.at("valid").get<bool>() ? "yes" : "no", t.at("warnings").size(),
                        t.at("missing_interactions").size());
  }
  return text;
}

}  // namespace bath_table
