#include <bathwright/analysis/standardisation.hpp>
#include <bathwright/data/tables.hpp>
#include <bathwright/units/show.hpp>
#include <catch2/catch.hpp>
#include <cmath>
#include <set>

#include "watts_tank.hpp"

using namespace bathwright;
using namespace bathwright::analysis;

namespace {

/// Three runs of EDTA against zinc.
Standardised edta() {
  Standardised s;
  s.name = "EDTA-2611";
  s.titrant = "EDTA";
  s.against = "zinc";
  s.weighed = {{0.1635e-3}, {0.1642e-3}, {0.1629e-3}};
  s.burette = {{25.00e-3}, {25.15e-3}, {24.88e-3}};
  s.where = "bench.toml:3";
  return s;
}

Strength found(const Standardised& s) {
  const auto strength = strength_of(s);
  INFO((strength ? std::string() : text(strength.problems())));
  REQUIRE(strength);
  return *strength;
}

}  // namespace

TEST_CASE("the mass that 1 mL of 0.1 mol/L takes, for every standard that is weighed", "[reference]") {
  // Bench figures of the trade: mg of the standard per mL of 0.1 mol/L titrant, from molar masses and ratio;
  // to the last digit printed. Thiosulfate for iodine is no mass: tested below.
  struct Row {
    const char *titrant, *standard;
    double mg_per_mL;
  };
  const Row rows[] = {{"NaOH", "potassium hydrogen phthalate", 20.4222},
                      {"HCl", "sodium carbonate", 5.2994},
                      {"AgNO3", "sodium chloride", 5.8440},
                      {"EDTA", "zinc", 6.5380},
                      {"sodium thiosulfate", "potassium iodate", 3.5667},
                      {"KMnO4", "sodium oxalate", 33.4995},
                      {"ammonium iron(II) sulfate", "potassium dichromate", 4.9030},
                      {"potassium thiocyanate", "silver nitrate", 16.9872}};
  for (const Row& row : rows) {
    INFO(row.titrant);
    Standardised s;
    s.name = "a";
    s.titrant = row.titrant;
    s.against = row.standard;
    s.weighed = {{20 * row.mg_per_mL * 1e-6}};
    s.burette = {{20e-3}};
    CHECK(found(s).value.v == Approx(0.1).epsilon(2e-5));
  }
}

TEST_CASE("three runs against zinc: their mean, and its uncertainty", "[unit]") {
  // Hand calculation, 65.38 g/mol: 0.100031, 0.0998602, 0.100144; mean 0.100012, scatter 0.1429 %. Burette
  // of 50 mL (0.05/sqrt 6)/25.01 = 8.162e-4, shared; standard 5e-4; end point and balance of one run
  // hypot(0.05/25.01, 0.0002/0.1635) = 2.3434e-3, more than the scatter, over sqrt 3: 1.3530e-3.
  const Strength s = found(edta());
  CHECK(s.value.v == Approx(0.100012).epsilon(1e-5));
  CHECK(s.u_rel == Approx(1.6577e-3).epsilon(1e-3));
  CHECK(s.how == "mean of 3 against zinc, scatter 0.14 %");

  // Runs that scatter more than their readings can, count as they scatter: 1 % of 0.1 either way, two runs.
  Standardised wide = edta();
  wide.weighed = {{0.161e-3}, {0.166e-3}};
  wide.burette = {{25e-3}, {25e-3}};
  const double scatter = 5 / std::sqrt(2) / 163.5;
  CHECK(found(wide).u_rel ==
        Approx(std::hypot(0.03 / std::sqrt(6) / 25, 5e-4, scatter / std::sqrt(2))).epsilon(1e-6));
}

TEST_CASE("assay, aliquot and blank enter the strength", "[unit]") {
  // 1.6345 g of 99.9 % zinc to 250 mL, 25 mL of it: 0.1634 g of 100 % but for rounding; 25.05 mL less 0.05.
  Standardised s = edta();
  s.weighed = {{1.6345e-3}};
  s.assay = 0.999;
  s.diluted_to = {0.25};
  s.aliquot = {25e-3};
  s.burette = {{25.05e-3}};
  s.blank = {0.05e-3};
  CHECK(found(s).value.v == Approx(1.6345 * 0.999 / 10 / 65.38 / 0.025).epsilon(1e-12));
  CHECK(found(s).how == "one run against zinc");
}

