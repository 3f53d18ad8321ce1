#include <cmath>
#include <random>

#include "watts_tank.hpp"

using namespace watts;
using analysis::Origin;

TEST_CASE("the morning analysis of tank N-07", "[reference]") {
  // Hand calculation, within 0.2 %:
  //   volume                2400 - 200 * 0.3 = 2340 L
  //   nickel                23.8 * 0.1012 * 58.693/2 = 70.6828 g/L
  //   chloride              8.1 * 0.0998 * 35.450/2 = 14.3285
  //   nickel chloride       14.3285 * 237.683/(2 * 35.450) = 48.0345, holding 48.0345 * 58.693/237.683
  //   = 11.8616 Ni nickel sulfate        (70.6828 - 11.8616) * 262.839/58.693 = 263.413 boric
  //   acid            11.9 * 0.1005 * 61.831/2 = 36.9734
  const auto a = evaluated(morning());
  CHECK(a.volume.v == Approx(2340).epsilon(1e-12));
  CHECK(a.volume_from == "2400 L at the mark, 0.3 dm low on 200 dm2");
  CHECK(level(a, "Ni^2+").value.v == Approx(70.6828).epsilon(0.002));
  CHECK(level(a, "Cl^-").value.v == Approx(14.3285).epsilon(0.002));
  CHECK(level(a, "NiCl2.6H2O").value.v == Approx(48.0345).epsilon(0.002));
  CHECK(level(a, "NiCl2.6H2O").value.v * 58.693 / 237.683 == Approx(11.8616).epsilon(0.002));
  CHECK(level(a, "NiSO4.6H2O").value.v == Approx(263.413).epsilon(0.002));
  CHECK(level(a, "H3BO3").value.v == Approx(36.9734).epsilon(0.002));
  // 2 u of nickel 0.925324 g/L, within 1 %
  CHECK(2 * level(a, "Ni^2+").standard_uncertainty.v == Approx(0.925324).epsilon(0.01));
  CHECK(level(a, "Ni^2+").how == "23.80 mL of 0.1012 mol/L EDTA on 2.000 mL");
  for (const auto* titrated : {"Ni^2+", "Cl^-", "H3BO3", "NiSO4.6H2O", "NiCl2.6H2O"})
    CHECK(level(a, titrated).from == Origin::titration);
  CHECK(a.suspects.empty());
}

TEST_CASE("the state holds the amounts found, in the volume found, without charge", "[property]") {
  const auto a = evaluated(morning());
  const auto& components = chemistry().components();
  double charge = 0;
  for (std::size_t i = 0; i < components.size(); ++i)
    charge += a.state.component_mol[i] * matter::Formula::parse(components[i])->charge();
  CHECK(std::abs(charge) < 1e-6);
  CHECK(chemistry().volume_L(a.state) == Approx(a.volume.v).epsilon(1e-9));
  for (const auto& q : bath_type().quantities) {
    INFO(q.id);
    CHECK(chemistry().quantity_g_per_L(q, a.state) ==
          Approx(level(a, q.id).value.v).epsilon(1e-9).margin(1e-9));
  }
  CHECK(a.density_predicted.v == chemistry().density(a.state).v);
}

TEST_CASE("sulfate comes from the charges, with their uncertainty", "[unit]") {
  // Hand calculation: SO4 = Ni - Cl/2 in mol, protons of pH 4 apart: 96.056 * (1.20428 - 0.40419/2) = 96.267
  // g/L; u^2 = (96.056/58.693 u_Ni)^2 + (96.056/(2 * 35.450) u_Cl)^2
  const auto a = evaluated(morning());
  const auto& sulfate = level(a, "SO4^2-");
  CHECK(sulfate.from == Origin::electroneutrality);
  CHECK(sulfate.value.v == Approx(96.267).margin(0.1).epsilon(0));
  CHECK(sulfate.standard_uncertainty.v ==
        Approx(std::hypot(96.056 / 58.693 * level(a, "Ni^2+").standard_uncertainty.v,
                          96.056 / 70.9 * level(a, "Cl^-").standard_uncertainty.v))
            .epsilon(0.001));
  CHECK(a.results.back().quantity == "SO4^2-");
}

