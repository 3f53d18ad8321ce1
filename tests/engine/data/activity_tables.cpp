// What must hold for every row of engine/data/activity, whoever adds it.
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

CsvTable pitzer_binary() {
  return built_in_table("activity/pitzer_binary.csv",
                        {"t_C", "beta0", "beta1", "beta2", "cphi", "alpha1", "alpha2", "dbeta0_dT",
                         "dbeta1_dT", "dbeta2_dT", "dcphi_dT", "max_molality"});
}

CsvTable pitzer_mixing() {
  return built_in_table("activity/pitzer_mixing.csv", {"t_C", "value", "dvalue_dT"});
}

void check_set_and_quality(const CsvRow& row) {
  check_word(row, "set",
             {"main", "estimates", "A", "B", "sulfate T", "chloride T", "zinc chloride", "zincate", "warm"});
  check_word(row, "quality",
             {"published", "published, from memory", "regressed", "regressed, transferred", "analogy, tested",
              "analogy, weakly tested", "analogy", "imposed", "estimate", "estimate, crude"});
  const bool published_set = row["set"] == "main" || row["set"] == "warm";
  CHECK(published_set == row["quality"].starts_with("published"));
}

std::string joined(std::initializer_list<std::string_view> parts) {
  std::string all;
  for (const std::string_view part : parts) all.append(part).append(" | ");
  return all;
}

std::string unordered(std::string_view a, std::string_view b) {
  return a < b ? joined({a, b}) : joined({b, a});
}

}  // namespace

TEST_CASE("Pitzer pairs: a cation, an anion, and numbers of a possible size", "[unit]") {
  each(pitzer_binary(), [](const CsvRow& row) {
    check_set_and_quality(row);
    check_filled(row, {"cation", "anion", "t_C", "beta0", "beta1", "beta2", "cphi", "alpha1"});
    CHECK(charge(row["cation"]) > 0);
    CHECK(charge(row["anion"]) < 0);
    check_range(row, "t_C", 0, 100);
    check_range(row, "beta0", -1, 1.5);
    check_range(row, "beta1", -1, 25);
    check_range(row, "beta2", -5000, 0);
    check_range(row, "cphi", -0.2, 0.1);
    check_range(row, "dbeta0_dT", -0.006, 0.006);
    check_range(row, "dbeta1_dT", -0.06, 0.06);
    check_range(row, "dbeta2_dT", -0.6, 0.6);
    check_range(row, "dcphi_dT", -0.001, 0.001);
    check_range(row, "max_molality", 0.001, 20);
    if (!row["range_of"].empty()) {
      check_word(row, "range_of", {"ligand", "acid", "alkali"});
      check_filled(row, {"max_molality"});
    }
  });
}

TEST_CASE("Pitzer pairs: beta2 and alpha2 come together", "[unit]") {
  each(pitzer_binary(),
       [](const CsvRow& row) { CHECK((row.number("beta2") != 0) == !row["alpha2"].empty()); });
}

// Pitzer & Mayorga, J. Solution Chem. 3 (1974) 539: 2-2 electrolytes have alpha1 = 1.4, alpha2 = 12.
TEST_CASE("Pitzer pairs: every 2-2 pair uses the exponents of its convention", "[unit]") {
  each(pitzer_binary(), [](const CsvRow& row) {
    if (charge(row["cation"]) != 2 || charge(row["anion"]) != -2) return;
    CHECK(row.number("alpha1") == 1.4);
    CHECK(row.number("alpha2") == 12);
  });
}

TEST_CASE("Pitzer pairs: no set has two rows for the same pair and temperature", "[unit]") {
  check_unique(pitzer_binary(), [](const CsvRow& row) {
    return joined({row["set"], row["cation"], row["anion"], row["t_C"]});
  });
}

