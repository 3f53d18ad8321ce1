// What must hold for every row of engine/data/equilibria, whoever adds it. Balance is checked with the
// parsers of formulae and reactions: tests/engine/speciation/data_balance.cpp.
#include "rows.hpp"

using bathwright::data::built_in_table;
using rows::charge;
using rows::check_filled;
using rows::check_range;
using rows::check_unique;
using rows::check_word;
using rows::CsvRow;
using rows::CsvTable;
using rows::each;

namespace {

CsvTable species() {
  return built_in_table("equilibria/species.csv",
                        {"charge", "log10_K", "ionic_strength", "dH_kJ_mol", "dCp_J_molK", "uncertainty"});
}

CsvTable solids() {
  return built_in_table("equilibria/solids.csv",
                        {"log10_K", "dH_kJ_mol", "dCp_J_molK", "uncertainty", "min_C", "max_C"});
}

/// Bounds that a constant typed in another unit (J for kJ, ln for log10, pK for log K by sign) tends to
/// break.
void check_constants(const CsvRow& row, double largest_log10_K, double largest_dH) {
  check_filled(row, {"reaction", "log10_K", "uncertainty"});
  check_range(row, "log10_K", -largest_log10_K, largest_log10_K);
  check_range(row, "dH_kJ_mol", -largest_dH, largest_dH);
  check_range(row, "dCp_J_molK", -400, 400);
  check_range(row, "uncertainty", 0.001, 3);
}

CsvRow only_row(const CsvTable& table, std::string_view name, std::string_view convention,
                std::string_view set) {
  for (std::size_t i = 0; i < table.size(); ++i)
    if (table[i]["species"] == name && table[i]["convention"] == convention && table[i]["set"] == set)
      return table[i];
  FAIL("no " << convention << " row of set " << set << " for " << name);
  return table[0];
}

}  // namespace

TEST_CASE("species: constants of a possible size, a known set and convention", "[unit]") {
  each(species(), [](const CsvRow& row) {
    const bool polycation = row["species"].starts_with("Al13");  // 32 protons leave: log K and dH add up
    check_constants(row, polycation ? 101 : 60, polycation ? 1200 : 400);
    check_filled(row, {"species", "charge", "ionic_strength"});
    check_range(row, "ionic_strength", 0, 5);
    check_word(row, "set", {"main", "zinc chloride", "zincate"});
    check_word(row, "convention", {"both", "association", "interaction"});
    if (row["set"] != "main") CHECK(row["convention"] == "interaction");
    CHECK(row.number("charge") == charge(row["species"]));
  });
}

TEST_CASE("species: one row for each set and convention", "[unit]") {
  check_unique(species(), [](const CsvRow& row) {
    return std::string(row["species"]) + " | " + std::string(row["set"]) + " | " +
           std::string(row["convention"]);
  });
}

TEST_CASE("species: 'both' excludes a second row of the same set", "[unit]") {
  std::map<std::string, std::string> for_both;
  const CsvTable table = species();
  each(table, [&](const CsvRow& row) {
    if (row["convention"] == "both")
      for_both.emplace(std::string(row["species"]) + " | " + std::string(row["set"]), row.where());
  });
  each(table, [&](const CsvRow& row) {
    if (row["convention"] == "both") return;
    CHECK(for_both.count(std::string(row["species"]) + " | " + std::string(row["set"])) == 0);
  });
}

// Clegg, Rard & Pitzer, J. Chem. Soc. Faraday Trans. 90 (1994) 1875, recalled: the function written out here.
TEST_CASE("hydrogensulfate for Pitzer models is the partner of the H-SO4 parameters of set warm",
          "[reference]") {
  const CsvTable table = species();
  const CsvRow row = only_row(table, "HSO4^-", "interaction", "main");
  const double T = 298.15, R = 8.314463e-3;
  const double value =
      562.69486 - 102.5154 * std::log(T) - 1.117033e-4 * T * T + 0.2477538 * T - 13273.75 / T;
  const double slope = -102.5154 / T - 2 * 1.117033e-4 * T + 0.2477538 + 13273.75 / (T * T);
  CHECK(row.number("log10_K") == Approx(-value).margin(5e-5).epsilon(0));
  CHECK(row.number("dH_kJ_mol") == Approx(-R * T * T * std::log(10.) * slope).margin(5e-3).epsilon(0));
}

// CODATA key values (Cox, Wagman & Medvedev 1989): log10 Kw = -13.995, dH = 55.815 kJ/mol at 25 C.
TEST_CASE("the ion product of water is the key value", "[reference]") {
  const CsvTable table = species();
  const CsvRow row = only_row(table, "OH^-", "both", "main");
  CHECK(row.number("log10_K") == Approx(-13.995).margin(0.001).epsilon(0));
  CHECK(row.number("dH_kJ_mol") == Approx(55.815).margin(0.02).epsilon(0));
}

TEST_CASE("solids: constants of a possible size, a sane temperature range, a known set", "[unit]") {
  each(solids(), [](const CsvRow& row) {
    check_constants(row, 70, 150);
    check_filled(row, {"solid", "formula", "min_C", "max_C"});
    check_range(row, "min_C", 0, 70);
    check_range(row, "max_C", 25, 100);
    CHECK(row.number("min_C") <= row.number("max_C"));
    check_word(row, "set", {"main", "sulfate T", "zincate"});
    check_word(row, "kinetics", {"", "slow"});
    CHECK((row["kinetics"] == "slow") == (row["note"].find("slow") != std::string_view::npos));
  });
}

