// Solving again and again: the same answers, from a warm start too, and no allocation.
#include <bathwright/speciation/coverage.hpp>
#include <bathwright/speciation/session.hpp>
#include <cstdlib>
#include <new>
#include <random>

#include "../../support/bath_systems.hpp"
#include "systems.hpp"

namespace {

bool counting = false;
std::size_t allocations = 0;

}  // namespace

// Under a sanitizer its own allocator stays in place, and nothing is counted.
#if !defined(__SANITIZE_ADDRESS__) && !defined(__SANITIZE_THREAD__)
namespace {

void* counted(std::size_t size) {
  if (counting) ++allocations;
  if (void* memory = std::malloc(size == 0 ? 1 : size)) return memory;
  throw std::bad_alloc();
}

}  // namespace

void* operator new(std::size_t size) { return counted(size); }
void* operator new[](std::size_t size) { return counted(size); }
void operator delete(void* memory) noexcept { std::free(memory); }
void operator delete[](void* memory) noexcept { std::free(memory); }
void operator delete(void* memory, std::size_t) noexcept { std::free(memory); }
void operator delete[](void* memory, std::size_t) noexcept { std::free(memory); }
#endif

using namespace bathwright;
using namespace bathwright::speciation;
using activity::ModelKind;

namespace {

template <class Visit>
void each_bath(Visit visit) {
  for (const BathSystem& bath : bath_systems())
    for (const ModelKind kind : {ModelKind::davies, ModelKind::pitzer}) {
      INFO(bath.name << ", " << activity::name(kind));
      const Solver solver = solver_of(bath.components(), room, kind);
      visit(bath, solver);
    }
}

}  // namespace

TEST_CASE("a session allocates nothing once it is made", "[property]") {
  each_bath([](const BathSystem& bath, const Solver& solver) {
    std::mt19937 random(3);
    std::vector<Task> tasks;
    for (int n = 0; n < 50; ++n) {
      tasks.push_back(near_usual(bath, solver.system(), 2, random));
      tasks.push_back(wild_totals(solver.system(), random));
    }
    Session session(solver);
    Equilibrium answer;
    REQUIRE(session.solve(tasks[0], answer));  // the answer's own storage
    REQUIRE(session.solve_near_last(tasks[2], answer));
    for (const Task& task : tasks) {
      allocations = 0;
      counting = true;
      const Outcome cold = session.solve(task, answer);
      counting = false;
      if (cold) CHECK(allocations == 0);
      allocations = 0;
      counting = true;
      const Outcome warm = session.solve_near_last(task, answer);
      counting = false;
      if (warm) CHECK(allocations == 0);
    }
  });
}

TEST_CASE("a warm start ends where a cold one does", "[property]") {
  each_bath([](const BathSystem& bath, const Solver& solver) {
    std::mt19937 random(11);
    std::uniform_real_distribution<double> factor(0.97, 1.03);
    Session warm(solver), cold(solver);
    Equilibrium along, afresh;
    Task task = near_usual(bath, solver.system(), 1, random);
    for (int step = 0; step < 60; ++step) {
      for (std::size_t i = 1; i < task.component_mol.size(); ++i) task.component_mol[i] *= factor(random);
      if (step % 20 == 10) {  // far away, and what is present changes
        task = near_usual(bath, solver.system(), 2, random);
        task.component_mol.back() = 0;
      }
      task.component_mol[0] = neutral_protons(solver.system(), task.component_mol) + bath.net_protons;
      INFO("step " << step);
      REQUIRE(warm.solve_near_last(task, along));
      REQUIRE(cold.solve(task, afresh));
      if (along.pH() != Approx(afresh.pH()).margin(1e-6).epsilon(0)) {
        // Where a model has left its range it may have several equilibria; neither is then called valid.
        CHECK_FALSE(coverage(solver, along).valid);
        CHECK_FALSE(coverage(solver, afresh).valid);
        continue;
      }
      for (std::size_t j = 0; j < along.molality.size(); ++j)
        CHECK(along.molality[j] == Approx(afresh.molality[j]).margin(1e-250).epsilon(1e-9));
      for (std::size_t k = 0; k < along.solid_mol.size(); ++k)
        CHECK(along.solid_mol[k] == Approx(afresh.solid_mol[k]).margin(1e-9).epsilon(1e-9));
    }
  });
}

TEST_CASE("variants solved side by side are those solved one by one", "[property]") {
  each_bath([](const BathSystem& bath, const Solver& solver) {
    const ChemicalSystem& system = solver.system();
    std::mt19937 random(17);
    std::normal_distribution<double> normal;
    const Task task = near_usual(bath, system, 1, random);
    std::vector<Variant> variants;  // not a multiple of eight, and phases come and go among them
    for (int n = 0; n < 53; ++n) {
      Variant variant{near_usual(bath, system, 1.05, random).component_mol, solver.ln_K()};
      for (double& ln_K : variant.ln_K.species)
        if (ln_K != 0) ln_K += 0.2 * normal(random);
      for (double& ln_K : variant.ln_K.solids) ln_K += 0.5 * normal(random);
      variants.push_back(std::move(variant));
    }
    variants[20].component_mol[1] = -1;  // refused by itself
    Session together(solver), alone(solver);
    std::size_t seen = 0;
    const Outcome done = together.solve_variants(
        task, variants, [&](std::size_t n, const Outcome& solved, const Equilibrium& found) {
          CHECK(n == seen++);
          REQUIRE(static_cast<bool>(solved) == (n != 20));
          if (!solved) return;
          INFO("variant " << n);
          Task one = task;
          one.component_mol = variants[n].component_mol;
          alone.ln_K() = variants[n].ln_K;
          Equilibrium expected;
          REQUIRE(alone.solve(one, expected));
          CHECK(found.residuals.mass_balance < 1e-12);
          if (!expected.stable || !found.stable) return;  // another equilibrium may be near
          for (std::size_t j = 0; j < found.molality.size(); ++j)
            CHECK(found.molality[j] == Approx(expected.molality[j]).margin(1e-250).epsilon(1e-8));
          for (std::size_t k = 0; k < found.solid_mol.size(); ++k)
            CHECK(found.solid_mol[k] == Approx(expected.solid_mol[k]).margin(1e-9).epsilon(1e-8));
        });
    CHECK(done);
    CHECK(seen == variants.size());
  });
}

