#include <bathwright/matter/water.hpp>
#include <bathwright/speciation/constant.hpp>
#include <cmath>
#include <numbers>

namespace bathwright::speciation {
namespace {

using std::numbers::ln10;

constexpr double gas_constant = 8.314462618;  // J/(mol K), CODATA 2018
constexpr double reference_K = 298.15;
constexpr double pole_K = 228;  // of the equation of state

/// 1/eps of water at 1 bar by the equation the Born coefficients were derived with (Johnson & Norton 1991,
/// Am. J. Sci. 291:541, recalled; 78.24 at 25 degC). The curvature of that of the activity models differs by
/// a tenth.
double inverse_permittivity(double T) {
  const double r = matter::water_density({T - units::zero_celsius_K}).v, t = T / reference_K;
  const double permittivity = 1 + 14.70333593 / t * r +
                              (212.8462733 / t - 115.4445173 + 19.55210915 * t) * r * r +
                              (-83.30347980 / t + 32.13240048 * t - 6.694098645 * t * t) * r * r * r +
                              (-37.86202045 / (t * t) + 68.87359646 / t - 27.29401652) * r * r * r * r;
  return 1 / permittivity;
}

constexpr double step_K = 0.1;  // of differences of 1/eps

double inverse_permittivity_slope(double T) {
  return (inverse_permittivity(T + step_K) - inverse_permittivity(T - step_K)) / (2 * step_K);
}

/// int f/T dT - (1/T) int f dT from T0 to T, for each of the functions f that make up dCp: what a unit of f
/// adds to R ln K.
double of_constant(double T) { return std::log(T / reference_K) - (T - reference_K) / T; }
double of_linear(double T) { return T - reference_K - (T * T - reference_K * reference_K) / (2 * T); }
double of_square(double T) {
  const double T0 = reference_K;
  return (T * T - T0 * T0) / 2 - (T * T * T - T0 * T0 * T0) / (3 * T);
}
double of_inverse_square(double T) {
  const double T0 = reference_K;
  return (1 / (T0 * T0) - 1 / (T * T)) / 2 - (1 / T0 - 1 / T) / T;
}
double of_pole(double T) {
  const auto entropy = [](double at) {
    return std::log(at / (at - pole_K)) / (pole_K * pole_K) - 1 / (pole_K * (at - pole_K));
  };
  return entropy(T) - entropy(reference_K) - (1 / (reference_K - pole_K) - 1 / (T - pole_K)) / T;
}
/// T X is -T d2(1/eps)/dT2: the Gibbs energy is 1/eps less its tangent at T0.
double of_born(double T) {
  static const double at_reference = inverse_permittivity(reference_K),
                      slope = inverse_permittivity_slope(reference_K);
  return -(inverse_permittivity(T) - at_reference - slope * (T - reference_K)) / T;
}

}  // namespace

void HeatCapacityCurve::add(const HeatCapacityCurve& other, double times) {
  linear += times * other.linear;
  square += times * other.square;
  inverse_square += times * other.inverse_square;
  pole += times * other.pole;
  born += times * other.born;
}

double TemperatureFunction::log10_at(units::Celsius t) const {
  const double T = units::kelvin(t);
  return A + B * T + C / T + D * std::log10(T) + E / (T * T) + F * T * T;
}

ReactionAt25C ReactionAt25C::of(const TemperatureFunction& f) {
  // dH = R T^2 d ln K/dT, dCp = d dH/dT; D log10 T is D ln T / ln 10.
  const double T = reference_K, R = gas_constant;
  ReactionAt25C at;
  at.log10_K = f.log10_at({reference_K - units::zero_celsius_K});
  at.dH_kJ_per_mol = R * (ln10 * (f.B * T * T - f.C - 2 * f.E / T + 2 * f.F * T * T * T) + f.D * T) / 1000;
  at.dCp_J_per_molK = R * f.D;
  at.curve.linear = 2 * R * ln10 * f.B;
  at.curve.square = 6 * R * ln10 * f.F;
  at.curve.inverse_square = 2 * R * ln10 * f.E;
  return at;
}

double Constant::log10_at(units::Celsius t) const {
  const double T = units::kelvin(t);
  double R_ln_K = -1000 * dH_kJ_per_mol * (1 / T - 1 / reference_K);
  const auto add = [&](double amount, double (*function)(double)) {
    if (amount != 0) R_ln_K += amount * function(T);
  };
  add(dCp_J_per_molK, of_constant);
  add(curve.linear, of_linear);
  add(curve.square, of_square);
  add(curve.inverse_square, of_inverse_square);
  add(curve.pole, of_pole);
  add(curve.born, of_born);
  return log10_K + R_ln_K / gas_constant / ln10;
}

double Constant::uncertainty_at(units::Celsius t) const {
  const double T = units::kelvin(t), to_log10 = 1 / gas_constant / ln10;
  return std::hypot(uncertainty, 1000 * u_dH_kJ_per_mol * (1 / T - 1 / reference_K) * to_log10,
                    u_dCp_J_per_molK * of_constant(T) * to_log10);
}

double Constant::heat_capacity_at(units::Celsius t) const {
  const double T = units::kelvin(t);
  const double X =
      -(inverse_permittivity_slope(T + step_K) - inverse_permittivity_slope(T - step_K)) / (2 * step_K);
  return dCp_J_per_molK + curve.linear * T + curve.square * T * T + curve.inverse_square / (T * T) +
         curve.pole / ((T - pole_K) * (T - pole_K)) + curve.born * T * X;
}

void Constant::add(const Constant& other, double times) {
  log10_K += times * other.log10_K;
  dH_kJ_per_mol += times * other.dH_kJ_per_mol;
  dCp_J_per_molK += times * other.dCp_J_per_molK;
  uncertainty = std::hypot(uncertainty, times * other.uncertainty);
  u_dH_kJ_per_mol = std::hypot(u_dH_kJ_per_mol, times * other.u_dH_kJ_per_mol);
  u_dCp_J_per_molK = std::hypot(u_dCp_J_per_molK, times * other.u_dCp_J_per_molK);
  has_dH = has_dH && other.has_dH;
  curve.add(other.curve, times);
}

}  // namespace bathwright::speciation
