#include <bathwright/analysis/end_point.hpp>
#include <bathwright/data/tables.hpp>
#include <cmath>

#include "watts_tank.hpp"

using namespace bathwright;
using namespace bathwright::analysis;

namespace {

double beyond(const TitratedFlask& flask, const Change& change) {
  const auto mol = titrant_beyond_equivalence(flask, change);
  INFO((mol ? std::string() : text(mol.problems())));
  REQUIRE(mol);
  return *mol;
}

/// Davies, 25 degC: log10 gamma of a charge at this ionic strength. SIT lies within 0.005 of it below 0.05.
double gamma(double z, double I) {
  const double s = std::sqrt(I);
  return std::pow(10, -0.509 * z * z * (s / (1 + s) - 0.3 * I));
}

}  // namespace

TEST_CASE("strong acid with strong alkali: the indicator's pH is what is left", "[reference]") {
  // Closed form: 100 mL of 0.01 mol/L NaCl at the end; at pH 4 there is 1e-4/gamma mol/L of acid too much,
  // 1.11e-5 mol of alkali too little; at pH 9 Kw/1e-9/gamma of alkali too much.
  const TitratedFlask flask{{{"H^+", 1e-3}, {"Cl^-", 1e-3}}, 0.1, "NaOH", 1e-3};
  CHECK(beyond(flask, {.pH = 4}) == Approx(-1e-5 / gamma(1, 0.01)).epsilon(0.01));
  CHECK(beyond(flask, {.pH = 9}) == Approx(std::pow(10, -13.995 + 9 - 1) / gamma(1, 0.01)).epsilon(0.01));
  // The other way round: alkali with acid, which at pH 4 is too much.
  const TitratedFlask alkali{{{"H^+", -1e-3}, {"Na^+", 1e-3}}, 0.1, "HCl", 1e-3};
  CHECK(beyond(alkali, {.pH = 4}) == Approx(1e-5 / gamma(1, 0.01)).epsilon(0.01));
}

TEST_CASE("phenolphthalein counts dissolved carbon dioxide, methyl orange does not", "[reference]") {
  // Closed form: c mol/L of CO2 in the acid; at pH 8.5 a share a1 is HCO3^- and a2 CO3^2-, each proton taken
  // by NaOH: c (a1 + 2 a2) + Kw/h - h. K1 10^-6.352, K2 10^-10.329, at I = 0.01.
  const double c = 1e-4, g1 = gamma(1, 0.01), g2 = gamma(2, 0.01);
  const TitratedFlask flask{
      {{"H^+", 1e-3 + 2 * c * 0.1}, {"Cl^-", 1e-3}, {"CO3^2-", c * 0.1}}, 0.1, "NaOH", 1e-3};
  const auto closed = [&](double pH) {
    const double h = std::pow(10, -pH), first = std::pow(10, -6.352) / h / g1,
                 second = first * std::pow(10, -10.329) / h * g1 / g2;
    return 0.1 * (c * (first + 2 * second) / (1 + first + second) + std::pow(10, -13.995) / h / g1 - h / g1);
  };
  CHECK(beyond(flask, {.pH = 8.5}) == Approx(closed(8.5)).epsilon(0.01));
  CHECK(beyond(flask, {.pH = 8.5}) > 1e-5);  // 1 % of the titrant
  CHECK(beyond(flask, {.pH = 3.8}) == Approx(closed(3.8)).epsilon(0.01));
  CHECK(std::abs(beyond(flask, {.pH = 3.8})) < 2e-5);
}

