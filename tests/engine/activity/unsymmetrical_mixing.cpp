// J(x) and E-theta against the integral that defines them.
#include <bathwright/activity/debye_huckel_slope.hpp>
#include <bathwright/activity/unsymmetrical_mixing.hpp>

#include "mixing_terms.hpp"
#include "solutions.hpp"

using namespace bathwright::activity;

namespace {

/// J(x) = (1/x) int_0^inf [1 + q + q^2/2 - exp(q)] y^2 dy, q = -(x/y) exp(-y) (Pitzer 1975). The trapezoidal
/// rule in ln y converges exponentially here: halving the step does not change the 12th digit.
double j_by_quadrature(double x) {
  constexpr double step = 0.01, lowest = -35, highest = 5;
  double sum = 0;
  for (double t = lowest; t <= highest; t += step) {
    const double y = std::exp(t), q = -x / y * std::exp(-y);
    // For small q the bracket is the rest of the series of exp(q); the closed form would cancel.
    const double bracket = std::abs(q) < 0.02 ? -q * q * q / 6 * (1 + q / 4 * (1 + q / 5 * (1 + q / 6)))
                                              : 1 + q + q * q / 2 - std::exp(q);
    sum += bracket * y * y * y;  // dy = y dt
  }
  return sum * step / x;
}

constexpr double arguments[] = {0.01, 0.03, 0.1, 0.3, 0.7, 0.999, 1.001, 2, 5, 10, 20, 50, 100};

}  // namespace

TEST_CASE("J(x) is the integral that defines it", "[reference]") {
  for (const double x : arguments) {
    const double expected = j_by_quadrature(x);
    INFO("x = " << x << ", J = " << expected << ", relative error " << j_function(x).value / expected - 1);
    // The accuracy the header states; below x = 0.1 J itself falls under 0.002 and the error stays below
    // 1e-7.
    CHECK(j_function(x).value == Approx(expected).margin(x < 0.1 ? 1e-7 : 1e-7 * expected).epsilon(0));
  }
}

TEST_CASE("the derivatives of J(x) are those of the integral and of each other", "[reference]") {
  for (const double x : arguments) {
    INFO("x = " << x);
    const double h = 0.01 * x;
    const double first = slope_at_zero([&](double d) { return j_by_quadrature(x + d); }, h);
    CHECK(j_function(x).first == Approx(first).margin(2e-6).epsilon(0));
    if (std::abs(x - 1) < 3 * h) continue;  // the two halves of the series meet at x = 1
    const double second = slope_at_zero([&](double d) { return j_function(x + d).first; }, h);
    CHECK(j_function(x).second == Approx(second).margin(2e-6 * (1 + std::abs(second))).epsilon(0));
  }
}

TEST_CASE("E-theta follows from the integral", "[reference]") {
  const double a_phi = osmotic_slope(room);
  for (const auto& [z, y] : {std::pair{1, 2}, {2, 3}, {1, 3}, {-1, -2}, {-1, -4}})
    for (const double I : {0.01, 0.5, 2.0, 10.0}) {
      const auto J = [&](double zz) { return j_by_quadrature(6 * zz * a_phi * std::sqrt(I)); };
      const double expected = z * y / (4 * I) * (J(z * y) - 0.5 * J(z * z) - 0.5 * J(y * y));
      INFO(z << ", " << y << " at I = " << I);
      const MixingTerm found = unsymmetrical_mixing(z, y, a_phi, I);
      CHECK(found.value == Approx(expected).margin(1e-6 * (1 + std::abs(expected))).epsilon(0));
      const double h = 1e-3 * I;
      const auto at = [&](double d) { return unsymmetrical_mixing(z, y, a_phi, I + d); };
      const double first = slope_at_zero([&](double d) { return at(d).value; }, h);
      const double second = slope_at_zero([&](double d) { return at(d).first; }, h);
      CHECK(found.first == Approx(first).margin(1e-8).epsilon(1e-7));
      CHECK(found.second == Approx(second).margin(1e-8).epsilon(1e-7));
    }
}

TEST_CASE("E-theta is the same for both orders and signs, and zero for equal charges", "[property]") {
  const double a_phi = osmotic_slope(room);
  CHECK(unsymmetrical_mixing(2, 2, a_phi, 1).value == 0);
  const double of_1_2 = unsymmetrical_mixing(1, 2, a_phi, 1).value;
  CHECK(unsymmetrical_mixing(2, 1, a_phi, 1).value == Approx(of_1_2).margin(1e-15).epsilon(0));
  CHECK(unsymmetrical_mixing(-1, -2, a_phi, 1).value == Approx(of_1_2).margin(1e-15).epsilon(0));
}

TEST_CASE("the table of J agrees with its series", "[unit]") {
  for (double ln_x = -12; ln_x < 9; ln_x += 0.0173) {
    const double x = std::exp(ln_x);
    const JFunction series = j_function(x);
    const LogJ table = j_of_log(ln_x);
    INFO("x = " << x);
    // 1e-15: rounding of the series itself, a difference of numbers near 1, where J is below 1e-6.
    CHECK(table.value == Approx(series.value).margin(1e-15).epsilon(1e-9));
    CHECK(table.first == Approx(x * series.first).margin(0).epsilon(1e-7));
    CHECK(table.second == Approx(x * (series.first + x * series.second)).margin(1e-6).epsilon(1e-5));
  }
}

TEST_CASE("all pairs of charges at once are those one by one", "[unit]") {
  const std::vector<int> charges{-4, -2, -1, 0, 1, 2, 3};
  const double a_phi = osmotic_slope(room);
  const MixingTerms terms(charges, a_phi);
  REQUIRE(terms.pairs().size() == 6);
  std::vector<MixingTerm> found(terms.pairs().size());
  for (const double I : {1e-12, 1e-4, 0.3, 8.0}) {
    terms.evaluate(I, found);
    for (std::size_t k = 0; k < found.size(); ++k) {
      const auto [i, j] = terms.pairs()[k];
      const MixingTerm one = unsymmetrical_mixing(charges[i], charges[j], a_phi, I);
      INFO(charges[i] << " with " << charges[j] << " at " << I);
      CHECK(found[k].value == Approx(one.value).margin(0).epsilon(1e-8));
      CHECK(found[k].first == Approx(one.first).margin(0).epsilon(1e-6));
      CHECK(found[k].second == Approx(one.second).margin(0).epsilon(1e-4));
    }
  }
}