TEST_CASE("uncertainty of nickel sulfate agrees with Monte Carlo", "[property]") {
  constexpr unsigned seed = 20260303;
  INFO("seed " << seed);
  std::mt19937_64 random(seed);
  std::normal_distribution<double> normal;
  const auto a = evaluated(morning());
  const auto &nickel_level = level(a, "Ni^2+"), &chloride_level = level(a, "Cl^-");
  constexpr int samples = 20000;
  double sum = 0, sum_of_squares = 0;
  for (int i = 0; i < samples; ++i) {
    const double ni = (nickel_level.value.v + nickel_level.standard_uncertainty.v * normal(random)) / 58.693;
    const double cl =
        (chloride_level.value.v + chloride_level.standard_uncertainty.v * normal(random)) / 35.450;
    const double salt = 262.839 * (ni - cl / 2);
    sum += salt;
    sum_of_squares += salt * salt;
  }
  const double mean = sum / samples;
  CHECK(level(a, "NiSO4.6H2O").standard_uncertainty.v ==
        Approx(std::sqrt(sum_of_squares / samples - mean * mean)).epsilon(0.03));
}

TEST_CASE("a salt may stand for the ion: the same bath, the same levels", "[unit]") {
  // Nickel from NiSO4.6H2O and chloride; its uncertainty goes back to the salt's own, not to a sum of three.
  auto readings = morning();
  readings.titrations = {boric_acid()};
  readings.found = {found("NiSO4.6H2O", 263.413, 2.0), found("NiCl2.6H2O", 48.0345, 0.5)};
  const auto a = evaluated(readings);
  CHECK(level(a, "Ni^2+").value.v == Approx(70.6828).epsilon(0.0005));
  CHECK(level(a, "Cl^-").value.v == Approx(14.3285).epsilon(0.0005));
  CHECK(level(a, "NiSO4.6H2O").standard_uncertainty.v == Approx(2.0).epsilon(1e-9));
  CHECK(level(a, "Ni^2+").standard_uncertainty.v ==
        Approx(std::hypot(2.0 * 58.693 / 262.839, 0.5 * 58.693 / 237.683)).epsilon(0.001));
  CHECK(level(a, "Ni^2+").from == Origin::found);
}

TEST_CASE("two results of one quantity: their mean, and a suspect where they differ", "[unit]") {
  auto readings = morning();
  readings.titrations.push_back(titration("Ni^2+", "edta-nickel", 2, 0.1012, 24.0));
  auto a = evaluated(readings);
  CHECK(level(a, "Ni^2+").value.v == Approx(70.6828 * 23.9 / 23.8).epsilon(0.0005));
  CHECK(a.suspects.empty());
  const double close = level(a, "Ni^2+").standard_uncertainty.v;
  CHECK(close == Approx(0.00654 * 70.98).epsilon(0.01));  // does not shrink: titrant and sample are shared

  readings.titrations.back().burette = {26e-3};
  a = evaluated(readings);
  REQUIRE(a.suspects.size() == 1);
  CHECK(a.suspects[0].what == "Ni^2+");
  CHECK_FALSE(a.suspects[0].try_this.empty());
  CHECK(level(a, "Ni^2+").standard_uncertainty.v > 5 * close);  // their scatter, 4.6 g/L
}

TEST_CASE("a salt beside its ion is compared and not used", "[unit]") {
  auto readings = morning();
  readings.found = {found("NiCl2.6H2O", 48.5, 0.5)};
  auto a = evaluated(readings);
  CHECK(a.suspects.empty());
  CHECK(says(a.notes, "NiCl2.6H2O found as 48.50 g/L agrees with the 48.0"));
  CHECK(level(a, "Cl^-").value.v == Approx(14.3285).epsilon(0.002));

  readings.found = {found("NiCl2.6H2O", 60, 0.5)};
  a = evaluated(readings);
  REQUIRE(a.suspects.size() == 1);
  CHECK(a.suspects[0].what == "NiCl2.6H2O");
}

TEST_CASE("a sulfate result is compared with electroneutrality", "[unit]") {
  auto readings = morning();
  readings.found = {found("SO4^2-", 97, 1)};
  CHECK(evaluated(readings).suspects.empty());
  readings.found = {found("SO4^2-", 120, 1)};
  const auto a = evaluated(readings);
  REQUIRE(a.suspects.size() == 1);
  CHECK(a.suspects[0].what == "SO4^2-");
  CHECK(level(a, "SO4^2-").from == Origin::electroneutrality);
}

