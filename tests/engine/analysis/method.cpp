#include <algorithm>
#include <bathwright/analysis/method.hpp>
#include <bathwright/data/tables.hpp>
#include <bathwright/matter/formula.hpp>
#include <catch2/catch.hpp>
#include <set>

using namespace bathwright;
using namespace bathwright::analysis;

TEST_CASE("a method is found by its id and by its aliases", "[unit]") {
  REQUIRE(method("edta-nickel"));
  CHECK(method("edta-nickel") == method("ni_edta"));
  CHECK(method("mohr-chloride") == method("cl_mohr"));
  CHECK(method("mohr-nickel-chloride") == method("ni_from_cl"));
  CHECK(method("mannitol-boric-acid") == method("boric_mannitol"));
}

TEST_CASE("what a method finds: its analytes, and a quantity that counts one of them alone", "[unit]") {
  const auto quantity = [](const std::string& formula, speciation::Composition counts) {
    return bath::Quantity{formula, formula, *matter::Formula::parse(formula), std::move(counts)};
  };
  const auto per_analyte = [&](const char* id, const bath::Quantity& q) {
    return quantity_per_analyte(*method(id), q);
  };
  CHECK(per_analyte("edta-copper", quantity("Cu^2+", {{"Cu^2+", 1}})) == 1);
  CHECK(per_analyte("edta-copper", quantity("CuSO4.5H2O", {{"Cu^2+", 1}})) == 1);
  CHECK(per_analyte("mohr-chloride", quantity("NiCl2.6H2O", {{"Cl^-", 0.5}})) == 0.5);
  CHECK(per_analyte("acid-free-hydroxide", quantity("NaOH", {{"H^+", -1}, {"Zn^2+", -4}})) == 1);
  CHECK_FALSE(per_analyte("edta-nickel", quantity("NiSO4.6H2O", {{"Ni^2+", 1}, {"Cl^-", -0.5}})));
  CHECK_FALSE(per_analyte("permanganate-iron-ii", quantity("Fe^3+", {{"Fe^3+", 1}})));
  CHECK_FALSE(per_analyte("edta-nickel", quantity("Cl^-", {{"Cl^-", 1}})));
  const auto chloride = methods_for(quantity("Cl^-", {{"Cl^-", 1}}));
  CHECK(std::ranges::count(chloride, "potentiometric-chloride") == 1);
  CHECK(methods_for(quantity("F^-", {{"F^-", 1}})).empty());  // only stated by an instrument
}

TEST_CASE("an unknown method is nothing", "[unit][failure]") {
  CHECK(method("edta-gold") == nullptr);
  CHECK(method("") == nullptr);
}

TEST_CASE("every method is complete and no name is used twice", "[unit]") {
  std::set<std::string> names;
  for (const Method& m : methods()) {
    INFO(m.id);
    CHECK(names.insert(m.id).second);
    for (const std::string& alias : m.aliases) CHECK(names.insert(alias).second);
    CHECK_FALSE(m.analytes.empty());
    CHECK(m.usual_sample.v > 0);
    CHECK((m.mol_per_mol > 0) == (m.kind != Kind::stated));
    CHECK((m.usual_titrant.v > 0) == (m.kind != Kind::stated && m.kind != Kind::weighed));
    CHECK((m.kind == Kind::back) == (m.reagent_per_back > 0 && !m.back_titrant.empty()));
    CHECK((m.kind == Kind::difference) == (m.times_second != 0));
    CHECK((m.kind != Kind::weighed || matter::Formula::parse(m.titrant)));
    CHECK((m.usual_flask.v > 0) == (m.usual_aliquot.v > 0));
    CHECK(m.u_end_point_mL > 0);
    CHECK(m.u_method_rel > 0);
    CHECK_FALSE(m.steps.empty());
    CHECK_FALSE(m.interferences.empty());
    CHECK_FALSE(m.reaction.empty());
    CHECK_FALSE(m.source.empty());
  }
  CHECK(methods().size() == 68);
}

TEST_CASE("every row behind an uncertainty has a source and says whether it rests on memory", "[unit]") {
  for (const auto* name :
       {"analysis/titrations.csv", "analysis/glassware.csv", "analysis/uncertainty_terms.csv"}) {
    const auto table = data::built_in_table(name, {});
    for (std::size_t i = 0; i < table.size(); ++i) {
      INFO(table[i].where());
      CHECK_FALSE(table[i]["source"].empty());
      CHECK_FALSE(table[i]["from_memory"].empty());
    }
  }
}
