// The Pitzer model against published coefficients, and what it says about what it does not know.
#include <algorithm>

#include "solutions.hpp"

using namespace bathwright;
using namespace bathwright::activity;

namespace {

bool has_note(const ActivityModel& model, InteractionNote::Kind kind, std::string_view beginning) {
  return std::any_of(model.notes().begin(), model.notes().end(), [&](const InteractionNote& note) {
    return note.kind == kind && note.text.starts_with(beginning);
  });
}

}  // namespace

TEST_CASE("sodium chloride at 1 mol/kg worked out by hand from its three parameters", "[reference]") {
  // Harvie, Moller & Weare 1984: beta0 0.0765, beta1 0.2644, C_phi 0.00127; A_phi 0.39145; m = I = 1, b
  // = 1.2.
  //   f^gamma = -A_phi (1/2.2 + (2/1.2) ln 2.2) = -0.39145 x 1.76864      = -0.69233
  //   B^gamma = 2 beta0 + beta1 (g(2) + e^-2) = 0.1530 + 0.2644 x 0.43233 =  0.26731
  //   ln gamma = f^gamma + B^gamma + 1.5 C_phi                            = -0.42312
  //   f^phi = -A_phi/2.2 = -0.17793, B^phi = beta0 + beta1 e^-2 = 0.11228
  //   phi = 1 + f^phi + B^phi + C_phi                                     =  0.93562
  const Model model = model_of(ModelKind::pitzer, {"Na^+", "Cl^-"});
  CHECK(ln_mean(*model, 1, 1, 1) == Approx(-0.42312).margin(2e-5).epsilon(0));
  CHECK(osmotic_coefficient(*model, {1, 1}) == Approx(0.93562).margin(2e-5).epsilon(0));
}

TEST_CASE("single salts at 25 degC against evaluated tables", "[reference]") {
  // Robinson & Stokes 1959, appendices 8.9 and 8.10; Hamer & Wu 1972. Tolerance: the scatter between the two
  // (tests/reference/mean_activity.csv states it salt by salt).
  struct Row {
    const char *cation, *anion;
    double nu_cation, nu_anion, molality, gamma, gamma_tolerance, phi, phi_tolerance;
  };
  for (const Row& row : {Row{"Na^+", "Cl^-", 1, 1, 1, 0.657, 0.0033, 0.9356, 0.004},
                         Row{"K^+", "Cl^-", 1, 1, 1, 0.604, 0.0036, 0.8981, 0.004},
                         Row{"H^+", "Cl^-", 1, 1, 1, 0.809, 0.0065, 1.039, 0.005},
                         Row{"Na^+", "Cl^-", 1, 1, 5, 0.874, 0.009, 1.1915, 0.006},
                         Row{"Ca^2+", "Cl^-", 1, 2, 1, 0.500, 0.006, 1.046, 0.01},
                         Row{"Ca^2+", "Cl^-", 1, 2, 0.5, 0.448, 0.0054, 0.916, 0.0092}}) {
    INFO(row.cation << " " << row.anion << " " << row.molality << " mol/kg");
    const Model model = model_of(ModelKind::pitzer, {row.cation, row.anion});
    CHECK(std::exp(ln_mean(*model, row.molality, row.nu_cation, row.nu_anion)) ==
          Approx(row.gamma).margin(row.gamma_tolerance).epsilon(0));
    CHECK(osmotic_coefficient(*model, {row.nu_cation * row.molality, row.nu_anion * row.molality}) ==
          Approx(row.phi).margin(row.phi_tolerance).epsilon(0));
  }
}

TEST_CASE("trace HCl in NaCl follows Harned's rule", "[reference]") {
  // Harned & Owen 1958, HCl in NaCl at I = 1 mol/kg, 25 degC, from memory: log10 gamma(HCl, trace) =
  // log10 0.809 - alpha I with alpha = 0.032 +- 0.002.
  const Model model = model_of(ModelKind::pitzer, {"H^+", "Na^+", "Cl^-"});
  const Numbers g = coefficients(*model, {1e-8, 1, 1}).ln_gamma;
  CHECK((g[0] + g[2]) / 2 / std::log(10.0) == Approx(std::log10(0.809) - 0.032).margin(0.004).epsilon(0));
}

TEST_CASE("a theta nobody published is listed, a published one is not", "[unit]") {
  const Model model = model_of(ModelKind::pitzer, {"Na^+", "K^+", "Ni^2+", "Ag^+", "Cl^-"});
  CHECK(has_note(*model, InteractionNote::Kind::missing, "Ni^2+ - Ag^+: theta not published"));
  CHECK_FALSE(has_note(*model, InteractionNote::Kind::missing, "Na^+ - K^+: theta"));
}

TEST_CASE("a pair nobody published takes the median of its charge type and says so", "[unit]") {
  const Model model = model_of(ModelKind::pitzer, {"Na^+", "Ni^2+", "NH2SO3^-"});
  CHECK(has_note(*model, InteractionNote::Kind::missing,
                 "Na^+ - NH2SO3^-: not published; median of the published pairs"));
}

