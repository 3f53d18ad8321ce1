// What a careless solver gets wrong without noticing.
#include <bathwright/speciation/coverage.hpp>
#include <bathwright/speciation/session.hpp>

#include "systems.hpp"

using namespace bathwright;
using namespace bathwright::speciation;
using activity::ModelKind;

namespace {

/// Invented neutral metal M and ligand L, so that gamma = 1 and the answer has a closed form.
Solver strong_complex(double log10_beta) {
  StatedSpecies complex{"XeKr", "Xe + Kr = XeKr", "invented", "trap", {}, 0};
  complex.constant.log10_K = log10_beta;
  const auto with = equilibria_for(ModelKind::davies).with({complex}, {});
  REQUIRE(with);
  auto solver = Solver::prepare(system_of(*with, {"Xe", "Kr"}), ModelKind::davies, room);
  REQUIRE(solver);
  return *std::move(solver);
}

}  // namespace

TEST_CASE("equal totals of metal and ligand: the free ion falls as beta^-1/2", "[property]") {
  // M + L = ML, totals T: beta x^2 + x - T = 0, x = 2 T/(1 + sqrt(1 + 4 beta T)).
  for (const double log10_beta : {5., 15., 25., 30., 40.})
    for (const double total : {1e-6, 0.01, 1.0}) {
      const Solver solver = strong_complex(log10_beta);
      const Equilibrium answer = solved(solver, task_of(solver.system(), {{"Xe", total}, {"Kr", total}}));
      const double beta = std::pow(10, log10_beta);
      const double expected = 2 * total / (1 + std::sqrt(1 + 4 * beta * total));
      INFO("log10 beta " << log10_beta << ", total " << total);
      CHECK(molality_of(solver, answer, "Xe") == Approx(expected).margin(0).epsilon(1e-8));
      CHECK(molality_of(solver, answer, "Kr") == Approx(expected).margin(0).epsilon(1e-8));
    }
}

TEST_CASE("totals from 1e-300 to the absurd are solved or refused by name", "[property]") {
  for (const ModelKind kind : {ModelKind::davies, ModelKind::pitzer}) {
    const Solver solver = solver_of({"Ni^2+", "SO4^2-", "Na^+"}, room, kind);
    for (const double mol : {1e-300, 1e-200, 1e-100, 1e-30, 1e-15}) {
      INFO(activity::name(kind) << " " << mol);
      Task task = task_of(solver.system(), {{"Ni^2+", mol}, {"SO4^2-", mol}, {"Na^+", 0.1}});
      let_precipitate(task, solver.system());
      const Equilibrium answer = solved(solver, task);
      CHECK(answer.residuals.mass_balance < 1e-12);
      CHECK(std::isfinite(answer.pH()));
    }
    for (const double mol : {50., 1e3, 1e6, 1e30, 1e300}) {
      INFO(activity::name(kind) << " " << mol);
      const auto answer = solver.solve(task_of(solver.system(), {{"Ni^2+", mol}, {"SO4^2-", mol}}));
      if (answer)
        CHECK(answer->residuals.mass_balance < 1e-12);
      else
        CHECK_FALSE(answer.problems()[0].what.empty());
    }
  }
}

TEST_CASE("pH below 0 and above 14", "[property]") {
  const Solver acid = solver_of({"Cl^-"});
  CHECK(solved(acid, task_of(acid.system(), {{"Cl^-", 6}})).pH() < 0);
  const Solver alkali = solver_of({"Na^+"});
  CHECK(solved(alkali, task_of(alkali.system(), {{"Na^+", 6}})).pH() > 14);
}

