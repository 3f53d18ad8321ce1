#include <array>
#include <bathwright/activity/unsymmetrical_mixing.hpp>
#include <bathwright/data/tables.hpp>
#include <cmath>

namespace bathwright::activity {
namespace {

constexpr std::size_t terms = 21;
struct Series {
  std::array<double, terms> small, large;  // for x <= 1 and x > 1
};

const Series& series() {
  static const Series loaded = [] {
    Series s{};
    const data::CsvTable table = data::built_in_table("activity/j_function.csv", {"k", "a_small", "a_large"});
    for (std::size_t row = 0; row < table.size(); ++row) {
      const auto k = static_cast<std::size_t>(table[row].number("k"));
      s.small.at(k) = table[row].number("a_small");
      s.large.at(k) = table[row].number("a_large");
    }
    return s;
  }();
  return loaded;
}

}  // namespace

JFunction j_function(double x) {
  // z maps x onto [-2, 2]; z1, z2 are its derivatives. b, d, e: Clenshaw sums of the series and its
  // derivatives.
  const bool small = x <= 1;
  const double power = small ? 4 * std::pow(x, 0.2) : (40.0 / 9.0) * std::pow(x, -0.1);
  const double z = small ? power - 2 : power - 22.0 / 9.0;
  const double exponent = small ? 0.2 : -0.1;
  const double z1 = exponent * power / x;
  const double z2 = (exponent - 1) * z1 / x;
  const auto& a = small ? series().small : series().large;
  double b0 = 0, b1 = 0, b2 = 0, d0 = 0, d1 = 0, d2 = 0, e0 = 0, e1 = 0, e2 = 0;
  for (std::size_t k = terms; k-- > 0;) {
    b2 = b1, b1 = b0, d2 = d1, d1 = d0, e2 = e1, e1 = e0;
    b0 = z * b1 - b2 + a[k];
    d0 = b1 + z * d1 - d2;
    e0 = 2 * d1 + z * e1 - e2;
  }
  return {x / 4 - 1 + (b0 - b2) / 2, 0.25 + z1 * (d0 - d2) / 2, (z2 * (d0 - d2) + z1 * z1 * (e0 - e2)) / 2};
}

MixingTerm unsymmetrical_mixing(int charge_i, int charge_j, double a_phi, double ionic_strength) {
  if (charge_i == charge_j) return {0, 0, 0};
  const double I = ionic_strength, zz = charge_i * charge_j;
  const auto weigh = [&](double charge_product, double weight, double& j, double& s1, double& s2) {
    const double x = 6 * charge_product * a_phi * std::sqrt(I);
    const JFunction J = j_function(x);
    j += weight * J.value;
    s1 += weight * x * J.first;
    s2 += weight * x * (J.first + x * J.second);
  };
  double j = 0, s1 = 0, s2 = 0;
  weigh(zz, 1, j, s1, s2);
  weigh(charge_i * charge_i, -0.5, j, s1, s2);
  weigh(charge_j * charge_j, -0.5, j, s1, s2);
  // x is proportional to sqrt(I), so d/dI of any function of x is x d/dx / (2 I).
  const double value = zz / (4 * I) * j;
  const double first = -value / I + zz / (8 * I * I) * s1;
  const double second = -first / I + value / (I * I) - zz / (4 * I * I * I) * s1 + zz / (16 * I * I * I) * s2;
  return {value, first, second};
}

}  // namespace bathwright::activity
