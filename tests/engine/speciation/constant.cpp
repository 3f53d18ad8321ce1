// How constants move with temperature: the law itself, and the built-in constants against published tables.
#include <bathwright/speciation/constant.hpp>
#include <bathwright/speciation/equilibria.hpp>
#include <catch2/catch.hpp>
#include <cmath>
#include <vector>

using namespace bathwright;
using namespace bathwright::speciation;
using activity::Convention;

namespace {

const Equilibria& association() { return Equilibria::built_in(Convention::association); }
const Equilibria& interaction() { return Equilibria::built_in(Convention::interaction); }

const GasData& gas(const std::string& name) {
  for (const GasData& found : association().gases())
    if (found.name == name) return found;
  FAIL("no gas " << name);
  return association().gases().front();
}

const SolidData& solid(const std::string& name) {
  for (const SolidData& found : interaction().solids())
    if (found.name == name) return found;
  FAIL("no solid " << name);
  return interaction().solids().front();
}

struct Published {
  double t_C, value;
};

void check(const std::vector<Published>& table, double tolerance, const auto& log10_K) {
  for (const auto& [t, value] : table) {
    INFO(t << " degC");
    CHECK(log10_K(units::Celsius{t}) == Approx(value).margin(tolerance).epsilon(0));
  }
}

}  // namespace

TEST_CASE("log K moves with temperature as the integrated van 't Hoff law says", "[unit]") {
  // dH = 10 kJ/mol, dCp = 0: 10000/8.314462618/ln 10 (1/298.15 - 1/323.15) = 0.135535
  const Constant constant{1.0, 10, 0, 0, true};
  CHECK(constant.log10_at({25}) == Approx(1).margin(1e-14).epsilon(0));
  CHECK(constant.log10_at({50}) == Approx(1.135535).margin(1e-6).epsilon(0));
  // dCp = -100 J/(mol K) alone: (-100/8.314462618)(ln(323.15/298.15) - 1 + 298.15/323.15)/ln 10 = -0.016488
  const Constant curved{0, 0, -100, 0, true};
  CHECK(curved.log10_at({50}) == Approx(-0.016488).margin(1e-6).epsilon(0));
}

TEST_CASE("a constant is the less certain the further from 25 degC", "[unit]") {
  // u(dH) = 1 kJ/mol to 50 degC: a tenth of the 0.135535 above; u(dCp) = 100 J/(mol K): its 0.016488.
  Constant constant{1.0, 10, 0, 0.02, true};
  CHECK(constant.uncertainty_at({50}) == Approx(0.02).margin(1e-12).epsilon(0));
  constant.u_dH_kJ_per_mol = 1;
  constant.u_dCp_J_per_molK = 100;
  CHECK(constant.uncertainty_at({25}) == Approx(0.02).margin(1e-12).epsilon(0));
  CHECK(constant.uncertainty_at({50}) ==
        Approx(std::hypot(0.02, 0.0135535, 0.016488)).margin(2e-6).epsilon(0));
}

TEST_CASE("what is known of dH and dCp decides the doubt", "[unit]") {
  // A published function; heat capacities of all that takes part; an estimated dH alone.
  const Constant& water = interaction().species().at("OH^-").formation;
  const Constant& salt = solid("KCl").dissolution;
  const Constant* hydroxide = interaction().stated("Ni(OH)2 (freshly precipitated)");
  REQUIRE(hydroxide);
  CHECK(water.u_dH_kJ_per_mol == 0.5);
  CHECK(salt.u_dH_kJ_per_mol == 0.5);
  CHECK(salt.u_dCp_J_per_molK == Approx(20 * std::sqrt(2.0)));
  CHECK(hydroxide->u_dH_kJ_per_mol == 5);
  CHECK(hydroxide->u_dCp_J_per_molK == 231);
}

TEST_CASE("every part of dCp is the second derivative of log K", "[property]") {
  // dH = R T^2 d ln K/dT and dCp = d dH/dT, by differences of 1 K over the range.
  std::vector<Constant> parts(6);
  parts[0].dCp_J_per_molK = -200;
  parts[1].curve.linear = 0.7;
  parts[2].curve.square = 2e-3;
  parts[3].curve.inverse_square = -2e7;
  parts[4].curve.pole = -7.5e5;
  parts[5].curve.born = 1.3e6;
  for (std::size_t k = 0; k < parts.size(); ++k)
    for (double t = 2; t <= 98; t += 12) {
      INFO("part " << k << " at " << t << " degC");
      const auto dH = [&](double at) {
        const double T = units::kelvin({at});
        return 8.314462618 * T * T * std::log(10.) *
               (parts[k].log10_at({at + 0.5}) - parts[k].log10_at({at - 0.5}));
      };
      const double dCp = dH(t + 0.5) - dH(t - 0.5);
      CHECK(dCp == Approx(parts[k].heat_capacity_at({t})).epsilon(2e-3));
    }
}

TEST_CASE("a published function keeps its values when written as dH and dCp", "[unit]") {
  const TemperatureFunction all_terms{-283.971, -0.05, 13323, 102.2, -1.1e6, 1.1e-4};
  const ReactionAt25C at = ReactionAt25C::of(all_terms);
  Constant constant{at.log10_K, at.dH_kJ_per_mol, at.dCp_J_per_molK};
  constant.curve = at.curve;
  for (double t = 0; t <= 100; t += 10)
    CHECK(constant.log10_at({t}) == Approx(all_terms.log10_at({t})).margin(1e-9).epsilon(0));
}