TEST_CASE("an exact duplicate of a solid does not upset the solver", "[property]") {
  const Equilibria& built_in = equilibria_for(ModelKind::pitzer);
  const StatedSolid twin{"twin of NaCl", "NaCl", "NaCl(s) = Na^+ + Cl^-", "invented", "", "trap", {}, 0, 100,
                         false};
  StatedSolid copy = twin;
  for (const SolidData& solid : built_in.solids())
    if (solid.name == "NaCl") copy.constant = solid.dissolution;
  const auto with = built_in.with({}, {copy});
  REQUIRE(with);
  auto solver = Solver::prepare(system_of(*with, {"Na^+", "Cl^-"}), ModelKind::pitzer, room);
  REQUIRE(solver);
  Task task = task_of(solver->system(), {{"Na^+", 8}, {"Cl^-", 8}});
  let_precipitate(task, solver->system());
  const Equilibrium answer = solved(*solver, task);
  CHECK(answer.solid_mol[*solver->system().solid("NaCl")] +
            answer.solid_mol[*solver->system().solid("twin of NaCl")] ==
        Approx(8 - 6.1).margin(0.1).epsilon(0));
}

TEST_CASE("totals that are all zero are pure water", "[property]") {
  const Solver solver = solver_of({"Ni^2+", "SO4^2-", "Cl^-"});
  Task task = task_of(solver.system(), {});
  let_precipitate(task, solver.system());
  const Equilibrium answer = solved(solver, task);
  CHECK(answer.water_kg == Approx(1).margin(1e-7).epsilon(0));
  CHECK(molality_of(solver, answer, "Ni^2+") == 0);
}

TEST_CASE("a solid that holds nearly all of a component leaves the dissolved rest exact", "[property]") {
  // AgCl, equal totals: Ag^+ + Cl^- at saturation do not depend on how much solid there is.
  const Solver solver = solver_of({"Ag^+", "Cl^-"}, room, ModelKind::davies);
  const auto dissolved = [&](double total) {
    Task task = task_of(solver.system(), {{"Ag^+", total}, {"Cl^-", total}});
    let_precipitate(task, solver.system());
    return molality_of(solver, solved(solver, task), "Ag^+");
  };
  CHECK(dissolved(5) == Approx(dissolved(1e-3)).margin(0).epsilon(1e-6));
}

TEST_CASE("complexes of a high charge stay finite in strong salt", "[property]") {
  const Solver solver = solver_of({"Cu^2+", "P2O7^4-", "K^+", "Na^+"});
  const Equilibrium answer = solved(
      solver, task_of(solver.system(), {{"Cu^2+", 0.3}, {"P2O7^4-", 0.9}, {"K^+", 3.4}, {"Na^+", 0.2}}));
  for (const double m : answer.molality) CHECK(std::isfinite(m));
  CHECK(answer.residuals.mass_balance < 1e-12);
}

TEST_CASE("solids of proportional composition share what precipitates", "[property]") {
  // NaCl once more as Na2Cl2, its constant squared: the same salt, so the liquid cannot tell.
  const Equilibria& built_in = equilibria_for(ModelKind::pitzer);
  StatedSolid pair{
      "pair of NaCl", "Na2Cl2", "Na2Cl2(s) = 2 Na^+ + 2 Cl^-", "invented", "", "trap", {}, 0, 100, false};
  for (const SolidData& solid : built_in.solids())
    if (solid.name == "NaCl") {
      pair.constant = solid.dissolution;
      pair.constant.log10_K *= 2;
      pair.constant.dH_kJ_per_mol *= 2;
    }
  const auto with = built_in.with({}, {pair});
  REQUIRE(with);
  auto solver = Solver::prepare(system_of(*with, {"Na^+", "Cl^-"}), ModelKind::pitzer, room);
  REQUIRE(solver);
  Task task = task_of(solver->system(), {{"Na^+", 8}, {"Cl^-", 8}});
  set_rule(task, solver->system(), "NaCl", SolidRule::may_precipitate);
  const double alone = solved(*solver, task).solid_mol[*solver->system().solid("NaCl")];
  set_rule(task, solver->system(), "pair of NaCl", SolidRule::may_precipitate);
  const Equilibrium both = solved(*solver, task);
  CHECK(both.solid_mol[*solver->system().solid("NaCl")] +
            2 * both.solid_mol[*solver->system().solid("pair of NaCl")] ==
        Approx(alone).margin(1e-9).epsilon(0));
}

