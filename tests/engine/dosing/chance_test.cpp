// The chance of a plan against closed forms, and against tanks drawn, dosed and solved one by one.
#include <bathwright/bath/uncertainty.hpp>
#include <bathwright/dosing/plan.hpp>
#include <bathwright/speciation/sensitivity.hpp>
#include <bathwright/speciation/session.hpp>
#include <cmath>
#include <random>

#include "../../support/demo_tank.hpp"
#include "model_doubt.hpp"

using namespace bathwright;
using demo::must;
using dosing::Chances;
using dosing::Plan;
using dosing::Sampling;
using dosing::Spread;

namespace {

double normal_below(double x) { return 0.5 * std::erfc(-x / std::sqrt(2.0)); }

/// Nothing is doubtful; tests add what they are about.
Spread exact() {
  return {.u_pH = 0, .u_assay_rel = 0, .u_weighed_rel = 0, .u_measured_rel = 0, .with_constants = false};
}

bath::Tank with_aims(std::vector<bath::Aim> aims) {
  bath::Tank tank = demo::tank();
  tank.aims = std::move(aims);
  return tank;
}

Plan adding(const std::vector<std::pair<std::string, double>>& kg) {
  Plan plan;
  for (const auto& [id, amount] : kg) {
    dosing::Addition addition;
    addition.chemical = id;
    addition.kg = amount;
    plan.additions.push_back(std::move(addition));
  }
  return plan;
}

Chances chance(const bath::Tank& tank, const bath::TankState& now, const Plan& plan, const Spread& spread,
               const Sampling& sampling = {.samples = 4000, .seed = 7, .threads = 2}) {
  return must(dosing::chance_of(tank, demo::chemistry(), now, plan, spread, sampling));
}

/// Four standard errors of a share: one false alarm in 16 000.
Approx share(double expected, int samples = 4000) {
  return Approx(expected)
      .margin(4 * std::sqrt(std::max(expected * (1 - expected), 1e-4) / samples))
      .epsilon(0);
}

std::size_t component(const std::string& name) {
  const auto& names = demo::chemistry().components();
  return static_cast<std::size_t>(std::ranges::find(names, name) - names.begin());
}

/// Covariance of two components from standard uncertainties in g/L and their correlation.
std::vector<double> pair_covariance(const std::string& a, double u_a, const std::string& b, double u_b,
                                    double correlation, double volume_L) {
  const std::size_t n = demo::chemistry().components().size() + 1, i = component(a), j = component(b);
  const auto mol = [&](const std::string& name, double g_per_L) {
    return g_per_L * volume_L / must(matter::Formula::parse(name)).molar_mass().v;
  };
  std::vector<double> covariance(n * n, 0);
  covariance[i * n + i] = std::pow(mol(a, u_a), 2);
  covariance[j * n + j] = std::pow(mol(b, u_b), 2);
  covariance[i * n + j] = covariance[j * n + i] = correlation * mol(a, u_a) * mol(b, u_b);
  return covariance;
}

}  // namespace

TEST_CASE("one level with a normal error", "[reference][dosing]") {
  const bath::TankState now = demo::state(280, 50, 42);
  Spread spread = exact();
  spread.covariance = dosing::covariance_of(demo::chemistry(), now, {{"H3BO3", 1.5}});
  const auto [low, high] = GENERATE(std::pair(40.0, 45.0), std::pair(41.5, 60.0), std::pair(44.0, 46.0));
  CAPTURE(low, high);
  const Chances found = chance(with_aims({{"H3BO3", (low + high) / 2, low, high}}), now, {}, spread);
  const double expected = normal_below((high - 42) / 1.5) - normal_below((low - 42) / 1.5);
  CHECK(found.in_every_window == share(expected));
  REQUIRE(found.levels.size() == 1);
  CHECK(found.levels[0].inside == found.in_every_window);
  const double error = 4 * 1.5 * 2.1 / std::sqrt(4000.0);  // of a 5 % point: sqrt(p q / N) / density = 2.1 u
  CHECK(found.levels[0].level.p05 == Approx(42 - 1.6449 * 1.5).margin(error).epsilon(0));
  CHECK(found.levels[0].level.p50 == Approx(42).margin(error).epsilon(0));
  CHECK(found.levels[0].level.p95 == Approx(42 + 1.6449 * 1.5).margin(error).epsilon(0));
  CHECK(found.unsolved == 0);
}

