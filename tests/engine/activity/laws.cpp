// What must hold for any composition: derivatives, symmetry, Gibbs-Duhem, independence of order.
#include <algorithm>

#include "solutions.hpp"

using namespace bathwright;
using namespace bathwright::activity;

namespace {

const Names bath{"H^+",  "Na^+",   "Ni^2+", "Ca^2+",    "Al^3+", "K^+", "SO4^2-",
                 "Cl^-", "HSO4^-", "OH^-",  "B(OH)4^-", "H3BO3", "CO2"};

struct Range {
  double low, high;  // mol/kg of each solute
};
constexpr Range ranges[] = {{1e-12, 1e-8}, {1e-7, 1e-3}, {1e-4, 0.1}, {0.01, 2}, {0.5, 10}};
constexpr double temperatures[] = {5, 25, 60};

template <class Visit>
void each_solution(ModelKind kind, const Names& names, unsigned seed, Visit visit) {
  std::mt19937 random(seed);
  for (const double t : temperatures) {
    const Model model = model_of(kind, names, {t});
    for (const Range& range : ranges)
      for (int repeat = 0; repeat < 4; ++repeat) {
        INFO(name(kind) << " at " << t << " degC, " << range.low << " to " << range.high << " mol/kg");
        visit(*model, random_molality(names.size(), range.low, range.high, random), random);
      }
  }
}

}  // namespace

TEST_CASE("the derivatives of ln gamma are those of its values", "[property]") {
  Names names = bath;
  names.push_back("Fe(CN)6^4-");  // outside the Pitzer data with these partners or not: both must hold
  names.push_back("P2O7^4-");
  const std::size_t n = names.size();
  for (const ModelKind kind : all_models)
    each_solution(kind, names, 20240501, [&](const ActivityModel& model, const Numbers& m, std::mt19937&) {
      const Numbers derivative = derivatives(model, m), ln_gamma = coefficients(model, m).ln_gamma;
      double worst = 0;
      for (std::size_t i = 0; i < n; ++i)
        for (std::size_t j = 0; j < n; ++j) {
          const double difference = slope_at_zero(
              [&](double h) {
                Numbers moved = m;
                moved[j] *= 1 + h;
                return coefficients(model, moved).ln_gamma[i];
              },
              1e-3);
          worst = std::max(worst,
                           std::abs(m[j] * derivative[i * n + j] - difference) / (1 + std::abs(ln_gamma[i])));
        }
      CHECK(worst < 1e-8);
    });
}

TEST_CASE("ln gamma of Davies and Pitzer is a gradient: its derivatives are symmetric", "[property]") {
  const std::size_t n = bath.size();
  for (const ModelKind kind : {ModelKind::davies, ModelKind::pitzer})
    each_solution(kind, bath, 7, [&](const ActivityModel& model, const Numbers& m, std::mt19937&) {
      const Numbers derivative = derivatives(model, m);
      double worst = 0, largest = 0;
      for (std::size_t i = 0; i < n; ++i)
        for (std::size_t j = 0; j < n; ++j) {
          worst = std::max(worst, std::abs(derivative[i * n + j] - derivative[j * n + i]));
          largest = std::max(largest, std::abs(derivative[i * n + j]));
        }
      CHECK(worst <= 1e-13 * largest);
    });
}

TEST_CASE("water's activity follows from the coefficients by Gibbs-Duhem", "[property]") {
  // sum m_i d ln a_i = -(1/M_w) d ln a_w along any direction.
  for (const ModelKind kind : {ModelKind::davies, ModelKind::pitzer})
    each_solution(kind, bath, 99, [&](const ActivityModel& model, const Numbers& m, std::mt19937& random) {
      std::normal_distribution<double> normal;
      Numbers direction(m.size());
      for (double& d : direction) d = normal(random);
      const auto moved = [&](double h) {
        Numbers at = m;
        for (std::size_t i = 0; i < m.size(); ++i) at[i] *= 1 + h * direction[i];
        return coefficients(model, at);
      };
      double solutes = 0, scale = 0;
      for (std::size_t i = 0; i < m.size(); ++i) {
        solutes += m[i] * direction[i];
        solutes += m[i] * slope_at_zero([&](double h) { return moved(h).ln_gamma[i]; }, 1e-3);
        scale += m[i];
      }
      const double water = slope_at_zero([&](double h) { return moved(h).ln_water; }, 1e-3);
      CHECK(solutes == Approx(-water / water_kg_per_mol).margin(1e-7 * scale).epsilon(1e-7));
    });
}

TEST_CASE("solutes of one kind have one ln gamma and may stand in for each other", "[property]") {
  // Nothing is published about these complexes: two of a charge cannot be told apart.
  Names names = bath;
  for (const char* complex : {"Ni(cit)^-", "Cu(cit)^-", "Ni(lac)^+", "Fe(lac)^+", "Ni(H(cit))", "Cu(tart)"})
    names.emplace_back(complex);
  for (const ModelKind kind : all_models) {
    INFO(name(kind));
    const Model model = model_of(kind, names);
    CHECK(model->kinds() <= names.size() - 3);
    std::mt19937 random(5);
    Numbers m = random_molality(names.size(), 0.01, 1, random);
    const Coefficients before = coefficients(*model, m);
    for (std::size_t complex = bath.size(); complex < names.size(); complex += 2) {
      CHECK(model->kind_of()[complex] == model->kind_of()[complex + 1]);
      m[complex] += m[complex + 1];
      m[complex + 1] = 0;
    }
    const Coefficients after = coefficients(*model, m);
    CHECK(after.ln_water == Approx(before.ln_water).margin(1e-14).epsilon(1e-14));
    for (std::size_t i = 0; i < names.size(); ++i)
      CHECK(after.ln_gamma[i] == Approx(before.ln_gamma[i]).margin(1e-13).epsilon(0));
  }
}

TEST_CASE("the order of the solutes does not matter", "[property]") {
  std::mt19937 random(11);
  for (const ModelKind kind : all_models)
    for (int repeat = 0; repeat < 10; ++repeat) {
      std::vector<std::size_t> order(bath.size());
      std::iota(order.begin(), order.end(), 0u);
      std::shuffle(order.begin(), order.end(), random);
      const Numbers m = random_molality(bath.size(), 1e-3, 3, random);
      Names shuffled;
      Numbers shuffled_m;
      for (const std::size_t i : order) shuffled.push_back(bath[i]), shuffled_m.push_back(m[i]);
      const Coefficients straight = coefficients(*model_of(kind, bath), m);
      const Coefficients mixed = coefficients(*model_of(kind, shuffled), shuffled_m);
      INFO(name(kind));
      CHECK(mixed.ln_water == Approx(straight.ln_water).margin(1e-12).epsilon(1e-12));
      for (std::size_t k = 0; k < order.size(); ++k)
        CHECK(mixed.ln_gamma[k] == Approx(straight.ln_gamma[order[k]]).margin(1e-11).epsilon(0));
    }
}

TEST_CASE("pure water is ideal in every model", "[unit]") {
  for (const ModelKind kind : all_models) {
    INFO(name(kind));
    const Coefficients water = coefficients(*model_of(kind, bath), Numbers(bath.size(), 0.0));
    CHECK(std::abs(water.ln_water) < 1e-15);
    for (const double ln_gamma : water.ln_gamma) CHECK(std::abs(ln_gamma) < 1e-8);
  }
}