TEST_CASE("found concentrations come in any unit", "[unit]") {
  auto readings = morning();
  readings.titrations = {nickel(), boric_acid()};
  readings.found = {
      {"Cl^-", {0.4, units::ConcentrationUnit::moles_per_litre}, std::nullopt, "morning.toml:20"}};
  auto a = evaluated(readings);
  CHECK(level(a, "Cl^-").value.v == Approx(0.4 * 35.45).epsilon(1e-9));
  CHECK(level(a, "Cl^-").standard_uncertainty.v == Approx(0.01 * 0.4 * 35.45).epsilon(1e-9));
  CHECK(says(a.notes, "Cl^- was found without an uncertainty: 1 % taken"));

  readings.density = units::KilogramsPerLitre{1.19};
  readings.found[0].value = {1.2, units::ConcentrationUnit::percent_by_mass};
  CHECK(level(evaluated(readings), "Cl^-").value.v == Approx(12 * 1.19).epsilon(1e-9));
}

TEST_CASE("what nobody titrated comes from the book", "[unit]") {
  const analysis::Book book{{{"H3BO3", 40}, {"Na^+", 2}}, 4.0, "log entry 12"};
  auto readings = morning();
  readings.titrations = {nickel(), chloride()};
  readings.pH.reset();
  const auto a = evaluated(readings, book);
  CHECK(level(a, "H3BO3").value.v == Approx(40));
  CHECK(level(a, "H3BO3").standard_uncertainty.v == Approx(1.2));
  CHECK(level(a, "H3BO3").from == Origin::book);
  CHECK(level(a, "H3BO3").how == "log entry 12");
  CHECK(level(a, "Na^+").value.v == Approx(2));
  CHECK(a.pH == 4.0);
  CHECK(says(a.notes, "no pH given: 4.000 taken from log entry 12"));
  CHECK(says(a.notes, "H3BO3 was not analysed: 40.00 g/L taken from log entry 12, with 3 % uncertainty"));
}

TEST_CASE("a salt found today outranks its metal in the book", "[unit]") {
  const analysis::Book book{{{"Ni^2+", 60}, {"Cl^-", 14}, {"H3BO3", 40}}, 4.0, "log entry 12"};
  auto readings = morning();
  readings.titrations.clear();
  readings.found = {found("NiSO4.6H2O", 270, 2)};
  const auto a = evaluated(readings, book);
  CHECK(level(a, "NiSO4.6H2O").value.v == Approx(270));
  CHECK(level(a, "Ni^2+").value.v == Approx(270 * 58.693 / 262.839 + 14 * 58.693 / 70.9).epsilon(0.0005));
  CHECK(level(a, "Cl^-").from == Origin::book);
}

TEST_CASE("every assumption is a note", "[unit]") {
  auto readings = morning();
  readings.level_below_mark.reset();
  readings.temperature.reset();
  const auto a = evaluated(readings);
  CHECK(a.volume.v == 2400);
  CHECK(a.temperature.v == 54);
  CHECK(says(a.notes, "taken as filled to the mark, 2400 L"));
  CHECK(says(a.notes, "no temperature given: taken as the tank's, 54.0 degC"));
  CHECK(says(a.notes, "Na^+ was not analysed and the book has none: taken as 0"));
  CHECK(level(a, "Na^+").value.v == 0);
  CHECK(level(a, "Na^+").from == Origin::book);
  // Kell 1975: 0.99821/0.98621 kg/L at 20 and 54 degC
  CHECK(says(a.notes, "pipetted at 20.0 degC they are 1.2 % too high"));
}

TEST_CASE("origins have names", "[unit]") {
  CHECK(analysis::name(Origin::titration) == "titration");
  CHECK(analysis::name(Origin::found) == "found");
  CHECK(analysis::name(Origin::book) == "book");
  CHECK(analysis::name(Origin::electroneutrality) == "electroneutrality");
}

TEST_CASE("what may have counted besides is told with the result", "[unit]") {
  const auto a = evaluated(morning());
  CHECK(level(a, "Ni^2+").interferences.starts_with("copper, zinc"));
  CHECK(level(a, "SO4^2-").interferences.empty());
}

