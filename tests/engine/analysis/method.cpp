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
  CHECK(methods_for("Cl^-") == std::vector<std::string>{"mohr-chloride"});
}

TEST_CASE("an unknown method is nothing", "[unit][failure]") {
  CHECK(method("edta-gold") == nullptr);
  CHECK(method("") == nullptr);
  CHECK(methods_for("Au^+").empty());
}

TEST_CASE("every method is complete and no name is used twice", "[unit]") {
  std::set<std::string> names;
  for (const Method& m : methods()) {
    INFO(m.id);
    CHECK(names.insert(m.id).second);
    for (const std::string& alias : m.aliases) CHECK(names.insert(alias).second);
    CHECK(matter::Formula::parse(m.analyte));
    CHECK(m.mol_per_mol > 0);
    CHECK(m.usual_sample.v > 0);
    CHECK(m.usual_titrant.v > 0);
    CHECK(m.u_end_point_mL > 0);
    CHECK_FALSE(m.source.empty());
  }
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