TEST_CASE("the chloride titration of Mohr: silver chromate comes a little late", "[reference]") {
  // Closed form: at the first Ag2CrO4 [Ag] = sqrt(Ks2/[CrO4]), [Cl] = Ks1/[Ag]; silver beyond the equivalence
  // is their difference, less AgCl2^- and the like. Ks1 10^-9.752, Ks2 10^-11.95 (the tables); 2.57e-3 mol/L
  // of chromate, ionic strength of NaNO3 0.018. HCrO4^- (pK 6.51) holds a part at pH 7.2.
  const TitratedFlask flask{{{"Na^+", 1e-3}, {"Cl^-", 1e-3}}, 0.1, "AgNO3", 1e-3};
  const Change change{
      .adds_mol = {{"K2CrO4", 0.257e-3}}, .solid = "Ag2CrO4", .forms = {"AgCl"}, .held_pH = 7.2};
  const double I = 0.01 + 0.0077, g1 = gamma(1, I), g2 = gamma(2, I);
  const double hydrogen = std::pow(10, 6.51 - 7.2) * g2 / g1;
  const double chromate = 2.57e-3 / (1 + hydrogen);
  const double silver = std::sqrt(std::pow(10, -11.95) / (chromate * g2)) / g1;
  const double chloride = std::pow(10, -9.752) / (silver * g1) / g1;
  const double closed = 0.1 * (silver - chloride);
  CHECK(beyond(flask, change) == Approx(closed).epsilon(0.05));
  CHECK(beyond(flask, change) > 0);
  CHECK(beyond(flask, change) < 3e-6);  // 0.02 mL of 0.1 mol/L
  // Five times the chromate, and the colour comes before the equivalence.
  Change more = change;
  more.adds_mol["K2CrO4"] = 1e-2;
  CHECK(beyond(flask, more) < 0);
}

TEST_CASE("free cyanide by silver: iodide shows the equivalence", "[reference]") {
  // Closed form: at the first AgI [Ag] = Ks/[I]; [CN]^2 = [Ag(CN)2]/(beta2 [Ag]), and a third cyanide on a
  // little of the silver. What is so held is titrant missing, half as much. beta2 10^20.48, beta3 10^21.40,
  // Ks 10^-16.07; ions of one charge cancel.
  const TitratedFlask flask{{{"Na^+", 3e-3}, {"CN^-", 2e-3}, {"H^+", -1e-3}}, 0.1, "AgNO3", 1e-3};
  const Change change{.adds_mol = {{"KI", 3.01e-3}}, .solid = "AgI"};
  const double I = 0.01 * 3 + 0.0301, g1 = gamma(1, I), g2 = gamma(2, I);
  const double silver_activity = std::pow(10, -16.07) / (0.0301 * g1);
  const double cyanide = std::sqrt(0.01 * g1 / (std::pow(10, 20.48) * silver_activity)) / g1;
  const double third = std::pow(10, 21.40 - 20.48) * 0.01 * cyanide * g1 * g1 / g2;
  CHECK(beyond(flask, change) == Approx(-0.1 * (cyanide + third) / 2).epsilon(0.03));
  CHECK(std::abs(beyond(flask, change)) < 0.01 * 1e-3);
}

TEST_CASE("zinc with EDTA: xylenol orange lets go of the last zinc a little early", "[reference]") {
  // Closed form: at pH 5.5 a share 1/alpha of the EDTA without zinc is edta^4-, alpha = 1 + 10^(10.17 - 5.5)
  // + 10^(10.17 + 6.11 - 11); K' = 10^16.68/alpha, gammas aside. Free zinc of 10^-5.7 is titrant missing,
  // EDTA of [Zn edta]/(K' [Zn]) is titrant beyond: 2e-6 against 1e-8 mol/kg here. Chloride holds a few per
  // cent of zinc.
  const TitratedFlask flask{{{"Zn^2+", 0.4e-3}, {"Cl^-", 0.8e-3}}, 0.1, "EDTA", 0.4e-3};
  const Change change{.held_pH = 5.5, .metal = "Zn^2+", .pM = 5.7};
  CHECK(beyond(flask, change) == Approx(-0.1 * std::pow(10, -5.7)).epsilon(0.1));
  // Where the metal is held too firmly it never changes, and that is told.
  Change never = change;
  never.pM = 30;
  CHECK_FALSE(titrant_beyond_equivalence(flask, never));
}

TEST_CASE("free cyanide of a copper bath: what copper holds is asked for as well", "[property]") {
  // Without copper as above; with it silver takes some of the third cyanide: the end point comes late, the
  // later the more copper there is. Trade: keep the dilution constant.
  const auto at = [](double copper_mol) {
    const double free_mol = 1.8e-3;
    const TitratedFlask flask{{{"Na^+", 2 * copper_mol + free_mol + 4e-3},
                               {"Cu^+", copper_mol},
                               {"CN^-", 3 * copper_mol + free_mol},
                               {"H^+", -4e-3}},
                              0.124,
                              "AgNO3",
                              free_mol / 2};
    return beyond(flask, {.adds_mol = {{"KI", 3.01e-3}}, .solid = "AgI"});
  };
  CHECK(at(0) < 0);
  CHECK(at(4e-3) > at(1e-3));
  CHECK(at(8e-3) > at(4e-3));
  CHECK(at(8e-3) < 0.1 * 0.9e-3);
}