TEST_CASE("two levels whose errors go together", "[reference][dosing]") {
  const bath::TankState now = demo::state(280, 50, 42);
  const bath::TankView view = must(demo::chemistry().view(now));
  const double nickel = demo::level(view, "Ni^2+"), chloride = demo::level(view, "Cl^-");
  const double correlation = GENERATE(-0.9, 0.0, 0.8, 1.0);
  CAPTURE(correlation);
  Spread spread = exact();
  spread.covariance = pair_covariance("Ni^2+", 2, "Cl^-", 0.5, correlation, 2400);
  const bath::Tank tank = with_aims(
      {{"Ni^2+", nickel, nickel - 1.5, nickel + 3}, {"Cl^-", chloride, chloride - 0.3, chloride + 0.9}});
  // Integral over the first error of the normal probability of the second, given the first (Simpson).
  const auto given = [&](double x) {
    const double rest = std::sqrt(1 - correlation * correlation);
    if (rest == 0) return correlation * x > -0.6 && correlation * x < 1.8 ? 1.0 : 0.0;
    return normal_below((1.8 - correlation * x) / rest) - normal_below((-0.6 - correlation * x) / rest);
  };
  constexpr int steps = 2000;
  const double from = -0.75, to = 1.5, h = (to - from) / steps;
  double expected = 0;
  for (int i = 0; i <= steps; ++i) {
    const double x = from + i * h, weight = i == 0 || i == steps ? 1 : i % 2 == 0 ? 2 : 4;
    expected += weight * h / 3 * std::exp(-x * x / 2) / std::sqrt(2 * M_PI) * given(x);
  }
  CHECK(chance(tank, now, {}, spread).in_every_window == share(expected));
}

TEST_CASE("the pH at the end is that of tanks solved one by one", "[reference][dosing]") {
  // Monotonic in the reading: the percentiles of the end are the ends of the percentiles.
  const Plan plan = adding({{"nickel-carbonate", 0.6}, {"boric-acid", 12}});
  const auto end_of = [&](double pH) {
    bath::TankState state = demo::state(263, 48, 37, pH, 2340);
    for (const auto& addition : plan.additions)
      state = bath::Chemistry::after(
          std::move(state), must(demo::chemistry().brings(demo::tank().on_shelf(addition.chemical)->stock)),
          addition.kg);
    return must(demo::chemistry().speciate(state)).pH();
  };
  Spread spread = exact();
  spread.u_pH = 0.1;
  const bath::Tank tank = with_aims({{"pH", end_of(3.9), end_of(3.85), end_of(4.05)}});
  const Chances found = chance(tank, demo::state(263, 48, 37, 3.9, 2340), plan, spread);
  const dosing::Percentiles& pH = found.levels.front().level;
  const double error = 4 * 0.1 * 2.1 / std::sqrt(4000.0) * (end_of(3.8) - end_of(3.7)) / 0.1;
  CHECK(pH.p05 == Approx(end_of(3.9 - 0.16449)).margin(error).epsilon(0));
  CHECK(pH.p50 == Approx(end_of(3.9)).margin(error).epsilon(0));
  CHECK(pH.p95 == Approx(end_of(3.9 + 0.16449)).margin(error).epsilon(0));
  CHECK(found.in_every_window == share(normal_below(1.5) - normal_below(-0.5)));
}

