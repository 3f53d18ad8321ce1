#include <bathwright/shopfiles/readings_file.hpp>
#include <catch2/catch.hpp>
#include <string>

using namespace bathwright;
using analysis::Readings;

namespace {
Readings readings_of(const std::string& written) {
  const auto readings = shopfiles::read_readings_text("r.toml", written);
  INFO((readings ? "" : text(readings.problems())));
  REQUIRE(readings);
  return *readings;
}
}  // namespace

TEST_CASE("the demonstration readings are read as they stand", "[unit][shopfiles]") {
  const auto readings = shopfiles::read_readings(PROJECT_DIR "/baths/readings/n-07-morning.toml");
  INFO((readings ? "" : text(readings.problems())));
  REQUIRE(readings);
  CHECK(readings->sampled == "2026-03-02T05:40:00");
  CHECK(readings->level_below_mark->v == Approx(0.3).epsilon(1e-15));
  CHECK_FALSE(readings->volume);
  CHECK(readings->temperature->v == 54);
  CHECK(readings->pH == 4.1);
  struct Row {
    std::string quantity, method;
    double titrant_mol_per_L, burette_mL;
  };
  const std::vector<Row> rows = {{"Ni^2+", "edta-nickel", 0.1012, 23.80},
                                 {"Cl^-", "mohr-chloride", 0.0998, 8.10},
                                 {"H3BO3", "mannitol-boric-acid", 0.1005, 11.90}};
  REQUIRE(readings->titrations.size() == rows.size());
  for (std::size_t i = 0; i < rows.size(); ++i) {
    const auto& t = readings->titrations[i];
    INFO(rows[i].quantity);
    CHECK(t.quantity == rows[i].quantity);
    CHECK(t.method == rows[i].method);
    CHECK(t.sample.v == Approx(0.002).epsilon(1e-12));
    CHECK(t.titrant.v == Approx(rows[i].titrant_mol_per_L).epsilon(1e-12));
    CHECK(t.burette.v == Approx(rows[i].burette_mL / 1000).epsilon(1e-12));
    CHECK(t.factor == 1);
    CHECK(t.blank.v == 0);
  }
  CHECK(readings->titrations[1].where.ends_with("n-07-morning.toml:15: titration.quantity"));
}

TEST_CASE("a concentration found elsewhere keeps the unit it was written in", "[unit][shopfiles]") {
  const Readings readings = readings_of(
      "density = \"25 degBe\"\nvolume = \"600 US gal\"\n"
      "[[found]]\nquantity = \"Cl^-\"\nvalue = \"1,9 oz/US gal\"\nuncertainty = \"0.2 g/L\"\n");
  REQUIRE(readings.found.size() == 1);
  CHECK(readings.found[0].value.value == 1.9);
  CHECK(readings.found[0].value.unit == units::ConcentrationUnit::ounces_per_us_gallon);
  CHECK(readings.found[0].uncertainty->value == 0.2);
  CHECK(readings.found[0].where == "r.toml:4: found.quantity");
  CHECK(readings.density->v == Approx(145.0 / (145 - 25) * 0.99904).epsilon(1e-12));  // heavy Baume scale
  CHECK(readings.volume->v == Approx(600 * 3.785411784).epsilon(1e-12));
}

TEST_CASE("dilution, back titration, two end points and a weighed precipitate are read",
          "[unit][shopfiles]") {
  const Readings readings = readings_of(
      "[[titration]]\nquantity = \"H2PO2^-\"\nmethod = \"iodine-hypophosphite\"\nsample = \"5 mL\"\n"
      "excess = \"50.00 mL\"\nexcess_strength = \"0.0500 mol/L\"\ntitrant = \"0.1 mol/L\"\nburette = \"20.5 mL\"\n"
      "[[titration]]\nquantity = \"Cr^3+\"\nmethod = \"ferrous-chromium-iii\"\nsample = \"10 mL\"\n"
      "diluted_to = \"500 mL\"\naliquot = \"10 mL\"\ntitrant = \"0.1 mol/L\"\nburette = \"15.9 mL\"\n"
      "second_burette = \"15 mL\"\n"
      "[[titration]]\nquantity = \"SO4^2-\"\nmethod = \"gravimetric-sulfate\"\nsample = \"10 mL\"\n"
      "weighed = \"0.4512 g\"\n"
      "[[found]]\nquantity = \"F^-\"\nvalue = \"40 g/L\"\nmethod = \"electrode-fluoride\"\n");
  REQUIRE(readings.titrations.size() == 3);
  CHECK(readings.titrations[0].excess.v == Approx(0.05).epsilon(1e-14));
  CHECK(readings.titrations[0].excess_strength.v == 0.05);
  CHECK(readings.titrations[1].diluted_to.v == Approx(0.5).epsilon(1e-14));
  CHECK(readings.titrations[1].aliquot.v == Approx(0.01).epsilon(1e-14));
  CHECK(readings.titrations[1].second_burette.v == Approx(0.015).epsilon(1e-14));
  CHECK(readings.titrations[2].weighed.v == Approx(0.4512e-3).epsilon(1e-14));
  CHECK(readings.found[0].method == "electrode-fluoride");
  CHECK(readings.found[0].method_where == "r.toml:26: found.method");
}

