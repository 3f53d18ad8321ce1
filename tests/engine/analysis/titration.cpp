#include <bathwright/analysis/titration.hpp>
#include <bathwright/data/csv.hpp>
#include <bathwright/matter/formula.hpp>
#include <catch2/catch.hpp>
#include <cmath>
#include <fstream>
#include <iterator>
#include <random>

using namespace bathwright;
using namespace bathwright::analysis;

namespace {

units::GramsPerMole molar_mass(const std::string& formula) {
  return matter::Formula::parse(formula)->molar_mass();
}

Titration read(const std::string& method, double sample_mL, double mol_per_L, double burette_mL) {
  return {method, method, {sample_mL / 1000}, {mol_per_L}, 1, {burette_mL / 1000}, {0}, "bench.toml:4"};
}

/// Stated in the first analyte of the method, or in `stated_as`.
Titrated worked(const Titration& t, const std::string& stated_as = "") {
  const Method* known = method(t.method);
  REQUIRE(known);
  const auto result =
      work_out(t, *known, stated_as.empty() ? known->analytes[0].molar_mass() : molar_mass(stated_as));
  INFO((result ? std::string() : text(result.problems())));
  REQUIRE(result);
  return *result;
}

Problem refusal(const Titration& t) {
  const Method* known = method(t.method);
  const auto result = work_out(t, *known, known->analytes[0].molar_mass());
  REQUIRE_FALSE(result);
  INFO(text(result.problems()));
  REQUIRE(result.problems().size() == 1);
  return result.problems().front();
}

}  // namespace

TEST_CASE("worked titrations", "[reference]") {
  // tests/reference/worked_examples.csv, with its tolerances
  struct Row {
    const char *id, *method;
    double sample_mL, mol_per_L, burette_mL, g_per_L, tolerance;
  };
  const Row rows[] = {
      {"WE-01", "edta-nickel", 2, 0.0985, 25.8, 74.5788, 0.037},
      {"WE-01 per mL", "edta-nickel", 2, 0.0985, 1, 2.89065, 0.0014},
      {"WE-02", "mannitol-boric-acid", 5, 0.1, 32.6, 40.3138, 0.04},
      {"WE-02 per mL", "mannitol-boric-acid", 5, 0.1, 1, 1.23662, 0.0025},
      {"WE-04", "mohr-chloride", 2, 0.1, 9.15, 16.2184, 0.0081},
      {"WE-04 as salt", "mohr-nickel-chloride", 2, 0.1, 9.15, 54.3701, 0.027},
  };
  for (const Row& row : rows) {
    INFO(row.id);
    const double got = worked(read(row.method, row.sample_mL, row.mol_per_L, row.burette_mL)).value.v;
    CHECK(got == Approx(row.g_per_L).margin(row.tolerance).epsilon(0));
  }
}

TEST_CASE("the result per mL of every method", "[reference]") {
  // tests/reference/titration_factors.csv: 10 mL of titrant, or of reagent used up, or between two end
  // points.
  std::ifstream file(PROJECT_DIR "/tests/reference/titration_factors.csv");
  const std::string content{std::istreambuf_iterator<char>(file), {}};
  constexpr std::string_view numeric[] = {"bath_mL", "titrant_mol_per_L", "g_per_L_per_mL", "tolerance"};
  const auto table = data::CsvTable::read("titration_factors.csv", content, numeric);
  REQUIRE(table);
  CHECK(table->size() == 61);
  for (std::size_t i = 0; i < table->size(); ++i) {
    const auto row = (*table)[i];
    INFO(row.where());
    const Method* m = method(row["method"]);
    REQUIRE(m);
    const double mol_per_L = row.number("titrant_mol_per_L");
    Titration t = read(m->id, row.number("bath_mL"), mol_per_L, 10);
    if (t.sample.v < 1e-3) {  // 10 mL to 500 mL, 10 mL of it
      t.sample = {10e-3};
      t.diluted_to = {10e-3 * 10e-3 / (row.number("bath_mL") / 1000)};
      t.aliquot = {10e-3};
    }
    if (m->kind == Kind::difference) {
      t.burette = {20e-3};
      t.second_burette = {10e-3};
      if (m->times_second > 1) t.second_burette = {15e-3};  // 2 * 15 - 20 = 10
    }
    if (m->kind == Kind::back) {
      t.excess = {20e-3};
      t.excess_strength = {mol_per_L};
      t.titrant = {mol_per_L / m->reagent_per_back};  // 10 mL of it find 10 mL of the 20
    }
    // One point is 0.01 mol/L of protons.
    const bool points = row["stated_as"] == "points";
    const double got = worked(t, points ? "H^+" : std::string(row["stated_as"])).value.v / 10;
    CHECK((points ? got / molar_mass("H^+").v / 0.01 : got) ==
          Approx(row.number("g_per_L_per_mL")).margin(row.number("tolerance")).epsilon(0));
  }
}