TEST_CASE("an ion of a charge type without data is kept outside the model and named", "[unit]") {
  const Names names{"Na^+", "Cl^-", "X^6-"};
  const Model model = model_of(ModelKind::pitzer, names),
              without = model_of(ModelKind::pitzer, {"Na^+", "Cl^-"});
  REQUIRE(has_note(*model, InteractionNote::Kind::outside_model, "X^6-"));
  // It takes no part in the others' coefficients, and its own stays within Davies' at 1 mol/kg.
  const Numbers with_it = coefficients(*model, {4, 4, 0.1}).ln_gamma;
  const Numbers pure = coefficients(*without, {4, 4}).ln_gamma;
  CHECK(with_it[0] == pure[0]);
  CHECK(with_it[1] == pure[1]);
  CHECK(with_it[2] == Approx(-36 * 3 * 0.39145 * 0.2).margin(1e-2).epsilon(0));
}

TEST_CASE("a fit's range is stated as the molality of its salt", "[unit]") {
  const Model model = model_of(ModelKind::pitzer, {"Na^+", "Ni^2+", "Cl^-", "SO4^2-"});
  const auto limit = [&](std::string_view pair) {
    for (const InteractionNote& note : model->notes())
      if (note.kind == InteractionNote::Kind::above_range && note.text.starts_with(pair))
        return note.limit_molal;
    return 0.0;
  };
  CHECK(limit("Na^+ - Cl^-") == 6);
  CHECK(limit("Ni^2+ - SO4^2-") == 2.5);
}

TEST_CASE("the two acid sets are never mixed", "[unit]") {
  // A trace of copper in a solution of HSO4^- alone feels nothing but Cu-HSO4, so between the sets (A: beta0
  // 0.41, beta1 3.48; B: 0.4465, 1.729) ln gamma differs by 2 m (d beta0 + d beta1 g(x)). At m = 0.5 mol/kg
  // I = 0.25 and x = 1, where g = 2 (1 - 2/e) = 0.528482.
  const auto of_copper = [](const Names& names, const Numbers& m, AcidSet set) {
    return coefficients(*model_of(ModelKind::pitzer, names, room, set), m).ln_gamma[0];
  };
  const auto difference = [&](const Names& names, const Numbers& m) {
    return of_copper(names, m, AcidSet::sulfate) - of_copper(names, m, AcidSet::chloride);
  };
  CHECK(difference({"Cu^2+", "HSO4^-"}, {0, 0.5}) ==
        Approx(2 * 0.5 * (0.41 - 0.4465 + (3.48 - 1.729) * 0.528482)).margin(1e-6).epsilon(0));
  // Each set brings its own theta(Cu,H): 0 in A, 0.09 in B; without an anion nothing else differs.
  CHECK(difference({"Cu^2+", "H^+"}, {0, 0.5}) == Approx(-2 * 0.5 * 0.09).margin(1e-12).epsilon(0));
  // And its own psi(Cu,H,SO4): -0.092 in B, none in A.
  CHECK(difference({"Cu^2+", "H^+", "SO4^2-"}, {0, 0.5, 0.4}) ==
        Approx(-2 * 0.5 * 0.09 + 0.5 * 0.4 * 0.092).margin(1e-12).epsilon(0));
}

TEST_CASE("calcium hydrogensulfate is that of set A in both sets", "[unit]") {
  const Names pair{"Ca^2+", "HSO4^-"};
  const Numbers m{0.3, 0.6};
  CHECK(coefficients(*model_of(ModelKind::pitzer, pair, room, AcidSet::sulfate), m).ln_gamma ==
        coefficients(*model_of(ModelKind::pitzer, pair, room, AcidSet::chloride), m).ln_gamma);
}

TEST_CASE("a model refuses a temperature or a number of solutes it cannot serve", "[failure]") {
  const std::vector<Solute> one{{"Na^+", 1}};
  for (const double t : {-0.1, 100.1, std::nan("")}) {
    const auto refused = make_model(ModelKind::pitzer, one, {t});
    REQUIRE_FALSE(refused);
    CHECK(refused.problems()[0].expected == "0 to 100 degC");
  }
  const auto refused = make_model(ModelKind::davies, std::vector<Solute>(max_solutes + 1, one[0]), room);
  REQUIRE_FALSE(refused);
  CHECK(refused.problems()[0].expected == "at most 256");
}

TEST_CASE("the charge is read from a name", "[unit]") {
  CHECK(charge_in_name("Ni^2+") == 2);
  CHECK(charge_in_name("OH^-") == -1);
  CHECK(charge_in_name("Fe(CN)6^4-") == -4);
  CHECK(charge_in_name("H3BO3") == 0);
  CHECK(charge_in_name("Na^+") == 1);
}
