// Davies and extended Debye-Hueckel against values worked out by hand, and in their limits.
#include <bathwright/activity/debye_huckel_slope.hpp>
#include <numbers>

#include "solutions.hpp"

using namespace bathwright::activity;

TEST_CASE("Davies gives the coefficient of the silver chloride example", "[reference]") {
  // tests/reference/worked_examples.csv, WE-19: I = 0.05 mol/kg.
  const Model davies = model_of(ModelKind::davies, {"K^+", "NO3^-"});
  CHECK(std::exp(ln_mean(*davies, 0.05, 1, 1)) == Approx(0.82152).margin(0.00082).epsilon(0));
}

TEST_CASE("at 0.001 mol/kg every model gives the measured mean coefficient", "[reference]") {
  // Measured values quoted in worked_examples.csv, WE-20; half a unit of the last digit, and 0.001 for a
  // model.
  for (const ModelKind kind : all_models) {
    INFO(name(kind));
    CHECK(std::exp(ln_mean(*model_of(kind, {"Na^+", "Cl^-"}), 0.001, 1, 1)) ==
          Approx(0.965).margin(0.0015).epsilon(0));
    CHECK(std::exp(ln_mean(*model_of(kind, {"Ca^2+", "Cl^-"}), 0.001, 1, 2)) ==
          Approx(0.888).margin(0.0015).epsilon(0));
  }
}

TEST_CASE("the limiting law holds at trace ionic strength", "[reference]") {
  // WE-20: log10 gamma = -0.509 |z+ z-| sqrt(I); the slope 0.509 is rounded (0.5100 with these constants).
  for (const ModelKind kind : all_models) {
    INFO(name(kind));
    const double m = 1e-8;
    const double of_1_1 = ln_mean(*model_of(kind, {"Na^+", "Cl^-"}), m, 1, 1) / std::numbers::ln10;
    CHECK(of_1_1 / std::sqrt(m) == Approx(-0.509).margin(0.0015).epsilon(0));
    const double of_2_1 = ln_mean(*model_of(kind, {"Ca^2+", "Cl^-"}), m, 1, 2) / std::numbers::ln10;
    CHECK(of_2_1 / std::sqrt(3 * m) == Approx(-2 * 0.509).margin(0.003).epsilon(0));
  }
}

TEST_CASE("Debye-Hueckel gives Kielland's coefficients", "[reference]") {
  // Kielland 1937, J. Am. Chem. Soc. 59:1675, table of calculated coefficients at 25 degC, from memory:
  // two digits after the point as printed, so 0.005, and 0.005 for his older slopes.
  struct Row {
    const char* ion;
    double I, gamma;
  };
  for (const Row& row : {Row{"H^+", 0.01, 0.914}, Row{"H^+", 0.1, 0.83}, Row{"Na^+", 0.1, 0.78},
                         Row{"K^+", 0.01, 0.899}, Row{"K^+", 0.1, 0.755}, Row{"Ca^2+", 0.1, 0.405},
                         Row{"SO4^2-", 0.1, 0.355}, Row{"OH^-", 0.1, 0.76}}) {
    INFO(row.ion << " at I = " << row.I);
    const Model model = model_of(ModelKind::debye_huckel, {row.ion, "K^+", "NO3^-"});
    CHECK(std::exp(coefficients(*model, {0, row.I, row.I}).ln_gamma[0]) ==
          Approx(row.gamma).margin(0.01).epsilon(0));
  }
}

TEST_CASE("charge enters as its square and without its sign; a neutral solute is ideal", "[property]") {
  const Names names{"Na^+", "Cl^-", "Ni^2+", "SO4^2-", "Al^3+", "H3BO3", "CO2"};
  for (const ModelKind kind : {ModelKind::davies, ModelKind::debye_huckel}) {
    INFO(name(kind));
    const Model model = model_of(kind, names);
    const Numbers g = coefficients(*model, {0.1, 0.1, 0.05, 0.05, 0.01, 0.4, 0.001}).ln_gamma;
    CHECK(g[5] == 0);
    CHECK(g[6] == 0);
    if (kind != ModelKind::davies) continue;
    CHECK(g[0] == g[1]);
    CHECK(g[2] == Approx(4 * g[0]).margin(1e-14).epsilon(0));
    CHECK(g[3] == g[2]);
    CHECK(g[4] == Approx(9 * g[0]).margin(1e-14).epsilon(0));
  }
}

TEST_CASE("Davies' bracket is held above 1 mol/kg", "[property]") {
  const Model davies = model_of(ModelKind::davies, {"Na^+", "Cl^-"});
  const double at_one = ln_mean(*davies, 1, 1, 1);
  CHECK(at_one == Approx(-3 * osmotic_slope(room) * 0.2).margin(1e-14).epsilon(0));
  CHECK(ln_mean(*davies, 8, 1, 1) == at_one);
}

TEST_CASE("an ion without a published size is named in a note", "[unit]") {
  const Model model = model_of(ModelKind::debye_huckel, {"Na^+", "Ni(CN)4^2-", "H3BO3"});
  std::vector<std::string> missing;
  for (const InteractionNote& note : model->notes())
    if (note.kind == InteractionNote::Kind::missing) missing.push_back(note.text);
  CHECK(missing == std::vector<std::string>{"Ni(CN)4^2-: no ion size published; 400 pm taken"});
}

TEST_CASE("what charge alone leaves open goes with the product of charges", "[unit]") {
  const Model davies = model_of(ModelKind::davies, {"Na^+", "Ni^2+", "Cl^-", "SO4^2-", "H3BO3"});
  const auto notes = davies->notes();
  REQUIRE(notes.size() == 4);  // each cation with each anion
  CHECK(notes[0].u_ln_gamma == 0.25);      // Na^+ - Cl^-
  CHECK(notes[3].u_ln_gamma == 4 * 0.25);  // Ni^2+ - SO4^2-
}