TEST_CASE("published shortcuts of the bench", "[reference]") {
  // Trade press: 5 mL of pickle with 1.02 mol/L NaOH, 10.0 g/L H2SO4 per mL; anodising bath, 5 mL with 1
  // mol/L NaOH, 9.807 g/L H2SO4 and 1.797 g/L Al per mL (the latter with an older molar mass: 1.799).
  CHECK(worked(read("alkali-sulfuric-acid", 5, 1.02, 10)).value.v / 10 ==
        Approx(10.0).margin(0.05).epsilon(0));
  CHECK(worked(read("fluoride-sulfuric-acid", 5, 1, 10)).value.v / 10 ==
        Approx(9.807).margin(5e-4).epsilon(0));
  Titration aluminium = read("difference-aluminium", 5, 1, 20);
  aluminium.second_burette = {10e-3};
  CHECK(worked(aluminium).value.v / 10 == Approx(1.797).margin(0.0025).epsilon(0));
}

TEST_CASE("a back titration: reagent added less what is found of it", "[unit]") {
  // Hand calculation: 50.00 mL of 0.05 mol/L iodine, 2.5 mmol; 20.50 mL of 0.1 mol/L thiosulfate find 1.025
  // mmol of it; 1.475 mmol used by 5 mL: 0.295 mol/L of NaH2PO2.H2O, 105.993 g/mol: 31.268 g/L.
  Titration t = read("iodine-hypophosphite", 5, 0.1, 20.5);
  t.excess = {50e-3};
  t.excess_strength = {0.05};
  const Titrated result = worked(t);
  CHECK(result.value.v == Approx(31.268).margin(0.002).epsilon(0));
  CHECK(result.how ==
        "50.00 mL of 0.05000 mol/L iodine less 20.50 mL of 0.1000 mol/L sodium thiosulfate on 5.000 mL");
  // In mL of iodine: reading 20.5 mL of thiosulfate counts as itself, u^2 = (0.05/sqrt 6)^2 + (0.03/sqrt 6)^2
  // + 0.03^2, = 0.038297^2; over 29.5 mL 1.2982e-3. Strengths 0.003 hypot(50, 20.5)/29.5 = 5.4954e-3.
  CHECK(result.budget.reading_rel == Approx(1.2982e-3).epsilon(0.001));
  CHECK(result.budget.titrant_rel == Approx(5.4954e-3).epsilon(0.001));
}

TEST_CASE("a difference of two titrations carries both errors", "[unit]") {
  // Hand calculation: (46 - 37) mL * 1 mol/L / 3 / 10 mL * 26.982 g/mol = 8.0945 g/L. Both readings with a 50
  // mL burette: u_V = hypot(0.05/sqrt 6, 0.05) = 0.054006 mL, the difference sqrt 2 of it: 0.076376, over 9
  // mL 8.486e-3. Two 10 mL pipettings: 8.165e-4 * hypot(46, 37)/9 = 5.3557e-3.
  Titration t = read("difference-aluminium", 10, 1, 46);
  t.second_burette = {37e-3};
  const Titrated result = worked(t);
  CHECK(result.value.v == Approx(8.0945).margin(0.0005).epsilon(0));
  CHECK(result.budget.reading_mL == Approx(0.076376).epsilon(0.001));
  CHECK(result.budget.sample_rel == Approx(5.3557e-3).epsilon(0.001));
  CHECK(result.how == "46.00 mL and 37.00 mL of 1.000 mol/L NaOH on 10.00 mL");
  // One flask with two end points: the pipetting is shared.
  t.method = "two-indicator-aluminium";
  CHECK(worked(t).budget.sample_rel == Approx(8.165e-4).epsilon(0.001));
}