TEST_CASE("iodine against thiosulfate that was standardised just before", "[unit]") {
  // 25.00 mL of 0.1003 mol/L thiosulfate use up 24.80 mL of iodine: 0.5 * 25 * 0.1003 / 24.8 = 0.050554
  Standardised thiosulfate;
  thiosulfate.name = "THIO-12";
  thiosulfate.titrant = "sodium thiosulfate";
  thiosulfate.against = "potassium iodate";
  thiosulfate.weighed = {{0.0894e-3}};
  thiosulfate.burette = {{25e-3}};
  const double c = found(thiosulfate).value.v;
  Standardised iodine;
  iodine.name = "I2-7";
  iodine.titrant = "iodine";
  iodine.against = "sodium thiosulfate";
  iodine.taken = {{25e-3}};
  iodine.burette = {{24.8e-3}};
  iodine.known_strength = {0.1003};
  CHECK(found(iodine).value.v == Approx(0.050554).epsilon(1e-5));

  auto readings = watts::morning();
  iodine.known_strength = {0};
  iodine.known_name = "THIO-12";
  readings.standardised = {thiosulfate, iodine};
  const auto a = watts::evaluated(readings);
  CHECK(watts::says(a.notes, "I2-7: " + units::show(units::MolesPerLitre{0.5 * 25 * c / 24.8})));
}

TEST_CASE("a titration uses a standardised titrant by its name", "[unit]") {
  auto readings = watts::morning();
  readings.standardised = {edta()};
  readings.titrations[0].titrant = {0};
  readings.titrations[0].titrant_name = "EDTA-2611";
  const auto a = watts::evaluated(readings);
  const auto& nickel = watts::level(a, "Ni^2+");
  CHECK(nickel.value.v == Approx(23.8 * 0.100012 * 58.693 / 2).epsilon(2e-5));
  CHECK(nickel.how == "23.80 mL of 0.1000 mol/L (EDTA-2611) EDTA on 2.000 mL");
  // As in "uncertainty of a nickel titration", with 0.0016577 for the 0.003 of a certificate.
  CHECK(nickel.standard_uncertainty.v / nickel.value.v ==
        Approx(std::hypot(std::hypot(0.0514782 / 23.8, 0.010 / std::sqrt(6) / 2), 1.6577e-3, 0.005))
            .epsilon(1e-3));
  CHECK(watts::says(a.notes, "EDTA-2611: 0.1000 mol/L EDTA, +/- 0.17 %, mean of 3 against zinc"));
}

TEST_CASE("a titrant that has stood is less certain", "[unit]") {
  const auto relative = [](const char* state, const char* name) {
    auto readings = watts::morning();
    readings.standardised = {edta()};
    readings.titrations[0].titrant_state = state;
    readings.titrations[0].titrant_name = name;
    const auto level = watts::level(watts::evaluated(readings), "Ni^2+");
    return level.standard_uncertainty.v / level.value.v;
  };
  const double rest = std::hypot(0.0514782 / 23.8, 0.010 / std::sqrt(6) / 2, 0.005);
  CHECK(relative("", "") == Approx(std::hypot(rest, 0.003)).epsilon(1e-3));
  CHECK(relative("fresh", "") == Approx(std::hypot(rest, 0.002)).epsilon(1e-3));
  CHECK(relative("week-old", "") == Approx(std::hypot(rest, 0.005)).epsilon(1e-3));
  CHECK(relative("old-caustic", "") == Approx(std::hypot(rest, 0.01)).epsilon(1e-3));
  CHECK(relative("iron-ii-not-today", "") == Approx(std::hypot(rest, 0.02)).epsilon(1e-3));
  CHECK(relative("week-old", "EDTA-2611") == Approx(std::hypot(rest, 0.005, 1.6577e-3)).epsilon(1e-3));
}

TEST_CASE("a normality is taken by its stated equivalents, which must be the titrant's", "[unit][failure]") {
  auto readings = watts::morning();
  readings.titrations[1].titrant = {0.0998};
  readings.titrations[1].equivalents = 1;  // silver nitrate, 0.0998 N
  CHECK(watts::level(watts::evaluated(readings), "Cl^-").value.v == Approx(14.3285).epsilon(1e-5));
  readings.titrations[1].equivalents = 2;
  const Problem problem = watts::refusal(readings);
  INFO(problem.text());
  CHECK(problem.what == "Cl^-: 2 eq/mol given, AgNO3 has 1");
  readings = watts::morning();
  readings.titrations[0].equivalents = 2;  // of EDTA both are in use: what is stated is taken
  CHECK(watts::level(watts::evaluated(readings), "Ni^2+").how ==
        "23.80 mL of 0.1012 mol/L = 0.1012 mol/L EDTA on 2.000 mL");
}