TEST_CASE("everything drawn together, against as many tanks made one by one", "[reference][dosing]") {
  constexpr int samples = 1500;
  const bath::TankState now = demo::state(263, 48, 37, 4.0, 2340);
  const Plan plan = adding({{"water", 20},
                            {"nickel-sulfate", 56},
                            {"nickel-chloride", 8},
                            {"boric-acid", 14},
                            {"nickel-carbonate", 0.4}});
  bath::TankState planned = now;
  for (const auto& addition : plan.additions)
    planned = bath::Chemistry::after(
        std::move(planned), must(demo::chemistry().brings(demo::tank().on_shelf(addition.chemical)->stock)),
        addition.kg);
  const bath::TankView middle = must(demo::chemistry().quick_view(planned));
  const double sulfate = demo::level(middle, "NiSO4.6H2O"), boric = demo::level(middle, "H3BO3");
  bath::Tank tank = with_aims({{"NiSO4.6H2O", sulfate, sulfate - 3, sulfate + 4},
                               {"H3BO3", boric, boric - 1, boric + 1.5},
                               {"pH", middle.pH, middle.pH - 0.08, middle.pH + 0.12}});
  for (bath::ShelfItem& item : tank.shelf)
    if (item.stock.id == "boric-acid") item.u_assay_rel = 0.03;
  Spread spread{.covariance = dosing::covariance_of(
                    demo::chemistry(), now, {{"NiSO4.6H2O", 2}, {"NiCl2.6H2O", 0.7}, {"H3BO3", 0.5}}, 30),
                .u_pH = 0.05,
                .with_constants = false};
  std::mt19937 random(5);
  std::normal_distribution<double> normal;
  int inside = 0;
  for (int i = 0; i < samples; ++i) {
    bath::TankState state =
        demo::state(263 + 2 * normal(random), 48 + 0.7 * normal(random), 37 + 0.5 * normal(random),
                    4 + 0.05 * normal(random), 2340 + 30 * normal(random));
    for (const auto& addition : plan.additions) {
      matter::StockChemical lot = demo::tank().on_shelf(addition.chemical)->stock;
      if (lot.id != "water") lot.assay *= 1 + (lot.id == "boric-acid" ? 0.03 : 0.005) * normal(random);
      state = bath::Chemistry::after(std::move(state), must(demo::chemistry().brings(lot)),
                                     addition.kg * (1 + (lot.liquid ? 0.01 : 0.005) * normal(random)));
    }
    const bath::TankView end = must(demo::chemistry().quick_view(state));
    const auto near = [](double off, double below, double above) { return off >= -below && off <= above; };
    inside += near(demo::level(end, "NiSO4.6H2O") - sulfate, 3, 4) &&
              near(demo::level(end, "H3BO3") - boric, 1, 1.5) && near(end.pH - middle.pH, 0.08, 0.12);
  }
  const double expected = static_cast<double>(inside) / samples;
  CHECK(expected > 0.4);
  CHECK(expected < 0.9);
  CHECK(chance(tank, now, plan, spread).in_every_window ==
        share(expected, samples * 4000 / (samples + 4000)));
}

TEST_CASE("the same bits on any number of threads", "[property][dosing]") {
  const bath::TankState now = demo::state(263, 48, 37, 4.0, 2340);
  Spread spread{.covariance = dosing::covariance_of(
                    demo::chemistry(), now, {{"NiSO4.6H2O", 2}, {"NiCl2.6H2O", 0.7}, {"H3BO3", 0.5}}, 20)};
  const Plan plan = adding({{"nickel-sulfate", 50}, {"boric-acid", 14}});
  const auto figures = [&](unsigned threads, std::uint64_t seed) {
    const Chances c =
        chance(demo::tank(), now, plan, spread, {.samples = 700, .seed = seed, .threads = threads});
    std::vector<double> all{c.in_every_window, c.all};
    for (const auto& level : c.levels)
      all.insert(all.end(), {level.inside, level.level.p05, level.level.p50, level.level.p95});
    for (const auto& solid : c.solids) all.insert(all.end(), {solid.working_log10.p05, solid.idle_log10.p95});
    return all;
  };
  const auto once = figures(1, 3);
  CHECK(figures(1, 3) == once);
  CHECK(figures(2, 3) == once);
  CHECK(figures(5, 3) == once);
  CHECK(figures(1, 4) != once);
}

