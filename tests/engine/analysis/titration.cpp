#include <bathwright/analysis/titration.hpp>
#include <bathwright/matter/formula.hpp>
#include <catch2/catch.hpp>
#include <cmath>
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

Titrated worked(const Titration& t) {
  const Method* known = method(t.method);
  REQUIRE(known);
  const auto result = work_out(t, *known, molar_mass(known->analyte));
  INFO((result ? std::string() : text(result.problems())));
  REQUIRE(result);
  return *result;
}

Problem refusal(const Titration& t) {
  const Method* known = method(t.method);
  const auto result = work_out(t, *known, molar_mass(known->analyte));
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
    const double M = molar_mass(method(row.method)->analyte).v;
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