TEST_CASE("a standardisation that cannot be is refused with the mend", "[failure]") {
  struct Row {
    const char *what, *mend;
    void (*spoil)(Standardised&);
  };
  const Row rows[] = {
      {"no standardisation of \"EDTE\" is known", "Did you mean EDTA?",
       [](Standardised& s) { s.titrant = "EDTE"; }},
      {"EDTA is not standardised against \"chalk\"", "Name one",
       [](Standardised& s) { s.against = "chalk"; }},
      {"3 burette readings, and 2 under weighed", "two lists", [](Standardised& s) { s.weighed.pop_back(); }},
      {"and 1 under taken", "two lists", [](Standardised& s) { s.taken = {{25e-3}}; }},
      {"reading 25.00 mL is not above the blank", "which figure",
       [](Standardised& s) {
         s.burette[0] = {25e-3}, s.burette[1] = s.burette[2] = {30e-3}, s.blank = {25e-3};
       }},
      {"reading 250.0 mL is more than a burette holds", "Check the unit",
       [](Standardised& s) { s.burette[0] = {250e-3}; }},
      {"a flask and an aliquot go together", "missing", [](Standardised& s) { s.diluted_to = {0.25}; }},
  };
  for (const Row& row : rows) {
    INFO(row.what);
    Standardised s = edta();
    row.spoil(s);
    const auto strength = strength_of(s);
    REQUIRE_FALSE(strength);
    const Problem problem = strength.problems().front();
    INFO(problem.text());
    CHECK(strength.problems().size() == 1);
    CHECK(problem.where == "bench.toml:3");
    CHECK(problem.what.find(row.what) != std::string::npos);
    CHECK(problem.try_this.find(row.mend) != std::string::npos);
  }
}

TEST_CASE("a titrant by name must be there and be the one of the method", "[failure]") {
  auto readings = watts::morning();
  readings.standardised = {edta()};
  readings.titrations[0].titrant_name = "EDTA-2612";
  CHECK(watts::refusal(readings).try_this == "Did you mean EDTA-2611?");
  readings.titrations[0].titrant_name = "";
  readings.titrations[1].titrant_name = "EDTA-2611";
  CHECK(watts::refusal(readings).what == "Cl^-: EDTA-2611 is EDTA, and mohr-chloride titrates with AgNO3");
  readings.titrations[1].titrant_name = "";
  readings.titrations[1].titrant_state = "mouldy";
  CHECK(watts::refusal(readings).expected.find("week-old") != std::string::npos);
  readings.titrations[1].titrant_state = "";
  readings.standardised.push_back(edta());
  CHECK(watts::refusal(readings).what == "two titrants are called EDTA-2611");
}

TEST_CASE("every titrant of a method says what a normality of it means, or that it must be said", "[unit]") {
  const auto table = data::built_in_table("analysis/titrants.csv", {"equivalents"});
  std::set<std::string> known;
  for (std::size_t i = 0; i < table.size(); ++i) {
    known.emplace(table[i]["titrant"]);
    CHECK_FALSE(table[i]["source"].empty());
  }
  for (const Method& m : methods()) {
    INFO(m.id);
    if (m.kind == Kind::weighed || m.kind == Kind::stated) continue;
    CHECK(known.contains(m.titrant));
    if (m.kind == Kind::back) CHECK(known.contains(m.back_titrant));
  }
  // Known values: permanganate in acid 5, dichromate 6, iodine 2 (per I2).
  CHECK(equivalents_of("KMnO4") == 5);
  CHECK(equivalents_of("K2Cr2O7") == 6);
  CHECK(equivalents_of("iodine") == 2);
  CHECK_FALSE(equivalents_of("EDTA"));
  for (const Standard& s : standards()) {
    INFO(s.titrant);
    CHECK(known.contains(s.titrant));
    CHECK(s.mol_per_mol > 0);
    CHECK_FALSE(s.indicator.empty());
    CHECK_FALSE(s.reaction.empty());
    CHECK_FALSE(s.source.empty());
  }
}