TEST_CASE("without doubt an end is inside or it is not", "[unit][dosing]") {
  const bath::TankState now = demo::state(280, 50, 42);
  const Sampling few{.samples = 16};
  CHECK(chance(demo::tank(), now, {}, exact(), few).in_every_window == 1);
  const Chances outside = chance(demo::tank(), demo::state(280, 70, 42), {}, exact(), few);
  CHECK(outside.in_every_window == 0);
  for (const auto& level : outside.levels) CHECK(level.inside == (level.quantity == "NiCl2.6H2O" ? 0 : 1));
}

TEST_CASE("a wrong volume is an addition too large or too small", "[reference][dosing]") {
  // Levels stay what was found; 1 % more tank dilutes what is added by 1 %: with c the level, a the addition
  // over the volume, c + a V/V' = c + a - a dV/V.
  const auto spread = [](const bath::TankState& now) {
    Spread only_volume = exact();
    only_volume.covariance = dosing::covariance_of(demo::chemistry(), now, {}, 48);
    return only_volume;
  };
  const bath::Tank tank = with_aims({{"H3BO3", 42, 30, 60}});
  const bath::TankState full = demo::state(280, 50, 42), short_of = demo::state(280, 50, 37);
  CHECK(chance(tank, full, {}, spread(full)).levels[0].level.p95 == Approx(42).epsilon(1e-6));
  const auto level = chance(tank, short_of, adding({{"boric-acid", 12}}), spread(short_of)).levels[0].level;
  const double added = 12 * demo::stock("boric-acid").assay * 1000 / 2400;
  CHECK((level.p95 - level.p05) / 2 / 1.6449 == Approx(added * 0.02).epsilon(0.07));
}

TEST_CASE("constants and interactions move saturation as the tank sheet says", "[property][dosing]") {
  // Without additions the acid keeps the measured pH, as in the view.
  const bath::TankState now = demo::state(280, 50, 42);
  Spread spread = exact();
  spread.with_constants = true;
  const bath::TankView view = must(bath::view_with_uncertainty(demo::chemistry(), now));
  const Chances found = chance(demo::tank(), now, {}, spread);
  for (const auto& level : found.levels)
    if (level.quantity == "pH") CHECK(level.level.p95 - level.level.p05 < 1e-6);
  int compared = 0;
  for (const auto& solid : found.solids)
    for (const bath::Headroom& room : view.headroom) {
      if (room.solid != solid.solid || !room.u_working_log10 || !room.covers_working) continue;
      INFO(solid.solid);
      const double u = (solid.working_log10.p95 - solid.working_log10.p05) / 2 / 1.6449;
      CHECK(u == Approx(*room.u_working_log10).epsilon(0.07));
      CHECK(solid.working_log10.p50 == Approx(room.working_log10).margin(0.1 * u).epsilon(0));
      CHECK(solid.working.value() == share(normal_below(room.working_log10 / *room.u_working_log10)));
      ++compared;
    }
  CHECK(compared >= 3);
}