TEST_CASE("who sampled, who titrated and the titrant's lot go with the results", "[unit]") {
  auto readings = morning();
  readings.sample_number = "2611-07";
  readings.sampled_by = "J. Marsh";
  readings.titrations[0].titrant_lot = "E-2611";
  readings.titrations[0].titrated_by = "M. Okafor";
  readings.titrations.push_back(readings.titrations[0]);
  readings.titrations.back().titrant_lot = "E-2612";
  const auto a = evaluated(readings);
  CHECK(a.sample_number == "2611-07");
  CHECK(a.sampled_by == "J. Marsh");
  CHECK(level(a, "Ni^2+").titrant_lot == "E-2611; E-2612");
  CHECK(level(a, "Ni^2+").titrated_by == "M. Okafor");
  CHECK(level(a, "Cl^-").titrant_lot.empty());
}

TEST_CASE("a level an instrument states has the repeatability of its method", "[unit]") {
  auto readings = morning();
  readings.titrations.erase(readings.titrations.begin());
  readings.found = {found("Ni^2+", 70)};
  readings.found[0].method = "photometric-nickel";
  const auto a = evaluated(readings);
  CHECK(level(a, "Ni^2+").standard_uncertainty.v == Approx(2.1).epsilon(1e-9));  // 3 %
  CHECK(level(a, "Ni^2+").how == "70.00 g/L found by photometric-nickel");
  CHECK(says(a.notes, "3 % taken (repeatability of the method)"));
  readings.found[0].method = "electrode-fluoride";
  CHECK(refusal(readings).what == "electrode-fluoride does not find Ni^2+");
}

TEST_CASE("free and total cyanide are not mixed up", "[failure]") {
  bath::BathType type = bath_type();
  type.name = "zinc cyanide";
  type.convention = activity::Convention::association;
  type.components = {{"H^+", bath::FoundBy::pH},
                     {"Zn^2+", bath::FoundBy::analysis},
                     {"CN^-", bath::FoundBy::analysis},
                     {"Na^+", bath::FoundBy::charge}};
  bath::Quantity free = quantity("NaCN", {{"CN^-", 1}, {"Zn^2+", -4}}, true);
  free.id = "free NaCN";
  type.quantities = {quantity("Zn^2+", {{"Zn^2+", 1}}), quantity("CN^-", {{"CN^-", 1}}), free,
                     quantity("Na^+", {{"Na^+", 1}})};
  const auto prepared = bath::Chemistry::prepare(type, {25}, {20});
  INFO((prepared ? std::string() : text(prepared.problems())));
  REQUIRE(prepared);
  struct Row {
    const char *quantity, *method, *what;
  };
  for (const Row& row :
       {Row{"CN^-", "silver-free-cyanide", "silver-free-cyanide finds the free amount, CN^- is the total"},
        Row{"free NaCN", "silver-total-cyanide",
            "silver-total-cyanide finds the total amount, free NaCN is the free"}}) {
    analysis::Readings readings;
    readings.pH = 13;
    readings.titrations = {titration(row.quantity, row.method, 10, 0.1, 12)};
    const auto result = analysis::evaluate(readings, tank(), *prepared);
    REQUIRE_FALSE(result);
    CHECK(result.problems().front().what == row.what);
    readings.titrations[0].method = readings.titrations[0].method == "silver-free-cyanide"
                                        ? "silver-total-cyanide"
                                        : "silver-free-cyanide";
    const auto right = analysis::evaluate(readings, tank(), *prepared);
    CHECK((right || right.problems().front().what.find("finds the") == std::string::npos));
  }
}

TEST_CASE("a sample pipetted cold is brought to the tank's temperature", "[reference]") {
  // Ratio of the volume of water at t to that at 20 degC, practice of the trade (from the density of water):
  // a bath with next to nothing in it must give them back, for a level found cold is so much lower hot.
  struct Row {
    double tank_C, ratio;
  };
  for (const Row& row : {Row{40, 1.0060}, Row{50, 1.0103}, Row{60, 1.0153}, Row{70, 1.0209}}) {
    INFO(row.tank_C);
    auto readings = morning();
    readings.titrations.clear();
    readings.found = {found("Ni^2+", 0.02, 1e-3), found("Cl^-", 0.01, 1e-3), found("H3BO3", 0.01, 1e-3)};
    readings.temperature = units::Celsius{row.tank_C};
    const double hot = level(evaluated(readings), "H3BO3").value.v;
    readings.sample_temperature = units::Celsius{20};
    const auto a = evaluated(readings);
    CHECK(hot / level(a, "H3BO3").value.v == Approx(row.ratio).margin(1e-4).epsilon(0));
    CHECK(says(a.notes, "pipetted at 20.0 degC"));
    CHECK_FALSE(says(a.notes, "expansion of water"));
  }
}