TEST_CASE("constants of added reactions add at every temperature", "[property]") {
  const Constant& water = association().species().at("OH^-").formation;
  const Constant& hydrogensulfate = interaction().species().at("HSO4^-").formation;
  const Constant& salt = solid("NaCl").dissolution;
  Constant sum = water;
  sum.add(hydrogensulfate, 2);
  sum.add(salt, -3);
  for (const double t : {0., 25., 60., 100.})
    CHECK(sum.log10_at({t}) ==
          Approx(water.log10_at({t}) + 2 * hydrogensulfate.log10_at({t}) - 3 * salt.log10_at({t}))
              .margin(1e-10)
              .epsilon(0));
}

// All tables below are recalled, with the digits that were printed; the tolerance is that of the data.

TEST_CASE("the ion product of water is the published one from 0 to 100 degC", "[reference]") {
  // Marshall & Franck 1981, J. Phys. Chem. Ref. Data 10:295, pKw at saturation pressure.
  check({{0, 14.94}, {10, 14.53}, {25, 13.995}, {40, 13.54}, {60, 13.02}, {80, 12.60}, {100, 12.26}}, 0.02,
        [](units::Celsius t) { return -association().species().at("OH^-").formation.log10_at(t); });
}

TEST_CASE("carbonic acid: both steps and the gas", "[reference]") {
  const auto& species = association().species();
  const Constant& pK2 = species.at("HCO3^-").formation;
  Constant pK1 = species.at("CO2").formation;  // over CO3^2-
  pK1.add(pK2, -1);
  // Harned & Davis 1943, J. Am. Chem. Soc. 65:2030; Harned & Scholes 1941, 63:1706.
  check({{0, 6.579}, {10, 6.464}, {20, 6.381}, {25, 6.352}, {30, 6.327}, {40, 6.298}, {50, 6.285}}, 0.005,
        [&](units::Celsius t) { return pK1.log10_at(t); });
  check({{0, 10.625}, {10, 10.490}, {20, 10.377}, {25, 10.329}, {30, 10.290}, {40, 10.220}, {50, 10.172}},
        0.006, [&](units::Celsius t) { return pK2.log10_at(t); });
  // Harned & Davis 1943: 0.0770, 0.0344, 0.0193 mol/(kg atm), here per bar.
  Constant henry = gas("CO2").dissolution;  // over 2 H^+ + CO3^2-
  henry.add(species.at("CO2").formation, 1);
  check({{0, -1.119}, {25, -1.469}, {50, -1.720}}, 0.012,
        [&](units::Celsius t) { return henry.log10_at(t); });
}

TEST_CASE("ammonium, boric and phosphoric acid", "[reference]") {
  const auto& species = association().species();
  // Bates & Pinching 1950, J. Am. Chem. Soc. 72:1393.
  check({{0, 10.081}, {10, 9.731}, {20, 9.400}, {25, 9.245}, {30, 9.093}, {40, 8.805}, {50, 8.539}}, 0.005,
        [&](units::Celsius t) { return species.at("NH4^+").formation.log10_at(t); });
  // Manov, DeLollis & Acree 1944, J. Res. Natl. Bur. Stand. 33:287; the function is that of another study.
  check({{0, 9.508}, {10, 9.380}, {20, 9.280}, {25, 9.237}, {40, 9.132}, {60, 9.036}}, 0.015,
        [&](units::Celsius t) { return -species.at("B(OH)4^-").formation.log10_at(t); });
  Constant pK1 = species.at("H3PO4").formation, pK2 = species.at("H2PO4^-").formation;
  pK1.add(pK2, -1);
  pK2.add(species.at("HPO4^2-").formation, -1);
  // Bates 1951, J. Res. Natl. Bur. Stand. 47:127; Bates & Acree 1945, 34:373.
  check({{0, 2.056}, {25, 2.148}, {50, 2.277}}, 0.005, [&](units::Celsius t) { return pK1.log10_at(t); });
  check({{0, 7.313}, {10, 7.254}, {20, 7.213}, {25, 7.198}, {40, 7.181}, {50, 7.184}}, 0.005,
        [&](units::Celsius t) { return pK2.log10_at(t); });
}

TEST_CASE("salts dissolve with the heat capacity of their ions", "[reference]") {
  // Cp at infinite dilution at 25 degC, J/(mol K), of the equation of state as published with its
  // coefficients, less Cp of the solid: NaCl -85.3 - 50.5, KCl -114.9 - 51.3, Na2SO4 -193.5 - 128.2,
  // K2SO4 -252.8 - 131.5 (all recalled).
  for (const auto& [name, dCp] :
       {std::pair{"NaCl", -135.8}, {"KCl", -166.2}, {"Na2SO4 (thenardite)", -321.7}, {"K2SO4", -384.3}}) {
    INFO(name);
    CHECK(solid(name).dissolution.heat_capacity_at({25}) == Approx(dCp).margin(4).epsilon(0));
  }
}

TEST_CASE("the heat capacity of sodium chloride in water is least negative between 40 and 90 degC",
          "[reference]") {
  // Archer 1992, J. Phys. Chem. Ref. Data 21:793, and others.
  const Constant& salt = solid("NaCl").dissolution;
  CHECK(salt.heat_capacity_at({65}) > salt.heat_capacity_at({40}));
  CHECK(salt.heat_capacity_at({65}) > salt.heat_capacity_at({90}));
}