TEST_CASE("of a metal's oxide and hydroxides the least soluble forms", "[property]") {
  // The same but for water: in brine (a_w 0.75) and in water.
  for (const double salt : {0.0, 6.0}) {
    INFO("NaCl " << salt << " mol/kg");
    const Solver solver = solver_of({"Zn^2+", "Na^+", "Cl^-"});
    Task task = task_of(solver.system(), {{"Zn^2+", 0.1}, {"Na^+", 0.2 + salt}, {"Cl^-", 0.2 + salt}});
    task.solids.assign(solver.system().solids().size(), SolidRule::report_only);
    std::vector<std::size_t> forms;
    for (std::size_t k = 0; k < task.solids.size(); ++k)
      if (const auto& formula = solver.system().solids()[k].formula;
          formula == "ZnO" || formula == "Zn(OH)2") {
        task.solids[k] = SolidRule::may_precipitate;
        forms.push_back(k);
      }
    REQUIRE(forms.size() >= 5);
    const Equilibrium answer = solved(solver, task);
    int present = 0;
    double zinc = 0;
    for (const std::size_t k : forms) {
      present += answer.solid_mol[k] > 0;
      zinc += answer.solid_mol[k];
      CHECK(answer.saturation_index[k] < 1e-8);
    }
    CHECK(present == 1);
    CHECK(zinc == Approx(0.1).margin(1e-3).epsilon(0));
    CHECK(answer.solid_mol[*solver.system().solid("ZnO (zincite)")] >
          0);  // log K -16.87, the others -16.61 up
  }
}

namespace {

constexpr std::string_view decahydrate = "Na2SO4.10H2O (mirabilite)", anhydrous = "Na2SO4 (thenardite)";

/// Na2SO4.10H2O = Na2SO4 + 10 H2O: the water's activity at which both last, whatever else is dissolved.
double ln_water_of_both(const Solver& solver) {
  const auto ln_K = [&](std::string_view solid) {
    return solver.ln_K().solids[*solver.system().solid(solid)];
  };
  return (ln_K(decahydrate) - ln_K(anhydrous)) / 10;
}

}  // namespace

TEST_CASE("two hydrates of one salt side by side fix the water's activity", "[property]") {
  for (const double chloride : {0.5, 1.0, 3.0}) {
    INFO("NaCl " << chloride << " mol");
    const Solver solver = solver_of({"Na^+", "SO4^2-", "Cl^-"});
    Task task = task_of(solver.system(), {{"Na^+", 20 + chloride}, {"SO4^2-", 10}, {"Cl^-", chloride}});
    task.water_kg = 1.9;
    set_rule(task, solver.system(), decahydrate, SolidRule::may_precipitate);
    set_rule(task, solver.system(), anhydrous, SolidRule::may_precipitate);
    const Equilibrium answer = solved(solver, task);
    CHECK(answer.solid_mol[*solver.system().solid(decahydrate)] > 0);
    CHECK(answer.solid_mol[*solver.system().solid(anhydrous)] > 0);
    CHECK(answer.ln_water_activity == Approx(ln_water_of_both(solver)).margin(1e-9).epsilon(0));
  }
}

// An excess of both must lend water by turning the one into the other.
TEST_CASE("two hydrates of one salt in excess fix the water's activity", "[property]") {
  const Solver solver = solver_of({"Na^+", "SO4^2-", "Cl^-"});
  Task task = task_of(solver.system(), {{"Na^+", 1}, {"Cl^-", 1}});
  set_rule(task, solver.system(), decahydrate, SolidRule::in_excess);
  set_rule(task, solver.system(), anhydrous, SolidRule::in_excess);
  const Equilibrium answer = solved(solver, task);
  CHECK(answer.ln_water_activity == Approx(ln_water_of_both(solver)).margin(1e-9).epsilon(0));
}

TEST_CASE("two hydrates in excess of which one must vanish are refused", "[failure]") {
  // Off their transition and with nothing else dissolved, the one turns into the other without end.
  for (const double t : {10.0, 25.0, 30.0}) {
    INFO(t << " degC");
    const Solver solver = solver_of({"Na^+", "SO4^2-"}, {t});
    Task task = task_of(solver.system(), {});
    set_rule(task, solver.system(), decahydrate, SolidRule::in_excess);
    set_rule(task, solver.system(), anhydrous, SolidRule::in_excess);
    const auto answer = solver.solve(task);
    REQUIRE_FALSE(answer);
    CHECK_FALSE(answer.problems()[0].what.empty());
  }
}

