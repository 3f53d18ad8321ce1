// When an answer says that it may not be believed.
#include <bathwright/speciation/coverage.hpp>
#include <cmath>

#include "systems.hpp"

using namespace bathwright;
using namespace bathwright::speciation;
using activity::ModelKind;

namespace {

struct Judged {
  Solver solver;
  Equilibrium answer;
  Coverage coverage;
};

/// mol in 1 kg of water; neutral by H^+.
Judged judged(const Amounts& amounts, ModelKind model = ModelKind::pitzer, units::Celsius t = room) {
  Names names;
  for (const auto& [name, mol] : amounts) names.push_back(name);
  Solver solver = solver_of(names, t, model);
  Equilibrium answer = solved(solver, task_of(solver.system(), amounts));
  Coverage found = coverage(solver, answer);
  return {std::move(solver), std::move(answer), std::move(found)};
}

bool tells(const Coverage& coverage, std::string_view what) {
  for (const std::string& warning : coverage.warnings)
    if (warning.find(what) != std::string::npos) return true;
  return false;
}

}  // namespace

TEST_CASE("a solution whose interactions are published is valid and silent", "[unit]") {
  const Judged salt = judged({{"Na^+", 2}, {"Cl^-", 2}});
  CHECK(salt.coverage.valid);
  CHECK(salt.coverage.warnings.empty());
  // What is left is the accuracy of the fit itself: a fiftieth at its end, 6 mol/kg.
  CHECK(salt.coverage.u_ln_gamma > 0);
  CHECK(salt.coverage.u_ln_gamma < 0.01);
}

TEST_CASE("a published fit is the less certain the nearer its end", "[property]") {
  const auto u = [](double m) { return judged({{"Na^+", m}, {"Cl^-", m}}).coverage.u_ln_gamma; };
  CHECK(u(4) == Approx(2 * u(2)).epsilon(1e-6));
}

TEST_CASE("a fit without a published range is not believed at any strength", "[unit]") {
  CHECK(judged({{"Na^+", 2}, {"CO3^2-", 1}}).coverage.valid);
  const Judged strong = judged({{"Na^+", 9}, {"CO3^2-", 4.5}});
  CHECK_FALSE(strong.coverage.valid);
  CHECK(tells(strong.coverage, "no range of its parameters is published"));
}

TEST_CASE("the colder, the less certain is a linear slope", "[property]") {
  // Sodium nitrate: slopes alone. Beyond what 25 degC leaves open the doubt goes with the square.
  const auto u = [](double t_C) {
    return judged({{"Na^+", 1}, {"NO3^-", 1}}, ModelKind::pitzer, {t_C}).coverage.u_ln_gamma;
  };
  const double at_25 = u(25), shift_5 = std::pow(u(5), 2) - at_25 * at_25,
               shift_15 = std::pow(u(15), 2) - at_25 * at_25;
  CHECK(shift_15 > 0);
  CHECK(shift_5 == Approx(16 * shift_15).epsilon(1e-3));
}

TEST_CASE("a psi nobody published is named where the pairs are known", "[unit]") {
  // K^+ - Ni^2+: an analogous theta; Cl^- - NO3^-: published theta, psi of nickel not.
  const Judged mixed = judged({{"Ni^2+", 1}, {"Cl^-", 1.5}, {"NO3^-", 0.5}});
  bool named = false;
  for (const std::string& text : mixed.coverage.missing)
    named = named || text.find("psi not published") != std::string::npos;
  CHECK(named);
}

TEST_CASE("Davies states the specific interaction it leaves out", "[unit]") {
  const Judged salt = judged({{"Na^+", 0.1}, {"Cl^-", 0.1}}, ModelKind::davies);
  CHECK(salt.coverage.valid);
  CHECK(salt.coverage.u_ln_gamma == Approx(0.025).epsilon(0.01));
}

TEST_CASE("a trace that holds nearly all of a component decides", "[unit]") {
  // Silver chloride in brine: all silver is AgCl_n^(n-1), about which no interaction is published.
  const Judged brine = judged({{"Na^+", 3}, {"Cl^-", 3.0001}, {"Ag^+", 1e-4}});
  CHECK_FALSE(brine.coverage.valid);
  CHECK(tells(brine.coverage, "AgCl"));
  CHECK_FALSE(brine.coverage.missing.empty());
  // Without the silver nothing is in doubt.
  CHECK(judged({{"Na^+", 3}, {"Cl^-", 3}}).coverage.valid);
}

TEST_CASE("the ranges of acid, alkali and ligand are kept", "[unit]") {
  const Judged iron = judged({{"Fe^2+", 0.7}, {"SO4^2-", 7.3}});
  CHECK_FALSE(iron.coverage.valid);
  CHECK(tells(iron.coverage, "mol/kg of sulfuric acid"));
  const Judged copper = judged({{"Cu^2+", 0.01}, {"Cl^-", 9}});
  CHECK_FALSE(copper.coverage.valid);
  CHECK(tells(copper.coverage, "on which the complexes inside the fit depend"));
}

TEST_CASE("doubt grows with the partner's molality", "[property]") {
  // Na - Ag: no theta is published; u of ln gamma(Ag^+) is in proportion to sodium.
  const auto u = [](double sodium) {
    const Judged found = judged({{"Na^+", sodium}, {"NO3^-", sodium + 0.1}, {"Ag^+", 0.1}});
    return ln_gamma_uncertainty(found.solver, found.answer)[*found.solver.system().species_index("Ag^+")];
  };
  CHECK(u(0.5) > 0);
  CHECK(u(1.0) == Approx(2 * u(0.5)).epsilon(1e-3));
}

TEST_CASE("beyond its ionic strength a model is not believed", "[unit]") {
  CHECK_FALSE(judged({{"Na^+", 1}, {"Cl^-", 1}}, ModelKind::davies).coverage.valid);
  CHECK(judged({{"Na^+", 1}, {"Cl^-", 1}}, ModelKind::sit).coverage.valid);
  CHECK_FALSE(judged({{"Na^+", 4}, {"Cl^-", 4}}, ModelKind::sit).coverage.valid);
}
