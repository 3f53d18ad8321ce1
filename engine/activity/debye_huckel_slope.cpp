#include <bathwright/activity/debye_huckel_slope.hpp>
#include <bathwright/matter/water.hpp>
#include <cmath>
#include <numbers>

namespace bathwright::activity {
namespace {

// CODATA 2018, SI units.
constexpr double avogadro = 6.02214076e23, elementary_charge = 1.602176634e-19, boltzmann = 1.380649e-23,
                 vacuum_permittivity = 8.8541878128e-12;

}  // namespace

double dielectric_constant(units::Celsius t) {
  constexpr double u1 = 3.4279e2, u2 = -5.0866e-3, u3 = 9.4690e-7, u4 = -2.0525, u5 = 3.1159e3,
                   u6 = -1.8289e2, u7 = -8.0325e3, u8 = 4.2142e6, u9 = 2.1417;
  constexpr double pressure_bar = 1.0;
  const double T = units::kelvin(t);
  const double at_1000_bar = u1 * std::exp(u2 * T + u3 * T * T);
  const double c = u4 + u5 / (u6 + T);
  const double b = u7 + u8 / T + u9 * T;
  return at_1000_bar + c * std::log((b + pressure_bar) / (b + 1000.0));
}

double osmotic_slope(units::Celsius t) {
  using std::numbers::pi;
  const double rho = 1000 * matter::water_density(t).v;
  const double bjerrum_length_m =
      elementary_charge * elementary_charge /
      (4 * pi * vacuum_permittivity * dielectric_constant(t) * boltzmann * units::kelvin(t));
  return std::sqrt(2 * pi * avogadro * rho) * std::pow(bjerrum_length_m, 1.5) / 3;
}

double size_slope_per_pm(units::Celsius t) {
  const double rho = 1000 * matter::water_density(t).v;
  return 1e-12 * std::sqrt(2 * avogadro * elementary_charge * elementary_charge * rho /
                           (vacuum_permittivity * dielectric_constant(t) * boltzmann * units::kelvin(t)));
}

}  // namespace bathwright::activity