TEST_CASE("solids: one row for each phase and set", "[unit]") {
  check_unique(solids(),
               [](const CsvRow& row) { return std::string(row["solid"]) + " | " + std::string(row["set"]); });
}

TEST_CASE("solids: a name begins with its formula", "[unit]") {
  each(solids(), [](const CsvRow& row) {
    const bool unknown_water = row["formula"] == "NiHPO3";  // named NiHPO3.xH2O
    CHECK(row["solid"].starts_with(row["formula"]));
    if (!unknown_water)
      CHECK((row["solid"].size() == row["formula"].size() || row["solid"][row["formula"].size()] == ' ' ||
             row["solid"][row["formula"].size()] == ','));
  });
}

TEST_CASE("gases: one row each, constants of a possible size, dissolving gives off heat", "[unit]") {
  const CsvTable gases = built_in_table("equilibria/gases.csv", {"log10_K", "dH_kJ_mol", "uncertainty"});
  each(gases, [](const CsvRow& row) {
    check_constants(row, 7, 80);
    CHECK(row.number("dH_kJ_mol") < 0);
  });
  check_unique(gases, [](const CsvRow& row) { return std::string(row["gas"]); });
}

namespace {

CsvTable temperature_functions() {
  return built_in_table("equilibria/temperature_functions.csv",
                        {"A", "B", "C", "D", "E", "F", "min_C", "max_C"});
}

double function_at(const CsvRow& row, double T) {
  const auto coefficient = [&](std::string_view column) {
    return std::isnan(row.number(column)) ? 0 : row.number(column);
  };
  return coefficient("A") + coefficient("B") * T + coefficient("C") / T + coefficient("D") * std::log10(T) +
         coefficient("E") / (T * T) + coefficient("F") * T * T;
}

/// The row of species.csv, solids.csv or gases.csv that a function is about, by table.
template <class Visit>
void row_of(const CsvRow& function, Visit visit) {
  const std::string of(function["of"]);
  int found = 0;
  const auto look = [&](const CsvTable& table, std::string_view column, const std::string& name) {
    for (std::size_t i = 0; i < table.size(); ++i) {
      const CsvRow row = table[i];
      if (row[column] != name || (row["set"].empty() ? "main" : row["set"]) != function["set"]) continue;
      if (!row["convention"].empty() && row["convention"] != function["convention"]) continue;
      visit(row);
      ++found;
    }
  };
  if (of.ends_with("(g)"))
    look(built_in_table("equilibria/gases.csv", {"log10_K", "dH_kJ_mol", "uncertainty"}), "gas",
         of.substr(0, of.size() - 3));
  else {
    look(species(), "species", of);
    look(solids(), "solid", of);
  }
  CHECK(found == 1);
}

}  // namespace

TEST_CASE("temperature functions: each belongs to one row and agrees with it at 25 degC", "[unit]") {
  each(temperature_functions(), [](const CsvRow& function) {
    check_filled(function, {"of", "reaction", "A", "min_C", "max_C", "source", "from_memory"});
    check_word(function, "convention", {"both", "association", "interaction"});
    check_word(function, "set", {"main"});
    check_range(function, "min_C", 0, 50);
    check_range(function, "max_C", 50, 100);
    row_of(function, [&](const CsvRow& row) {
      CHECK(row["reaction"] == function["reaction"]);
      const double T = 298.15, dT = 0.1, kJ = 8.314463e-3 * std::log(10.) * T * T;
      const double allowed = std::max(0.01, row.number("uncertainty"));
      CHECK(function_at(function, T) == Approx(row.number("log10_K")).margin(allowed).epsilon(0));
      // dH of the row, from other sources, is the slope of the function: a slip in a coefficient shows.
      const double dH = kJ * (function_at(function, T + dT) - function_at(function, T - dT)) / (2 * dT);
      if (!std::isnan(row.number("dH_kJ_mol")))
        CHECK(dH == Approx(row.number("dH_kJ_mol")).margin(3.5).epsilon(0));
    });
  });
}

TEST_CASE("temperature functions: one for each row, convention and set", "[unit]") {
  check_unique(temperature_functions(), [](const CsvRow& row) {
    return std::string(row["of"]) + " | " + std::string(row["convention"]) + " | " + std::string(row["set"]);
  });
}

TEST_CASE("heat capacities: possible, each once, each of something that a reaction names", "[unit]") {
  const CsvTable table =
      built_in_table("equilibria/heat_capacity.csv", {"constant_J_molK", "pole_JK_mol", "born_J_mol"});
  std::string reactions;
  for (const CsvTable& of : {species(), solids(), built_in_table("equilibria/gases.csv", {})})
    each(of, [&](const CsvRow& row) { reactions += " " + std::string(row["reaction"]) + " "; });
  each(table, [&](const CsvRow& row) {
    check_filled(row, {"substance", "constant_J_molK", "pole_JK_mol", "born_J_mol", "source", "from_memory"});
    const std::string name(row["substance"]);
    CHECK(reactions.find(" " + name + " ") != std::string::npos);
    const bool dissolved = row.number("born_J_mol") != 0;
    if (!dissolved && name != "H^+") check_range(row, "constant_J_molK", 28, 700);
    check_range(row, "pole_JK_mol", -1.2e6, 4e5);
    check_range(row, "born_J_mol", -2e5, 2e6);
    // A charged substance has a positive Born coefficient, larger for a greater charge.
    if (charge(name) != 0 && name != "H^+") CHECK(row.number("born_J_mol") > 0);
  });
  check_unique(table, [](const CsvRow& row) { return std::string(row["substance"]); });
}
