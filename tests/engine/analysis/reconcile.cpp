#include <cmath>

#include "chi_square.hpp"
#include "watts_tank.hpp"
#include "weighing.hpp"

using namespace watts;
using analysis::Carried;

namespace {

/// A book that knows the tank of the morning to `u_rel`, each component by itself, and its volume to 3 %.
analysis::Book book_of(const analysis::Analysis& a, double u_rel) {
  Carried carried;
  carried.component_mol = a.state.component_mol;
  carried.volume_L = a.volume.v;
  for (std::size_t i = 0; i < a.state.component_mol.size(); ++i) {
    std::vector<double> mol(a.state.component_mol.size(), 0);
    mol[i] = u_rel * a.state.component_mol[i];
    carried.terms.push_back({"doubt of " + chemistry().components()[i], std::nullopt, std::move(mol)});
  }
  carried.terms.push_back(
      {"water", std::nullopt, std::vector<double>(a.state.component_mol.size(), 0), 0.03 * a.volume.v});
  return {{}, a.pH, "log entry 1", std::move(carried)};
}

const analysis::LevelFound& reconciled(const analysis::Analysis& a, const std::string& quantity) {
  const auto at = std::find_if(a.reconciled.begin(), a.reconciled.end(),
                               [&](const auto& r) { return r.quantity == quantity; });
  REQUIRE(at != a.reconciled.end());
  return *at;
}

double covariance(const analysis::Analysis& a, const std::string& one, const std::string& two) {
  const auto& names = chemistry().components();
  const auto at = [&](const std::string& name) {
    return static_cast<std::size_t>(std::find(names.begin(), names.end(), name) - names.begin());
  };
  return a.covariance[at(one) * (names.size() + 1) + at(two)];  // the volume is the last
}

}  // namespace

TEST_CASE("tails of chi-square and of a normal number", "[reference]") {
  // Abramowitz & Stegun, table 26.8: the value that a share of 0.05, 0.01 and 0.001 exceeds.
  CHECK(analysis::chi_square_tail(3.84146, 1) == Approx(0.05).margin(1e-6).epsilon(0));
  CHECK(analysis::chi_square_tail(5.99146, 2) == Approx(0.05).margin(1e-6).epsilon(0));
  CHECK(analysis::chi_square_tail(11.3449, 3) == Approx(0.01).margin(1e-6).epsilon(0));
  CHECK(analysis::chi_square_tail(18.467, 4) == Approx(0.001).margin(1e-6).epsilon(0));
  CHECK(analysis::chi_square_tail(20.515, 5) == Approx(0.001).margin(1e-6).epsilon(0));
  CHECK(analysis::chi_square_tail(7, 0) == 1);
  CHECK(analysis::normal_tails(-1.959964) == Approx(0.05).margin(1e-6).epsilon(0));
}

TEST_CASE("one amount in a known volume: the mean weighted by the squares of the uncertainties",
          "[reference]") {
  // Before: 100 +/- 3 mol; read: 104 +/- 4 in 1 L at 1 g/mol. (100/9 + 104/16)/(1/9 + 1/16) = 101.44, u 2.4,
  // chi-square 4^2/(9 + 16) = 0.64.
  analysis::Weighing weighing;
  weighing.before.mean = Eigen::Vector2d(100, 1);
  weighing.before.spread = Eigen::Vector2d(3, 0);
  weighing.readings = {{analysis::Reading::Of::level, 104, 4, 0, Eigen::VectorXd::Ones(1)}};
  const auto weighed = analysis::weigh(weighing);
  CHECK(weighed.state(0) == Approx(101.44));
  CHECK(std::sqrt(weighed.covariance(0, 0)) == Approx(2.4));
  CHECK(weighed.chi_square == Approx(0.64));
  CHECK(weighed.studentised(Eigen::VectorXd::Ones(1)) == Approx(0.8));
}

TEST_CASE("without a book the reconciled levels are the results", "[property]") {
  const auto a = evaluated(morning());
  CHECK(a.misfit.degrees_of_freedom == 0);
  CHECK_FALSE(a.misfit.alarm);
  REQUIRE(a.reconciled.size() == a.results.size());
  for (std::size_t i = 0; i < a.results.size(); ++i) CHECK(a.reconciled[i].value == a.results[i].value);
}

