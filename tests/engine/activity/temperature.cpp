// Pitzer parameters from 0 to 100 degC: one value for each temperature, whatever set it comes from.
#include <cmath>

#include "solutions.hpp"

using namespace bathwright;
using namespace bathwright::activity;

namespace {

struct Salt {
  const char *cation, *anion;
  double molality;  ///< within the fits
};

constexpr Salt salts[] = {
    {"Na^+", "Cl^-", 3},      {"K^+", "Cl^-", 3},     {"H^+", "Cl^-", 2},       {"NH4^+", "Cl^-", 3},
    {"Na^+", "SO4^2-", 1},    {"K^+", "SO4^2-", 0.5}, {"NH4^+", "SO4^2-", 2},   {"Na^+", "OH^-", 3},
    {"K^+", "CO3^2-", 2},     {"Na^+", "CO3^2-", 1},  {"Mg^2+", "Cl^-", 2},     {"Ca^2+", "Cl^-", 2},
    {"Mg^2+", "SO4^2-", 2},   {"Ni^2+", "Cl^-", 2},   {"Co^2+", "Cl^-", 2},     {"Mn^2+", "Cl^-", 2},
    {"Fe^2+", "Cl^-", 2},     {"Ni^2+", "SO4^2-", 2}, {"Cu^2+", "SO4^2-", 1.4}, {"Zn^2+", "SO4^2-", 2},
    {"Fe^2+", "SO4^2-", 1.9}, {"Mn^2+", "SO4^2-", 2}, {"Co^2+", "SO4^2-", 2},   {"Cd^2+", "SO4^2-", 2},
    {"H^+", "HSO4^-", 2},     {"H^+", "SO4^2-", 0.5}, {"Zn^2+", "Cl^-", 1},     {"Cu^2+", "Cl^-", 2},
};

Numbers ln_gamma(const Salt& salt, double t_C) {
  const Model model = model_of(ModelKind::pitzer, {salt.cation, salt.anion}, {t_C});
  const int zc = charge_in_name(salt.cation), za = -charge_in_name(salt.anion);
  const double both = zc == za ? 1.0 : zc * za;
  return coefficients(*model, {salt.molality * both / zc, salt.molality * both / za}).ln_gamma;
}

}  // namespace

TEST_CASE("activity coefficients of the main salts have no jump between 0 and 100 degC", "[property]") {
  // A jump of ln gamma is told from a slope by halving the step: across a jump the change stays.
  constexpr double step_K = 0.5, finest_K = step_K / 64;
  for (const Salt& salt : salts) {
    for (double t = 0; t < 100; t += step_K) {
      const Numbers a = ln_gamma(salt, t), b = ln_gamma(salt, t + step_K);
      const double change = std::max(std::abs(b[0] - a[0]), std::abs(b[1] - a[1]));
      INFO(salt.cation << " " << salt.anion << " at " << t << " degC");
      CHECK(change < 0.02);  // 4 % in gamma for 1 K: no salt moves faster
    }
    for (const double corner : {5.0, 10.0, 25.0, 50.0, 75.0}) {
      INFO(salt.cation << " " << salt.anion << " at " << corner << " degC");
      const Numbers before = ln_gamma(salt, corner - finest_K), after = ln_gamma(salt, corner + finest_K);
      for (int ion : {0, 1}) CHECK(after[ion] == Approx(before[ion]).margin(2 * 0.04 * finest_K).epsilon(0));
    }
  }
}

TEST_CASE("mean activity coefficients at 50 degC against published ones", "[reference]") {
  // Sources and tolerances: tests/reference/mean_activity.csv, rows MA-0181 and MA-0165.
  CHECK(std::exp(ln_gamma({"Na^+", "Cl^-", 2}, 50)[0]) == Approx(0.675).margin(0.0081).epsilon(0));
  const Numbers sulfate = ln_gamma({"Na^+", "SO4^2-", 1}, 50);
  CHECK(std::exp((2 * sulfate[0] + sulfate[1]) / 3) == Approx(0.2078).margin(0.0073).epsilon(0));
}

TEST_CASE("at 25 degC the temperature tables change nothing", "[unit]") {
  // beta0 0.04995, beta1 0.7793, C_phi 0 of set main, K2SO4 at 0.5 mol/kg (Pitzer & Mayorga 1973); the table
  // of set warm has 0.0555, 0.7964, -0.0188 there. By hand as in pitzer.cpp:
  //   ln gamma(MX) = |z z| f + m (2 nu nu / nu) B^gamma,  B^gamma = 2 beta0 + beta1 (g(2 s) + e^(-2 s))
  const double s = std::sqrt(1.5), a_phi = 0.39145;
  const double f = -a_phi * (s / (1 + 1.2 * s) + 2 / 1.2 * std::log(1 + 1.2 * s));
  const double decay = std::exp(-2 * s), g = 2 * (1 - (1 + 2 * s) * decay) / (4 * 1.5);
  const double expected = 2 * f + 0.5 * 2 * 2 * 1 / 3.0 * (2 * 0.04995 + 0.7793 * (g + decay));
  const Numbers found = ln_gamma({"K^+", "SO4^2-", 0.5}, 25);
  CHECK((2 * found[0] + found[1]) / 3 == Approx(expected).margin(2e-5).epsilon(0));
}