TEST_CASE("a diluted sample is titrated in an aliquot", "[unit]") {
  // Hand calculation: 10 mL to 500 mL, 10 mL of it hold 0.2 mL of bath: 15 mL * 0.1 / 3 / 0.2 * 99.993 =
  // 249.98. Glass: hypot(0.020/10, 0.25/500, 0.020/10)/sqrt 6 = 1.1726e-3.
  Titration t = read("ferrous-chromic-acid", 10, 0.1, 15);
  t.diluted_to = {0.5};
  t.aliquot = {10e-3};
  const Titrated result = worked(t);
  CHECK(result.value.v == Approx(249.9825).margin(0.01).epsilon(0));
  CHECK(result.budget.sample_rel == Approx(1.1726e-3).epsilon(0.001));
  CHECK(result.how ==
        "15.00 mL of 0.1000 mol/L ammonium iron(II) sulfate on 10.00 mL of 10.00 mL diluted to 500.0 mL");
}

TEST_CASE("a precipitate on the balance", "[unit]") {
  // Hand calculation: 0.4512 g of BaSO4 (233.383 g/mol) from 10 mL: 0.41158 * 0.4512 * 100 = 18.5705 g/L of
  // SO4
  Titration t = read("gravimetric-sulfate", 10, 0, 0);
  t.weighed = {0.4512e-3};
  const Titrated result = worked(t);
  CHECK(result.value.v == Approx(18.5705).margin(0.001).epsilon(0));
  CHECK(result.how == "0.4512 g of BaSO4 on 10.00 mL");
  CHECK(result.budget.reading_rel == Approx(0.0002 / 0.4512).epsilon(1e-9));
  CHECK(result.budget.method_rel == 0.01);
}

TEST_CASE("first order and Monte Carlo agree for every kind of titration", "[property]") {
  // 20000 draws: the standard deviation itself is uncertain by 0.5 %.
  std::vector<Titration> all;
  all.push_back(read("edta-nickel", 2, 0.1012, 23.8));
  all.back().blank = {0.2e-3};
  all.push_back(read("iodine-hypophosphite", 5, 0.1, 20.5));
  all.back().excess = {50e-3};
  all.back().excess_strength = {0.05};
  all.push_back(read("difference-aluminium", 10, 1, 46));
  all.back().second_burette = {37e-3};
  all.push_back(read("two-indicator-aluminium", 10, 1, 46));
  all.back().second_burette = {37e-3};
  all.push_back(read("two-end-points-sulfuric-acid", 1, 1, 20));
  all.back().second_burette = {15e-3};
  all.back().blank = {0.3e-3};
  all.push_back(read("ferrous-chromium-iii", 10, 0.1, 15.9));
  all.back().second_burette = {15e-3};
  all.back().diluted_to = {0.5};
  all.back().aliquot = {10e-3};
  all.push_back(read("gravimetric-sulfate", 10, 0, 0));
  all.back().weighed = {0.45e-3};
  for (const Titration& t : all) {
    INFO(t.method);
    const Titrated first_order = worked(t);
    const Method& m = *method(t.method);
    CHECK(first_order.value.v * first_order.budget.relative() ==
          Approx(monte_carlo_uncertainty(t, m, m.analytes[0].molar_mass())).epsilon(0.02));
  }
}

TEST_CASE("where the sample is the weak link the uncertainty is drawn, not linearised", "[unit]") {
  // 0.2 mL from a 1 mL pipette: 0.008/sqrt 6/0.2 = 1.6 %
  const Titration t = read("edta-nickel", 0.2, 0.1, 5);
  const Titrated result = worked(t);
  const double straight = result.value.v * result.budget.relative();
  CHECK(result.standard_uncertainty.v ==
        monte_carlo_uncertainty(t, *method("edta-nickel"), molar_mass("Ni")));
  CHECK(result.standard_uncertainty.v == Approx(straight).epsilon(0.03));
}

TEST_CASE("figures a method does not use, or misses, are refused", "[failure]") {
  struct Row {
    const char *method, *what, *mend;
    void (*change)(Titration&);
  };
  const Row rows[] = {
      {"edta-nickel", "edta-nickel does not use a second burette reading", "Leave it out",
       [](Titration& t) { t.second_burette = {3e-3}; }},
      {"edta-nickel", "aliquot is 0 mL", "Enter the aliquot", [](Titration& t) { t.diluted_to = {0.5}; }},
      {"edta-nickel", "flask the sample was made up in is 3000 mL", "Check the unit",
       [](Titration& t) { t.diluted_to = {3}, t.aliquot = {10e-3}; }},
      {"edta-nickel", "do not fit a flask", "which figure is which",
       [](Titration& t) { t.diluted_to = {1e-3}, t.aliquot = {1e-3}; }},
      {"difference-aluminium", "second burette reading is 0 mL", "Enter the second", [](Titration&) {}},
      {"difference-aluminium", "23.80 mL and 24.00 mL leave less than nothing of it",
       "less than the method can tell", [](Titration& t) { t.second_burette = {24e-3}; }},
      {"difference-aluminium", "23.80 mL and 23.80 mL leave nothing of it", "which figure is which",
       [](Titration& t) { t.second_burette = t.burette; }},
      {"electrode-fluoride", "has no burette", "under [[found]]", [](Titration&) {}},
  };
  for (const Row& row : rows) {
    INFO(row.what);
    Titration t = read(row.method, 2, 0.1, 23.8);
    row.change(t);
    const Problem problem = refusal(t);
    INFO(problem.text());
    CHECK(problem.what.find(row.what) != std::string::npos);
    CHECK(problem.try_this.find(row.mend) != std::string::npos);
  }
}

