// Specific ion interaction theory against its published figures, and what it says about what it does not
// know.
#include <algorithm>
#include <bathwright/activity/debye_huckel_slope.hpp>
#include <numbers>

#include "solutions.hpp"

using namespace bathwright::activity;

namespace {

double log10_gamma(const Model& model, const Numbers& molality, std::size_t i) {
  return coefficients(*model, molality).ln_gamma[i] / std::numbers::ln10;
}

}  // namespace

TEST_CASE("the Debye-Hueckel term of the convention is the tabulated one", "[reference]") {
  // D = A s/(1 + 1.5 s) at 25 degC: 0.1085 at 0.1, 0.2036 at 1, 0.2449 at 3 mol/kg (A = 0.509; NEA TDB, table
  // of Debye-Hueckel factors, from memory; 0.0005 for A = 0.510 here). epsilon(K, Cl) is 0.00, so it stands
  // alone.
  const Model model = model_of(ModelKind::sit, {"K^+", "Cl^-"});
  CHECK(-log10_gamma(model, {0.1, 0.1}, 0) == Approx(0.1092).margin(0.0008).epsilon(0));
  CHECK(-log10_gamma(model, {1, 1}, 0) == Approx(0.2036).margin(0.0006).epsilon(0));
  CHECK(-log10_gamma(model, {3, 3}, 0) == Approx(0.2450).margin(0.0007).epsilon(0));
}

TEST_CASE("nickel in sodium perchlorate worked out by hand", "[reference]") {
  // log10 gamma(Ni^2+) = -4 D + epsilon(Ni, ClO4) m = -4 x 0.2036 + 0.37 x 1 = -0.444; A = 0.510 gives
  // -0.446.
  const Model model = model_of(ModelKind::sit, {"Ni^2+", "Na^+", "ClO4^-"});
  CHECK(log10_gamma(model, {0, 1, 1}, 0) == Approx(-0.4444).margin(0.0025).epsilon(0));
}

TEST_CASE("a coefficient that varies with ionic strength does", "[unit]") {
  // Na-SO4: -0.184 + 0.139 log10 I; at I = 1 the logarithm is zero. m = 1/3 mol/kg.
  const Model model = model_of(ModelKind::sit, {"Na^+", "SO4^2-"});
  const double D = 3 * osmotic_slope(room) / std::numbers::ln10 / 2.5;
  CHECK(log10_gamma(model, {2 / 3., 1 / 3.}, 0) == Approx(-D - 0.184 / 3).margin(1e-12).epsilon(0));
  CHECK(log10_gamma(model, {2 / 3., 1 / 3.}, 1) == Approx(-4 * D - 2 * 0.184 / 3).margin(1e-12).epsilon(0));
}

TEST_CASE("mean activity coefficients of salts without complexes", "[reference]") {
  // tests/reference/mean_activity.csv (Robinson & Stokes 1959); tolerances: what engine/data/README.md
  // claims, 5 % for 1-1 salts to 3 mol/kg, 3 % for 2-1 salts to 1 mol/kg.
  struct Row {
    const char *cation, *anion;
    double molality, nu_anion, gamma, tolerance;
  };
  for (const Row& row : {Row{"Na^+", "Cl^-", 1, 1, 0.657, 0.05}, Row{"K^+", "Cl^-", 1, 1, 0.604, 0.05},
                         Row{"H^+", "Cl^-", 1, 1, 0.809, 0.05}, Row{"Ca^2+", "Cl^-", 1, 2, 0.500, 0.03},
                         Row{"Ca^2+", "Cl^-", 0.5, 2, 0.448, 0.03}}) {
    INFO(row.cation << " " << row.anion << " " << row.molality << " mol/kg");
    const Model model = model_of(ModelKind::sit, {row.cation, row.anion});
    CHECK(std::exp(ln_mean(*model, row.molality, 1, row.nu_anion)) ==
          Approx(row.gamma).margin(row.tolerance * row.gamma).epsilon(0));
  }
}

TEST_CASE("the activity of water follows by Gibbs-Duhem along dilution", "[property]") {
  // d(-ln a_w / M_w) = sum m d ln(m gamma); exact for a solution diluted as a whole, also where epsilon
  // varies.
  const Names names{"Na^+", "Ni^2+", "H^+", "SO4^2-", "Cl^-", "B(OH)4^-", "H3BO3"};
  const Model model = model_of(ModelKind::sit, names);
  std::mt19937 random(3);
  for (int repeat = 0; repeat < 10; ++repeat) {
    const Numbers m = random_molality(names.size(), 0.01, 1, random);
    const auto scaled = [&](double h) {
      Numbers at = m;
      for (double& x : at) x *= 1 + h;
      return coefficients(*model, at);
    };
    double solutes = 0;
    for (std::size_t i = 0; i < m.size(); ++i)
      solutes += m[i] * (1 + slope_at_zero([&](double h) { return scaled(h).ln_gamma[i]; }, 1e-3));
    const double water = slope_at_zero([&](double h) { return scaled(h).ln_water; }, 1e-3);
    CHECK(solutes == Approx(-water / water_kg_per_mol).margin(1e-9).epsilon(1e-9));
  }
}

TEST_CASE("every coefficient that is estimated is noted, with the rule's uncertainty", "[unit]") {
  const Model model = model_of(ModelKind::sit, {"Ni^2+", "Na^+", "SO4^2-", "Cl^-", "HPO3^2-", "NiHPO3"});
  const auto note = [&](std::string_view text) {
    return std::find_if(model->notes().begin(), model->notes().end(),
                        [&](const InteractionNote& one) { return one.text.starts_with(text); });
  };
  REQUIRE(note("Na^+ - HPO3^2-") != model->notes().end());
  CHECK(note("Na^+ - HPO3^2-")->u_ln_gamma == Approx(0.1 * std::numbers::ln10));
  REQUIRE(note("Ni^2+ - SO4^2-") != model->notes().end());
  CHECK(note("Ni^2+ - SO4^2-")->u_ln_gamma == Approx(0.2 * std::numbers::ln10));
  CHECK(note("NiHPO3 in salts of Na^+") != model->notes().end());
  CHECK(note("Na^+ - Cl^-") == model->notes().end());
  CHECK(note("Ni^2+ - Cl^-") == model->notes().end());
  // -0.05 z for an anion with a univalent cation
  const Model pair = model_of(ModelKind::sit, {"Na^+", "HPO3^2-"});
  const double D = 3 * osmotic_slope(room) / std::numbers::ln10 / 2.5;
  CHECK(log10_gamma(pair, {2 / 3., 1 / 3.}, 0) == Approx(-D - 0.1 / 3).margin(1e-12).epsilon(0));
}