TEST_CASE("the covariance of the amounts holds sample and volume, and no charge", "[property]") {
  const auto a = evaluated(morning());
  const double n = level(a, "Ni^2+").value.v / 58.693 * a.volume.v;
  const double u_rel = std::hypot(level(a, "Ni^2+").standard_uncertainty.v / level(a, "Ni^2+").value.v,
                                  a.u_volume_L / a.volume.v);
  CHECK(std::sqrt(covariance(a, "Ni^2+", "Ni^2+")) == Approx(n * u_rel).epsilon(0.001));
  // Two titrations share the sample (0.5 %) and the volume.
  const double cl = level(a, "Cl^-").value.v / 35.45 * a.volume.v;
  const double shared = 0.005 * 0.005 + std::pow(a.u_volume_L / a.volume.v, 2);
  CHECK(covariance(a, "Ni^2+", "Cl^-") == Approx(n * cl * shared).epsilon(0.002));
  const double charge = 4 * covariance(a, "Ni^2+", "Ni^2+") + covariance(a, "Cl^-", "Cl^-") +
                        4 * covariance(a, "SO4^2-", "SO4^2-") - 4 * covariance(a, "Ni^2+", "Cl^-") -
                        8 * covariance(a, "Ni^2+", "SO4^2-") + 4 * covariance(a, "Cl^-", "SO4^2-");
  CHECK(charge == Approx(0).margin(1e-6 * covariance(a, "Ni^2+", "Ni^2+")));
}

TEST_CASE("a book that agrees makes the levels surer and moves none", "[property]") {
  const auto alone = evaluated(morning());
  const auto both = evaluated(morning(), book_of(alone, 0.01));
  CHECK(both.misfit.degrees_of_freedom == 4);  // three titrations and the level
  CHECK(both.misfit.chi_square == Approx(0).margin(1e-9));
  CHECK_FALSE(both.misfit.alarm);
  CHECK(reconciled(both, "Ni^2+").value.v == Approx(level(alone, "Ni^2+").value.v).epsilon(1e-6));
  CHECK(reconciled(both, "Ni^2+").standard_uncertainty < level(alone, "Ni^2+").standard_uncertainty);
}

TEST_CASE("a sample of 5 mL written down as 10 is named", "[unit]") {
  const auto book = book_of(evaluated(morning()), 0.01);
  auto readings = morning();
  readings.titrations[1].sample = {4e-3};  // chloride comes out at half
  const auto a = evaluated(readings, book);
  REQUIRE(a.misfit.alarm);
  CHECK(a.misfit.one_is_clear);
  REQUIRE_FALSE(a.misfit.explanations.empty());
  CHECK(a.misfit.explanations[0].culprit == "Cl^-");
  CHECK(a.misfit.explanations[0].mistake == analysis::Mistake::sample_size);
  REQUIRE(a.suspects.size() == 1);
  CHECK(a.suspects[0].what == "Cl^-");
  CHECK_THAT(a.suspects[0].reason, Catch::Contains("half the sample"));
}

TEST_CASE("two burette readings swapped are named", "[unit]") {
  const auto book = book_of(evaluated(morning()), 0.01);
  auto readings = morning();
  std::swap(readings.titrations[1].burette, readings.titrations[2].burette);
  const auto a = evaluated(readings, book);
  REQUIRE(a.misfit.alarm);
  REQUIRE_FALSE(a.misfit.explanations.empty());
  CHECK(a.misfit.explanations[0].mistake == analysis::Mistake::swapped);
  CHECK(a.misfit.one_is_clear);
}

TEST_CASE("a level read too low is told from a wrong titration", "[unit]") {
  const auto book = book_of(evaluated(morning()), 0.003);
  auto readings = morning();
  readings.level_below_mark.reset();
  readings.volume = units::Litres{2340 * 0.9};
  const auto a = evaluated(readings, book);
  REQUIRE(a.misfit.alarm);
  REQUIRE_FALSE(a.misfit.explanations.empty());
  CHECK(a.misfit.explanations[0].culprit == "volume");
}

TEST_CASE("what was logged but not made is named by its entry", "[unit]") {
  auto book = book_of(evaluated(morning()), 0.005);
  std::vector<double> brought(chemistry().components().size(), 0);
  brought[static_cast<std::size_t>(
      std::find(chemistry().components().begin(), chemistry().components().end(), "H3BO3") -
      chemistry().components().begin())] = 400;  // mol: 25 kg
  for (std::size_t i = 0; i < brought.size(); ++i) book.carried->component_mol[i] += brought[i];
  book.carried->additions = {{"25 kg boric-acid", 5, "boric-acid", 25, brought, 0}};
  const auto a = evaluated(morning(), book);
  REQUIRE(a.misfit.alarm);
  REQUIRE_FALSE(a.misfit.explanations.empty());
  CHECK(a.misfit.explanations[0].mistake == analysis::Mistake::not_made);
  CHECK(a.misfit.explanations[0].entry == 5);
}

TEST_CASE("the last result copied is a suspect", "[unit]") {
  const auto last = evaluated(morning());
  auto book = book_of(last, 0.01);
  for (const char* id : {"Ni^2+", "Cl^-", "H3BO3"}) book.carried->found_last[id] = level(last, id).value.v;
  const auto a = evaluated(morning(), book);
  REQUIRE(a.suspects.size() == 1);
  CHECK(a.suspects[0].what == "readings");
  auto readings = morning();
  readings.titrations[0].burette.v += 5e-5;
  CHECK(evaluated(readings, book).suspects.empty());
}