TEST_CASE("salts change how far a bath expands: its own density counts, not that of water", "[unit]") {
  // Water from 22 to 54 degC: 0.99777/0.98621 (Kell 1975), 1.0117. The amounts in the tank are those of the
  // sample: levels times the volumes of one and the same state at both temperatures.
  auto readings = morning();
  const double cold = level(evaluated(readings), "Ni^2+").value.v;
  readings.sample_temperature = units::Celsius{22};
  const auto a = evaluated(readings);
  const double ratio = cold / level(a, "Ni^2+").value.v;
  bath::TankState in_flask = a.state;
  in_flask.temperature = {22};
  CHECK(ratio == Approx(a.volume.v / chemistry().volume_L(in_flask)).epsilon(1e-6));
  CHECK(ratio == Approx(1.0117).margin(0.004).epsilon(0));
  CHECK(std::abs(ratio - 1.0117) > 1e-4);
  CHECK(level(a, "Ni^2+").standard_uncertainty.v / level(a, "Ni^2+").value.v ==
        Approx(0.00654561).epsilon(0.001));
  // What the book has is of the tank already.
  const analysis::Book book{{{"H3BO3", 40}}, 4.0, "log entry 12"};
  readings.titrations = {nickel(), chloride()};
  CHECK(level(evaluated(readings, book), "H3BO3").value.v == Approx(40).epsilon(1e-12));
}

TEST_CASE("the volume has the uncertainty of the way it was found", "[unit]") {
  // Common practice: 1 % of the tank's own measure, 5 mm of level, 3 % where nobody looked.
  auto readings = morning();
  CHECK(evaluated(readings).u_volume_L == Approx(std::hypot(24, 10)));
  readings.level_below_mark.reset();
  CHECK(evaluated(readings).u_volume_L == Approx(std::hypot(24, 72)));
  readings.volume = units::Litres{2340};
  CHECK(evaluated(readings).u_volume_L == Approx(23.4));
}

TEST_CASE("a level that could as well be none is said to be", "[unit]") {
  // 0.1 mL of titrant, read to 0.0507 mL (10 mL burette, ordinary end point): below three of that.
  auto readings = morning();
  readings.titrations[1].burette = {0.1e-3};
  CHECK(
      says(evaluated(readings).notes, "Cl^-: 0.1769 g/L is below what the method tells from nothing, 0.26"));
  CHECK_FALSE(says(evaluated(morning()).notes, "below what the method tells"));
}

TEST_CASE("the covariance holds amounts and volume as they were found", "[reference]") {
  // n = c V, found independently: var n = V^2 u_c^2 + c^2 u_V^2, cov(n, V) = c u_V^2. Two levels of one
  // sample share how well it stands for the tank, 0.5 %, too.
  const auto a = evaluated(morning());
  const auto& names = chemistry().components();
  const std::size_t rows = names.size() + 1, last = rows - 1;
  REQUIRE(a.covariance.size() == rows * rows);
  const auto at = [&](std::size_t r, std::size_t c) { return a.covariance[r * rows + c]; };
  const auto of = [&](const char* name) {
    return static_cast<std::size_t>(std::ranges::find(names, name) - names.begin());
  };
  const double V = a.volume.v, u_V = a.u_volume_L;
  CHECK(at(last, last) == Approx(u_V * u_V).epsilon(1e-6));
  const std::size_t nickel = of("Ni^2+"), boric = of("H3BO3");
  const double c = a.state.component_mol[nickel] / V;
  const double u = level(a, "Ni^2+").standard_uncertainty.v / 58.693;
  CHECK(at(nickel, nickel) == Approx(V * V * u * u + c * c * u_V * u_V).epsilon(1e-4));
  CHECK(at(nickel, last) == Approx(c * u_V * u_V).epsilon(1e-6));
  const double c_boric = a.state.component_mol[boric] / V;
  CHECK(at(nickel, boric) == Approx(c * c_boric * (u_V * u_V + 0.005 * 0.005 * V * V)).epsilon(1e-3));
}
