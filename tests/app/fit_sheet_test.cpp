// The row that a fit proposes for the tables: in the right table, in its columns, with where it comes from.
#include <bathwright/data/csv.hpp>
#include <bathwright/data/tables.hpp>
#include <bathwright/sheets/fit_sheet.hpp>
#include <catch2/catch.hpp>

using namespace bathwright;
using activity::InteractionParameter;

namespace {

regression::Found found(InteractionParameter parameter, std::vector<std::string> solutes, double value) {
  regression::Found one;
  one.unknown.what.emplace<activity::Interaction>(
      activity::Interaction{parameter, std::move(solutes), 0, "", ""});
  one.value = value;
  one.standard_error = 0.01;
  return one;
}

/// The columns of the row proposed for the first number.
std::map<std::string, std::string> row(const std::string& path, const std::vector<regression::Found>& all) {
  regression::Task task;
  task.source = "week 40, lab 2";
  regression::Fit fit;
  fit.found = all;
  const std::string line = sheets::table_row(task, fit, all.front().unknown);
  REQUIRE(line.starts_with(path + ": "));
  std::string columns;
  const data::CsvTable built_in = data::built_in_table(path, {});
  for (const std::string& column : built_in.columns()) columns += (columns.empty() ? "" : ",") + column;
  const auto table = data::CsvTable::read("row", columns + '\n' + line.substr(path.size() + 2) + '\n');
  REQUIRE(table);
  REQUIRE(table->size() == 1);
  std::map<std::string, std::string> fields;
  for (const std::string& column : table->columns()) fields[column] = (*table)[0][column];
  return fields;
}

}  // namespace

TEST_CASE("what is found of a pair goes into its row, the rest of which stays", "[unit]") {
  auto pair = row("activity/pitzer_binary.csv", {found(InteractionParameter::beta0, {"Cl^-", "Na^+"}, 0.08),
                                                 found(InteractionParameter::cphi, {"Cl^-", "Na^+"}, 0.002)});
  CHECK(pair["cation"] == "Na^+");
  CHECK(pair["beta0"] == "0.08000");
  CHECK(pair["beta1"] == "0.2644");
  CHECK(pair["cphi"] == "0.00200");
  CHECK(pair["max_molality"] == "6");
  CHECK(pair["quality"] == "regressed");
  CHECK(pair["source"] == "regressed from week 40, lab 2");
  CHECK(pair["note"].find("beta0 +/- 0.01000, cphi +/- 0.01000") != std::string::npos);
}

TEST_CASE("what no table holds yet gets a new row", "[unit]") {
  auto pair = row("activity/pitzer_binary.csv", {found(InteractionParameter::beta0, {"Cl^-", "Au^+"}, 0.1)});
  CHECK(pair["cation"] == "Au^+");
  CHECK(pair["anion"] == "Cl^-");
  CHECK(pair["t_C"] == "25");
  CHECK(pair["alpha1"] == "2");
  CHECK(pair["note"].find("max_molality") != std::string::npos);
  auto mixing =
      row("activity/pitzer_mixing.csv", {found(InteractionParameter::lambda, {"H3BO3", "Au^+"}, 0.1)});
  CHECK(mixing["kind"] == "lambda");
  CHECK(mixing["i"] == "H3BO3");
  CHECK(mixing["value"] == "0.10000");
  auto sit = row("activity/sit.csv", {found(InteractionParameter::epsilon, {"SO4^2-", "Na^+"}, -0.1)});
  CHECK(sit["epsilon"] == "-0.10000");
  CHECK(sit["uncertainty"] == "0.01000");
  CHECK(sit["epsilon1"] == "");
}

TEST_CASE("what was fitted to a tank is no row of the tables", "[unit]") {
  regression::Task task;
  task.fitted_by = "Brindlewick Surface Works";
  regression::Fit fit;
  fit.found = {found(InteractionParameter::beta0, {"Na^+", "Cl^-"}, 0.08)};
  CHECK(sheets::table_row(task, fit, fit.found[0].unknown).empty());
}
