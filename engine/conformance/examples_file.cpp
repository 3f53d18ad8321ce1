#include "examples_file.hpp"

#include <algorithm>
#include <array>
#include <bathwright/base/nearest.hpp>
#include <bathwright/toml_schema/schema.hpp>
#include <bathwright/units/read.hpp>

namespace bathwright::conformance {
namespace {

using namespace toml_schema;

struct FigureRow {
  Figure figure;
  std::string_view name, unit;
  bool of_the_bath;  ///< the whole bath: no `of`
};

constexpr std::array<FigureRow, 10> figures = {{
    {Figure::pH, "pH", "", true},
    {Figure::ionic_strength, "ionic strength", "mol/kg", true},
    {Figure::density, "density", "kg/L", true},
    {Figure::level, "level", "g/L", false},
    {Figure::molality, "molality", "mol/kg", false},
    {Figure::log10_activity, "log10 activity", "", false},
    {Figure::indicator, "indicator", "", false},
    {Figure::headroom, "headroom", "", false},
    {Figure::idle_headroom, "idle headroom", "", false},
    {Figure::deposit, "deposit", "g/Ah", false},
}};

const FigureRow& row_of(Figure figure) { return *std::ranges::find(figures, figure, &FigureRow::figure); }

constexpr Range possible_pH{-2, 16};         // strong acid pickles to hot caustic
constexpr Range possible_level{0, 2000};     // g/L; the heaviest liquors of the trade stay below
constexpr Range possible_figure{-1e6, 1e6};  // wide enough for any figure in any of its units
constexpr Range possible_tolerance{0, 1e3};  // in the unit of the figure

/// The figure a key names; its row even where it is misspelt, so that reading can go on.
const FigureRow& read_figure(Table& entry) {
  const std::string written = entry.text({"figure", required, R"("level")"});
  std::vector<std::string> names;
  for (const FigureRow& row : figures) {
    if (written == row.name) return row;
    names.emplace_back(row.name);
  }
  if (!written.empty()) {
    std::string expected;
    for (const std::string& one : names) expected += (expected.empty() ? "one of " : ", ") + one;
    const auto meant = nearest(written, names);
    entry.report("figure", '"' + printable(written) + "\" is no figure", expected,
                 meant ? "Did you mean " + *meant + '?' : "");
  }
  return figures.front();
}

Expectation read_expectation(Table& entry) {
  Expectation expectation;
  expectation.where = entry.where("figure");
  const FigureRow& row = read_figure(entry);
  expectation.figure = row.figure;
  const bool one_thing = entry.has("figure") && !row.of_the_bath;
  expectation.of = entry.text({"of", one_thing ? required : optional, R"("Ni^2+")"});
  if (row.of_the_bath && !expectation.of.empty())
    entry.report("of", "stands beside a figure that is of the whole bath", "nothing", "Remove it.");
  expectation.value = entry.number({"value", optional, "74.9"}, possible_figure);
  expectation.tolerance = entry.number({"tolerance", optional, "0.1"}, possible_tolerance);
  expectation.above = entry.number({"above", optional, "0"}, possible_figure);
  expectation.below = entry.number({"below", optional, "0"}, possible_figure);
  expectation.from = entry.text({"from", required, R"("280 x 58.69/262.84 + 50 x 58.69/237.68")"});
  const bool has_value = entry.has("value"), has_tolerance = entry.has("tolerance"),
             has_limit = entry.has("above") || entry.has("below");
  if (has_value != has_tolerance || has_value == has_limit)
    entry.report("figure", "says nothing that can be compared", "value and tolerance, or above, or below",
                 "Give one of them.");
  return expectation;
}

Example read_example(Table& entry) {
  Example example;
  example.where = entry.where("name");
  example.name = entry.text({"name", required, R"("in the middle of the windows")"});
  const auto temperature = entry.quantity({"temperature", required, R"("55 degC")"}, units::read_temperature);
  example.temperature = temperature.value_or(units::Celsius{});
  example.idle_temperature =
      entry.quantity({"idle_temperature", optional, R"("18 degC")"}, units::read_temperature)
          .value_or(example.temperature);
  example.volume =
      entry.positive({"volume", required, R"("1 L")"}, units::read_volume).value_or(units::Litres{});
  example.pH = entry.number({"pH", optional, "4.2"}, possible_pH);
  if (auto levels = entry.table({"g_per_L", required, R"({ "NiSO4.6H2O" = 280 })"}))
    for (const std::string& key : levels->names())
      if (const auto level = levels->number({key, required, "280"}, possible_level))
        example.g_per_L.emplace(key, *level);
  for (Table& expected : entry.tables({"expect", required, "[[example.expect]]"}))
    example.expected.push_back(read_expectation(expected));
  return example;
}

}  // namespace

std::string_view name(Figure figure) { return row_of(figure).name; }
std::string_view unit(Figure figure) { return row_of(figure).unit; }

Result<std::vector<Example>> read_examples_text(std::string_view name, std::string_view text) {
  auto tree = parse_toml(name, text);
  if (!tree) return tree.problems();
  Document file(name, *std::move(tree));
  Table root = file.root();
  std::vector<Example> examples;
  for (Table& entry : root.tables({"example", required, "[[example]]"}))
    examples.push_back(read_example(entry));
  return file.conclude(std::move(examples));
}

Result<std::vector<Example>> read_examples(const std::string& path) {
  const auto text = read_text_file(path);
  if (!text) return text.problems();
  return read_examples_text(path, *text);
}

}  // namespace bathwright::conformance
