// When an answer says that it may not be believed.
#include <bathwright/speciation/coverage.hpp>

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
  CHECK(salt.coverage.u_ln_gamma == 0);
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