namespace {

/// Whether the decahydrate is what forms of 5 mol Na2SO4 in 1 kg of water, and what stays dissolved.
std::pair<bool, double> sulfate_left(double t) {
  const Solver solver = solver_of({"Na^+", "SO4^2-"}, {t});
  Task task = task_of(solver.system(), {{"Na^+", 10}, {"SO4^2-", 5}});
  set_rule(task, solver.system(), decahydrate, SolidRule::may_precipitate);
  set_rule(task, solver.system(), anhydrous, SolidRule::may_precipitate);
  const Equilibrium answer = solved(solver, task);
  return {answer.solid_mol[*solver.system().solid(decahydrate)] > 0, molality_of(solver, answer, "SO4^2-")};
}

/// Where the two change places by the built-in constants, within 0.003 degC (published: 32.38 degC).
double transition_C() {
  double low = 30, high = 35;
  while (high - low > 0.006) {
    const double middle = (low + high) / 2;
    (sulfate_left(middle).first ? low : high) = middle;
  }
  return (low + high) / 2;
}

}  // namespace

TEST_CASE("near the temperature where two hydrates change places the liquid does not jump", "[property]") {
  const double t = transition_C();
  const auto cold = sulfate_left(t - 0.01), warm = sulfate_left(t + 0.01);
  CHECK(cold.first);
  CHECK_FALSE(warm.first);
  // Along the decahydrate it moves by 0.4 mol/kg a kelvin.
  CHECK(cold.second == Approx(warm.second).margin(0.4 * 0.02).epsilon(0));
}

// Not mended yet: refused within 0.0005 K of the transition, where both solids are saturated to rounding.
TEST_CASE("at the temperature where two hydrates change places either may form", "[property][!mayfail]") {
  const double middle = transition_C(), cold = sulfate_left(middle - 0.007).second;
  for (double t = middle - 0.003; t < middle + 0.003; t += 1e-4) {
    INFO(t << " degC");
    CHECK(sulfate_left(t).second == Approx(cold).margin(0.4 * 0.01).epsilon(0));
  }
}

TEST_CASE("every solid at once, from wild totals of forty components", "[property]") {
  for (const ModelKind kind : {ModelKind::davies, ModelKind::pitzer}) {
    const auto& basis = equilibria_for(kind).basis();
    Names names;
    for (const std::string& name : basis)
      if (name != "H^+" && names.size() < 40) names.push_back(name);
    const Solver solver = solver_of(names, room, kind);
    REQUIRE(solver.system().solids().size() >= 40);
    std::mt19937 random(20260801);
    int answers = 0;
    for (int number = 0; number < 40; ++number) {
      Task task = wild_totals(solver.system(), random, 0.3);
      task.solids.assign(solver.system().solids().size(), SolidRule::may_precipitate);
      const auto answer = solver.solve(task);
      INFO(activity::name(kind) << ", case " << number << ": "
                                << (answer ? std::string{} : text(answer.problems())));
      if (!answer) {
        CHECK(answer.problems()[0].kind == Fault::out_of_range);
        continue;
      }
      ++answers;
      for (std::size_t k = 0; k < answer->solid_mol.size(); ++k) {
        CHECK(answer->solid_mol[k] >= 0);
        if (solver.covers(k)) CHECK(answer->saturation_index[k] < 1e-8);
      }
    }
    CHECK(answers >= 36);
  }
}