TEST_CASE("boric acid with mannitol, both to the same pH", "[reference]") {
  // Closed form: K' = 10^-4.15 [mannitol]^2; at the pH of the shade a share K'/(K' + h) of the acid is
  // titrated; before mannitol a share 10^-9.236/h of it was, and is not counted.
  const TitratedFlask flask{{{"H3BO3", 1e-3}, {"Na^+", 1e-3}, {"Cl^-", 1e-3}}, 0.1, "NaOH", 1e-3};
  const Change change{.adds_mol = {{"C6H14O6", 50e-3}}, .start_pH = 7.5, .pH = 7.5};
  const double g1 = gamma(1, 0.02), h = std::pow(10, -7.5);
  const double free_mannitol = 0.5 - 2 * 0.01;
  const double complex_share = std::pow(10, -4.15) * free_mannitol * free_mannitol / g1 / h;
  const double borate_share = std::pow(10, -9.236) / h / g1;
  const double closed = 1e-3 * (-1 / (1 + complex_share + borate_share) - borate_share / (1 + borate_share));
  CHECK(beyond(flask, change) == Approx(closed).epsilon(0.05));
}

TEST_CASE("the end points of a morning's titrations are computed in their own flasks", "[unit]") {
  using namespace watts;
  const auto a = evaluated(morning());
  REQUIRE(a.end_points.size() == 2);
  REQUIRE(a.end_points_unknown.size() == 1);
  CHECK(a.end_points_unknown[0].quantity == "Ni^2+");
  CHECK_THAT(a.end_points_unknown[0].why, Catch::Contains("no constant is known of what murexide"));
  const EndPointBias& chloride = a.end_points[0];
  const EndPointBias& boric = a.end_points[1];
  INFO(chloride.mL << " mL, " << boric.mL << " mL, " << boric.from_mL << " to " << boric.to_mL);
  CHECK(chloride.quantity == "Cl^-");
  CHECK(chloride.indicator == "potassium chromate");
  CHECK(std::abs(chloride.mL) < 0.03);
  CHECK(chloride.share == Approx(chloride.mL / 8.1).epsilon(0.01));
  CHECK(boric.quantity == "H3BO3");
  CHECK(boric.mL < 0);
  CHECK(boric.from_mL < boric.mL);
  CHECK(boric.to_mL > boric.mL);
  for (const EndPointBias& bias : a.end_points) {
    const auto& found = level(a, bias.quantity);
    const bool matters = std::abs(bias.share) * found.value.v > found.standard_uncertainty.v / 2;
    CHECK(says(a.notes, bias.quantity + ": computed for this flask") == matters);
  }
  CHECK(level(a, "H3BO3").value.v == Approx(36.9734).epsilon(1e-5));  // told, not corrected
}

TEST_CASE("every end point belongs to a method and says where it comes from", "[unit]") {
  const auto table =
      data::built_in_table("analysis/end_points.csv", {"flask_mL", "end_pH", "from_pH", "to_pH", "pM"});
  for (std::size_t i = 0; i < table.size(); ++i) {
    const auto row = table[i];
    INFO(row.where());
    REQUIRE(method(row["method"]));
    CHECK(method(row["method"])->id == row["method"]);
    CHECK(row.number("flask_mL") > 0);
    const bool by_pH = row["solid"].empty() && row["metal"].empty();
    CHECK(std::isfinite(row.number("end_pH")) == by_pH);
    CHECK(std::isfinite(row.number("pM")) == !row["metal"].empty());
    if (by_pH) {
      CHECK(row.number("from_pH") < row.number("end_pH"));
      CHECK(row.number("to_pH") > row.number("end_pH"));
    }
    CHECK_FALSE(row["source"].empty());
    CHECK_FALSE(row["from_memory"].empty());
  }
}