TEST_CASE("variants that move are followed from their own last answers", "[property]") {
  each_bath([](const BathSystem& bath, const Solver& solver) {
    std::mt19937 random(23);
    Task task = near_usual(bath, solver.system(), 1, random);
    std::vector<Variant> variants;
    for (int n = 0; n < 19; ++n)
      variants.push_back({near_usual(bath, solver.system(), 1.2, random).component_mol, solver.ln_K()});
    Session together(solver), alone(solver);
    for (int round = 0; round < 4; ++round) {
      if (round == 2) variants.erase(variants.begin() + 3);  // the others change places
      for (Variant& variant : variants)
        for (std::size_t i = 1; i < variant.component_mol.size(); ++i)
          variant.component_mol[i] *= 1 + 0.01 * static_cast<double>(i % 3);
      task.water_kg *= 1.001;
      std::size_t seen = 0;
      const Outcome done = together.solve_variants_near_last(
          task, variants, [&](std::size_t n, const Outcome& solved, const Equilibrium& found) {
            INFO("round " << round << ", variant " << n);
            CHECK(n == seen++);
            REQUIRE(solved);
            Task one = task;
            one.component_mol = variants[n].component_mol;
            Equilibrium expected;
            REQUIRE(alone.solve(one, expected));
            CHECK(found.residuals.mass_balance < 1e-12);
            if (!expected.stable || !found.stable) return;  // another equilibrium may be near
            for (std::size_t j = 0; j < found.molality.size(); ++j)
              CHECK(found.molality[j] == Approx(expected.molality[j]).margin(1e-250).epsilon(1e-8));
          });
      CHECK(done);
      CHECK(seen == variants.size());
    }
  });
}

TEST_CASE("a variant may hold another pH than the task", "[property]") {
  const Solver solver = solver_of({"SO4^2-", "Na^+", "H3BO3"});
  Task task = task_of(solver.system(), {{"Na^+", 2}, {"SO4^2-", 1}, {"H3BO3", 0.6}});
  task.pH = HeldPh{4, *solver.system().component("SO4^2-")};
  std::vector<Variant> variants;
  for (int n = 0; n < 11; ++n) variants.push_back({task.component_mol, solver.ln_K(), 3 + 0.3 * n});
  variants.push_back({task.component_mol, solver.ln_K()});  // that of the task
  Session together(solver);
  REQUIRE(together.solve_variants(
      task, variants, [&](std::size_t n, const Outcome& solved, const Equilibrium& found) {
        REQUIRE(solved);
        Task one = task;
        one.pH->pH = variants[n].pH.value_or(4);
        CHECK(found.pH() == Approx(one.pH->pH).margin(1e-9).epsilon(0));
        CHECK(found.held_ph_mol == Approx(solver.solve(one)->held_ph_mol).epsilon(1e-8));
      }));
}

TEST_CASE("a session goes on after a task that cannot be solved", "[failure]") {
  const Solver solver = solver_of({"Na^+", "Cl^-"});
  Session session(solver);
  Equilibrium answer;
  const Task good = task_of(solver.system(), {{"Na^+", 1}, {"Cl^-", 1}});
  REQUIRE(session.solve(good, answer));
  const double pH = answer.pH();
  Task bad = good;
  bad.water_kg = -1;
  CHECK_FALSE(session.solve_near_last(bad, answer));
  bad = task_of(solver.system(), {{"Na^+", 1e6}, {"Cl^-", 1e6}});
  (void)session.solve(bad, answer);
  REQUIRE(session.solve_near_last(good, answer));
  CHECK(answer.pH() == Approx(pH).margin(1e-9).epsilon(0));
}

TEST_CASE("a session solves with its own constants", "[unit]") {
  const Solver solver = solver_of({"CH3COO^-", "Na^+"}, room, ModelKind::davies);
  const Task task = task_of(solver.system(), {{"CH3COO^-", 0.1}, {"Na^+", 0.05}});
  Session session(solver);
  Equilibrium usual, stronger;
  REQUIRE(session.solve(task, usual));
  const auto acid = solver.system().species_index("CH3COOH");
  REQUIRE(acid);
  session.ln_K().species[*acid] += std::log(10.0);
  REQUIRE(session.solve_near_last(task, stronger));
  CHECK(stronger.pH() == Approx(usual.pH() + 1).margin(0.01).epsilon(0));
  CHECK(solved(solver, task).pH() == Approx(usual.pH()).margin(1e-12).epsilon(0));
}