TEST_CASE("factor and blank enter the concentration", "[unit]") {
  // Hand calculation: (23.8 - 0.3) mL * 0.1 mol/L * 1.012 * 58.693 g/mol / 2 mL = 69.7917 g/L
  Titration t = read("edta-nickel", 2, 0.1, 23.8);
  t.factor = 1.012;
  t.blank = {0.3e-3};
  const Titrated result = worked(t);
  CHECK(result.value.v == Approx(69.7917).margin(0.001).epsilon(0));
  CHECK(result.how == "23.80 mL of 0.1000 mol/L EDTA (factor 1.012) on 2.000 mL, blank 0.3000 mL");
}

TEST_CASE("uncertainty of a nickel titration, term by term", "[reference]") {
  // Hand calculation: 25 mL burette and 2 mL pipette of class A (ISO 385, ISO 648), ordinary end point.
  // u_V = sqrt((0.03/sqrt 6)^2 + 0.05^2) = 0.0514782 mL
  // sqrt((0.0514782/23.8)^2 + (0.010/sqrt 6/2.0)^2 + 0.003^2 + 0.005^2) = 0.00654561;  2 * that * 70.6828 =
  // 0.925324
  const Titrated nickel = worked(read("edta-nickel", 2, 0.1012, 23.8));
  CHECK(nickel.budget.reading_mL == Approx(0.0514782).epsilon(0.001));
  CHECK(nickel.budget.reading_rel == Approx(0.0514782 / 23.8).epsilon(0.001));
  CHECK(nickel.budget.sample_rel == Approx(0.010 / std::sqrt(6) / 2.0).epsilon(0.001));
  CHECK(nickel.budget.titrant_rel == 0.003);
  CHECK(nickel.budget.sampling_rel == 0.005);
  CHECK(nickel.budget.relative() == Approx(0.00654561).epsilon(0.001));
  CHECK(2 * nickel.standard_uncertainty.v == Approx(0.925324).epsilon(0.002));
}

TEST_CASE("the smallest glass that holds the volume sets the tolerance", "[unit]") {
  struct Row {
    double burette_mL, burette_tolerance, sample_mL, pipette_tolerance;
  };
  // ISO 385 and ISO 648 class A; at the very mark and just above it
  const Row rows[] = {{8.1, 0.02, 1, 0.008}, {10, 0.02, 2, 0.010},    {10.01, 0.03, 2.1, 0.015},
                      {25, 0.03, 10, 0.020}, {25.1, 0.05, 25, 0.030}, {50, 0.05, 50, 0.050}};
  for (const Row& row : rows) {
    CAPTURE(row.burette_mL, row.sample_mL);
    const UncertaintyBudget budget = worked(read("edta-nickel", row.sample_mL, 0.1, row.burette_mL)).budget;
    CHECK(budget.reading_mL == Approx(std::hypot(row.burette_tolerance / std::sqrt(6), 0.05)).epsilon(1e-9));
    CHECK(budget.sample_rel == Approx(row.pipette_tolerance / std::sqrt(6) / row.sample_mL).epsilon(1e-9));
  }
}

TEST_CASE("a blank is a second reading with its own error", "[unit]") {
  Titration t = read("mohr-chloride", 2, 0.1, 8.1);
  const double without = worked(t).budget.reading_mL;
  t.blank = {0.1e-3};
  CHECK(worked(t).budget.reading_mL == Approx(std::sqrt(2) * without).epsilon(1e-12));
}