TEST_CASE("to first order is enough for the constants", "[property][dosing]") {
  // Each constant moved by its uncertainty, the tank solved at its pH, dosed and solved again.
  const bath::Chemistry& chemistry = demo::chemistry();
  const speciation::Solver& solver = chemistry.working();
  const bath::TankState now = demo::state(263, 48, 37, 3.9, 2340);
  const bath::Brings carbonate = must(chemistry.brings(demo::stock("nickel-carbonate")));
  const bath::TankState end = bath::Chemistry::after(now, carbonate, 0.8);
  const std::size_t boric = *solver.system().solid("H3BO3");
  const Eigen::MatrixXd shifts = must(dosing::model_doubt(chemistry, now, 1, end, {boric}));
  const auto doubts = speciation::doubts(solver, must(chemistry.speciate(end)));
  const double pH_read = must(chemistry.speciate(now)).pH();
  const std::size_t by_charge = chemistry.found_by_charge();
  const auto ended = [&](const speciation::Change& change, double times) {
    speciation::Session session(solver);
    for (std::size_t j = 0; j < change.ln_K_species.size(); ++j)
      session.ln_K().species[j] += times * change.ln_K_species[j];
    for (std::size_t k = 0; k < change.ln_K_solids.size(); ++k)
      session.ln_K().solids[k] += times * change.ln_K_solids[k];
    speciation::Task task = bath::task_of(now);
    task.pH = speciation::HeldPh{pH_read, by_charge};
    speciation::Equilibrium answer;
    REQUIRE(session.solve(task, answer));
    bath::TankState state = end;
    state.component_mol[0] += answer.held_ph_mol;
    state.component_mol[by_charge] -= answer.held_ph_mol / solver.system().species()[by_charge].charge;
    REQUIRE(session.solve(bath::task_of(state), answer));
    return std::pair(answer.pH(), answer.saturation_index[boric]);
  };
  int seen = 0;
  for (std::size_t d = 0; d < doubts.size(); ++d) {
    if (doubts[d].of == speciation::Doubt::Of::interaction || doubts[d].of == speciation::Doubt::Of::gas)
      continue;
    const auto up = ended(doubts[d].change, 1), down = ended(doubts[d].change, -1);
    const auto column = static_cast<Eigen::Index>(d);
    INFO("doubt " << d);
    // A trace whose constant is uncertain by a whole unit is not linear, and moves the pH by 0.0004.
    CHECK(shifts(0, column) == Approx((up.first - down.first) / 2).margin(5e-4).epsilon(0.1));
    CHECK(shifts(1, column) == Approx((up.second - down.second) / 2).margin(5e-4).epsilon(0.1));
    seen += std::abs(shifts(0, column)) > 1e-3;
  }
  CHECK(seen > 0);
}

TEST_CASE("what a second look would be worth", "[reference][dosing]") {
  const bath::TankState now = demo::state(280, 50, 42);
  const bath::Tank tank = with_aims({{"H3BO3", 42, 40, 44}, {"pH", 4.2, 4.1, 4.3}});
  Spread spread = exact();
  spread.covariance = dosing::covariance_of(demo::chemistry(), now, {{"H3BO3", 2}});
  spread.u_pH = 0.05;
  const auto looks = must(dosing::second_looks(tank, demo::chemistry(), now, {}, spread,
                                               {.samples = 4000, .seed = 2, .threads = 2}));
  REQUIRE(looks.size() == 2);
  CHECK(looks[0].at == "H3BO3");
  CHECK(looks[0].in_every_window == share(std::erf(1.0) * std::erf(2 / std::sqrt(2.0))));
  CHECK(looks[1].at == "pH");
  CHECK(looks[1].in_every_window == share(std::erf(1 / std::sqrt(2.0)) * std::erf(2.0)));
}

TEST_CASE("a chance that cannot be told", "[failure][dosing]") {
  const bath::TankState now = demo::state(280, 50, 42);
  const auto told = [&](const Plan& plan, const Spread& spread, const Sampling& sampling,
                        const std::function<bool(double)>& progress = {}) {
    return dosing::chance_of(demo::tank(), demo::chemistry(), now, plan, spread, sampling, progress);
  };
  CHECK_FALSE(told({}, exact(), {.samples = 0}));
  CHECK_FALSE(told(adding({{"no-such-thing", 1}}), exact(), {}));
  Spread wrong = exact();
  wrong.covariance = {1, 2, 3};
  CHECK_FALSE(told({}, wrong, {}));
  const auto stopped = told({}, exact(), {.samples = 4000}, [](double done) { return done < 0.2; });
  REQUIRE_FALSE(stopped);
  CHECK(stopped.problems().front().kind == Fault::refused);
}