TEST_CASE("an ion of charge 6- in strong salt keeps a bounded coefficient and is named", "[property]") {
  for (const ModelKind kind : {ModelKind::davies, ModelKind::debye_huckel, ModelKind::sit, ModelKind::pitzer})
    for (const double strength : {1.6, 2.0, 3.0}) {  // I = 10 to 20 mol/kg
      const Solver solver = solver_of({"Cu^2+", "P2O7^4-", "K^+"}, room, kind);
      const Equilibrium answer =
          solved(solver,
                 task_of(solver.system(),
                         {{"Cu^2+", 0.25 * strength}, {"P2O7^4-", 0.6 * strength}, {"K^+", 1.9 * strength}}));
      INFO(activity::name(kind) << ", I = " << answer.ionic_strength);
      const std::size_t ion = *solver.system().species_index("Cu(P2O7)2^6-");
      // The Debye-Hueckel limit of a model with B a = 1.5 kg^0.5/mol^0.5: -36 * 0.51/1.5 = -12.2; less than
      // half as much again for interactions. (A charge times a sum of charges runs to -24 here.)
      CHECK(std::abs(answer.ln_gamma[ion]) / std::numbers::ln10 < 18);
      const Coverage found = coverage(solver, answer);
      CHECK_FALSE(found.valid);
      CHECK_FALSE(found.warnings.empty());
      if (kind != ModelKind::pitzer) continue;
      bool named = false;
      for (const auto& note : solver.model().notes())
        named = named || (note.kind == activity::InteractionNote::Kind::outside_model &&
                          note.text.find("Cu(P2O7)2^6-") != std::string::npos);
      CHECK(named);
    }
}

TEST_CASE("where a model has several equilibria none is called valid", "[property]") {
  // Pyrophosphate copper short of alkali, Pitzer with stand-ins: found by the sweep, where another start led
  // to another answer. Each is started cold and from 2 % less of each component.
  const BathSystem& bath = bath_systems()[1];
  const Amounts found[] = {
      {{"H^+", 0.32339091814299809},
       {"K^+", 1.7522627229562053},
       {"CO3^2-", 0.028311963925178835},
       {"Cu^2+", 0.44550511320953368},
       {"NH3", 0.18650334915500674},
       {"NO3^-", 0.10706533137396247},
       {"P2O7^4-", 0.58851645317601875},
       {"PO4^3-", 0.13376726819095572},
       {"SO4^2-", 0.023803495508504108}},
      {{"H^+", 0.61018550304632402},
       {"K^+", 2.3271816466555109},
       {"CO3^2-", 0.051649780175876209},
       {"Cu^2+", 0.62377250785955107},
       {"NH3", 0.10706699548268887},
       {"NO3^-", 0.16046907485695636},
       {"P2O7^4-", 0.80536922764791374},
       {"PO4^3-", 0.21137066017918802},
       {"SO4^2-", 0.032777319526519737}},
  };
  const Solver solver = solver_of(bath.components());
  int several = 0;
  for (const Amounts& amounts : found) {
    Task task = task_of(solver.system(), amounts);
    let_precipitate(task, solver.system(), bath);
    const Equilibrium cold = solved(solver, task);
    for (std::size_t i = 1; i < task.component_mol.size(); ++i) {
      INFO(solver.system().components()[i]);
      Task before = task;
      before.component_mol[i] /= 1.02;
      before.component_mol[0] = neutral_protons(solver.system(), before.component_mol);
      Session session(solver);
      Equilibrium warm;
      REQUIRE(session.solve(before, warm));
      REQUIRE(session.solve_near_last(task, warm));
      if (std::abs(warm.pH() - cold.pH()) < 1e-6) continue;
      ++several;
      CHECK_FALSE(coverage(solver, cold).valid);
      CHECK_FALSE(coverage(solver, warm).valid);
    }
  }
  CHECK(several > 0);  // else the trap is gone: find another
}

TEST_CASE("an answer whose Gibbs energy does not curve upward is not valid and says so", "[property]") {
  const Solver solver = solver_of({"Cu^2+", "P2O7^4-", "K^+"}, room, ModelKind::sit);
  const Equilibrium answer =
      solved(solver, task_of(solver.system(), {{"Cu^2+", 0.5}, {"P2O7^4-", 1.2}, {"K^+", 3.8}}));
  REQUIRE_FALSE(answer.stable);
  const Coverage found = coverage(solver, answer);
  CHECK_FALSE(found.valid);
  bool told = false;
  for (const std::string& warning : found.warnings)
    told = told || warning.find("no longer curves upward") != std::string::npos;
  CHECK(told);
}