TEST_CASE("who sampled and titrated what, and from which bottle, is read as it stands", "[unit][shopfiles]") {
  const Readings readings = readings_of(
      "sample_number = \"2611-07\"\nsampled_by = \"J. Marsh\"\n"
      "[[titration]]\nquantity = \"Ni^2+\"\nmethod = \"edta-nickel\"\nsample = \"2 mL\"\ntitrant = \"0.1 mol/L\"\n"
      "burette = \"23.8 mL\"\ntitrant_lot = \"E-2611\"\ntitrated_by = \"M. Okafor\"\n");
  CHECK(readings.sample_number == "2611-07");
  CHECK(readings.sampled_by == "J. Marsh");
  CHECK(readings.titrations.at(0).titrant_lot == "E-2611");
  CHECK(readings.titrations.at(0).titrated_by == "M. Okafor");
}

TEST_CASE("the sampling time may stand in quotes, with or without seconds", "[unit][shopfiles]") {
  for (const char* written : {"2026-03-02T05:40:00", "\"2026-03-02T05:40:00\"", "\"2026-03-02 05:40\""}) {
    INFO(written);
    CHECK(readings_of("sampled = " + std::string(written)).sampled == "2026-03-02T05:40:00");
  }
}

TEST_CASE("a titrant standardised in the shop is read, and used by its name", "[unit][shopfiles]") {
  const Readings readings = readings_of(
      "[[standardised]]\nname = \"EDTA-2611\"\ntitrant = \"EDTA\"\nagainst = \"zinc\"\n"
      "weighed = [\"0.1635 g\", \"164.2 mg\"]\nburette = [\"25.00 mL\", \"25,15 mL\"]\nblank = \"0.02 mL\"\n"
      "assay = \"99.9 %\"\ndiluted_to = \"250 mL\"\naliquot = \"25 mL\"\n"
      "[[standardised]]\nname = \"I2-7\"\ntitrant = \"iodine\"\nagainst = \"sodium thiosulfate\"\n"
      "taken = [\"25 mL\"]\nburette = [\"24.8 mL\"]\nknown_strength = \"THIO-12\"\n"
      "[[titration]]\nquantity = \"Ni^2+\"\nmethod = \"edta-nickel\"\nsample = \"2 mL\"\ntitrant = \"EDTA-2611\"\n"
      "burette = \"23.8 mL\"\ntitrant_state = \"week-old\"\n"
      "[[titration]]\nquantity = \"Fe^2+\"\nmethod = \"permanganate-iron-ii\"\nsample = \"10 mL\"\n"
      "titrant = \"0.1 N (5 eq/mol)\"\nburette = \"5 mL\"\n");
  REQUIRE(readings.standardised.size() == 2);
  const auto& edta = readings.standardised[0];
  CHECK(edta.name == "EDTA-2611");
  CHECK(edta.titrant == "EDTA");
  CHECK(edta.against == "zinc");
  REQUIRE(edta.weighed.size() == 2);
  CHECK(edta.weighed[1].v == Approx(0.1642e-3).epsilon(1e-14));
  CHECK(edta.burette.at(1).v == Approx(25.15e-3).epsilon(1e-14));
  CHECK(edta.blank.v == Approx(0.02e-3).epsilon(1e-14));
  CHECK(edta.assay == Approx(0.999).epsilon(1e-14));
  CHECK(edta.aliquot.v == Approx(25e-3).epsilon(1e-14));
  CHECK(edta.where == "r.toml:2: standardised.name");
  CHECK(readings.standardised[1].known_name == "THIO-12");
  CHECK(readings.standardised[1].taken.at(0).v == Approx(25e-3).epsilon(1e-14));
  REQUIRE(readings.titrations.size() == 2);
  CHECK(readings.titrations[0].titrant_name == "EDTA-2611");
  CHECK(readings.titrations[0].titrant_state == "week-old");
  CHECK(readings.titrations[1].titrant.v == Approx(0.02).epsilon(1e-14));
  CHECK(readings.titrations[1].equivalents == 5);
}