TEST_CASE("first-order propagation agrees with Monte Carlo", "[property]") {
  // Source of the check: JCGM 101:2008, propagation of distributions. 20000 samples: 0.5 % sampling error.
  constexpr unsigned seed = 20260302;
  INFO("seed " << seed);
  std::mt19937_64 random(seed);
  std::normal_distribution<double> normal;
  std::uniform_real_distribution<double> uniform(-0.5, 0.5);
  const auto triangular = [&](double half_width) { return half_width * (uniform(random) + uniform(random)); };
  struct Row {
    const char* method;
    double sample_mL, mol_per_L, burette_mL, burette_tolerance, pipette_tolerance, u_end_point_mL;
  };
  const Row rows[] = {{"edta-nickel", 2, 0.1012, 23.8, 0.03, 0.010, 0.05},
                      {"mohr-chloride", 2, 0.0998, 8.1, 0.02, 0.010, 0.05},
                      {"mannitol-boric-acid", 1, 0.1005, 3.0, 0.02, 0.008, 0.10}};
  for (const Row& row : rows) {
    INFO(row.method);
    const Titrated first_order = worked(read(row.method, row.sample_mL, row.mol_per_L, row.burette_mL));
    const double M = method(row.method)->analytes[0].molar_mass().v;
    constexpr int samples = 20000;
    double sum = 0, sum_of_squares = 0;
    for (int i = 0; i < samples; ++i) {
      const double volume =
          row.burette_mL + triangular(row.burette_tolerance) + row.u_end_point_mL * normal(random);
      const double sample = row.sample_mL + triangular(row.pipette_tolerance);
      const double strength = row.mol_per_L * (1 + 0.003 * normal(random));
      const double c = volume * strength * M / sample * (1 + 0.005 * normal(random));
      sum += c;
      sum_of_squares += c * c;
    }
    const double mean = sum / samples;
    const double deviation = std::sqrt(sum_of_squares / samples - mean * mean);
    CHECK(first_order.value.v == Approx(mean).epsilon(0.001));
    CHECK(first_order.standard_uncertainty.v == Approx(deviation).epsilon(0.03));
  }
}

TEST_CASE("a reading that cannot be is refused with the place and the mend", "[failure]") {
  struct Row {
    const char* what;
    void (*spoil)(Titration&);
    const char* mend;
  };
  const Row rows[] = {
      {"sample is 0 mL", [](Titration& t) { t.sample = {0}; }, "Enter the sample"},
      {"titrant is", [](Titration& t) { t.titrant = {-0.1}; }, "Enter the titrant"},
      {"factor of the titrant is nan", [](Titration& t) { t.factor = std::nan(""); }, "Enter the factor"},
      {"burette reading is 0 mL", [](Titration& t) { t.burette = {0}; }, "Enter the burette reading"},
      {"blank is -", [](Titration& t) { t.blank = {-1e-3}; }, "leave it out"},
      {"the blank, 23.80 mL, is not below the reading", [](Titration& t) { t.blank = {23.8e-3}; },
       "Check which"},
      {"burette reading is 51.00 mL", [](Titration& t) { t.burette = {51e-3}; }, "a smaller sample"},
      {"sample is 100.0 mL", [](Titration& t) { t.sample = {0.1}; }, "not the water"},
  };
  for (const Row& row : rows) {
    INFO(row.what);
    Titration t = read("edta-nickel", 2, 0.1012, 23.8);
    row.spoil(t);
    const Problem problem = refusal(t);
    INFO(problem.text());
    CHECK(problem.where == "bench.toml:4");
    CHECK(problem.what.find(row.what) != std::string::npos);
    CHECK_FALSE(problem.expected.empty());
    CHECK(problem.try_this.find(row.mend) != std::string::npos);
  }
}

TEST_CASE("a titration from a file names the key at fault, and shows its figures as written", "[unit]") {
  Titration t = read("edta-nickel", 2, 0.1012, 238);
  t.written["burette"] = {"238 mL", "bench.toml:12: titration.burette"};
  CHECK(refusal(t).where == "bench.toml:12: titration.burette");
  t.burette = {23.8e-3};
  t.written["burette"].text = "23.8 mL";
  t.written["sample"].text = "2.00 mL";
  CHECK(worked(t).how == "23.8 mL of 0.1012 mol/L EDTA on 2.00 mL");
}

TEST_CASE("every fault of one titration is named at once", "[failure]") {
  Titration t = read("edta-nickel", 0, 0, 0);
  const auto result = work_out(t, *method("edta-nickel"), molar_mass("Ni^2+"));
  REQUIRE_FALSE(result);
  CHECK(result.problems().size() == 3);
}