TEST_CASE("Pitzer pairs tabulated against temperature stand in rising order and have no slopes", "[unit]") {
  const CsvTable table = pitzer_binary();
  for (std::size_t i = 1; i < table.size(); ++i) {
    const CsvRow before = table[i - 1], row = table[i];
    const auto pair = [](const CsvRow& r) { return joined({r["set"], r["cation"], r["anion"]}); };
    if (pair(before) != pair(row)) continue;
    INFO(row.where());
    CHECK(before.number("t_C") < row.number("t_C"));
    for (const std::string_view slope : {"dbeta0_dT", "dbeta1_dT", "dbeta2_dT", "dcphi_dT"}) {
      CHECK(before[slope].empty());
      CHECK(row[slope].empty());
    }
  }
}

TEST_CASE("Pitzer mixing: every kind joins species of the charges it is defined for", "[unit]") {
  each(pitzer_mixing(), [](const CsvRow& row) {
    check_set_and_quality(row);
    check_word(row, "kind", {"theta", "psi", "lambda", "zeta", "mu"});
    check_filled(row, {"i", "j", "t_C", "value"});
    check_range(row, "t_C", 0, 100);
    check_range(row, "value", -0.6, 0.3);
    check_range(row, "dvalue_dT", -0.001, 0.001);
    const std::string_view kind = row["kind"];
    const int i = charge(row["i"]), j = charge(row["j"]), k = charge(row["k"]);
    if (kind == "theta") CHECK((i * j > 0 && row["i"] != row["j"] && row["k"].empty()));
    if (kind == "psi") CHECK((i * j > 0 && row["i"] != row["j"] && i * k < 0));
    if (kind == "lambda") CHECK((i == 0 && row["k"].empty()));
    if (kind == "mu") CHECK((i == 0 && row["i"] == row["j"] && row["j"] == row["k"]));
    if (kind == "zeta") CHECK((i == 0 && j > 0 && k < 0));
  });
}

TEST_CASE("Pitzer mixing: no set has two rows for the same species and temperature", "[unit]") {
  check_unique(pitzer_mixing(), [](const CsvRow& row) {
    return joined({row["set"], row["kind"], unordered(row["i"], row["j"]), row["k"], row["t_C"]});
  });
}

TEST_CASE("SIT coefficients join a cation and an anion once, with numbers of a possible size", "[unit]") {
  const CsvTable sit = built_in_table("activity/sit.csv", {"epsilon", "uncertainty", "epsilon1", "epsilon2"});
  each(sit, [](const CsvRow& row) {
    CHECK(charge(row["cation"]) > 0);
    CHECK(charge(row["anion"]) < 0);
    check_filled(row, {"epsilon"});
    check_range(row, "epsilon", -0.5, 1.2);
    check_range(row, "uncertainty", 0.001, 0.3);
    CHECK(row["epsilon1"].empty() == row["epsilon2"].empty());
  });
  check_unique(sit, [](const CsvRow& row) { return joined({row["cation"], row["anion"]}); });
}

TEST_CASE("ion sizes are those of ions, in picometre, once for each form of the equation", "[unit]") {
  const CsvTable sizes = built_in_table("activity/ion_size.csv", {"size_pm", "b_dot"});
  each(sizes, [](const CsvRow& row) {
    CHECK(charge(row["ion"]) != 0);
    check_filled(row, {"size_pm"});
    check_range(row, "size_pm", 250, 1100);
    check_range(row, "b_dot", -0.1, 0.3);
  });
  check_unique(sizes, [](const CsvRow& row) {
    return joined({row["ion"], row["b_dot"].empty() ? "alone" : "with linear term"});
  });
}

TEST_CASE("the series for J(x) is complete and has died out at its end", "[unit]") {
  const CsvTable j = built_in_table("activity/j_function.csv", {"k", "a_small", "a_large"});
  REQUIRE(j.size() == 21);
  for (std::size_t k = 0; k < j.size(); ++k) CHECK(j[k].number("k") == static_cast<double>(k));
  CHECK(std::abs(j[20].number("a_small")) < 1e-8);
  CHECK(std::abs(j[20].number("a_large")) < 1e-8);
}
