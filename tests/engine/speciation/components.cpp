// Formulae taken apart into what totals are counted in. The parts are worked out by hand: each conserves
// atoms and charge.
#include <bathwright/matter/stock.hpp>
#include <set>

#include "systems.hpp"

using namespace bathwright;
using namespace bathwright::speciation;

namespace {

const Equilibria& table() { return Equilibria::built_in(activity::Convention::interaction); }

matter::Formula formula(std::string_view text) {
  auto parsed = matter::Formula::parse(text);
  REQUIRE(parsed);
  return *std::move(parsed);
}

void check_conserved(const matter::Formula& whole, const Parts& parts) {
  std::map<std::string, double> rest;
  for (const matter::Atom& atom : whole.atoms()) rest[atom.element] += atom.count;
  double charge = whole.charge();
  const auto take = [&](std::string_view name, double count) {
    const matter::Formula part = formula(name);
    for (const matter::Atom& atom : part.atoms()) rest[atom.element] -= count * atom.count;
    charge -= count * part.charge();
  };
  for (const auto& [name, count] : parts.basis) take(name, count);
  take("H2O", parts.water);
  for (const auto& [element, count] : rest) CHECK(count == Approx(0).margin(1e-9).epsilon(0));
  CHECK(charge == Approx(0).margin(1e-9).epsilon(0));
}

}  // namespace

TEST_CASE("a formula is made up of basis species, protons and water", "[unit]") {
  struct Row {
    const char* formula;
    Composition basis;
    double water;
  };
  for (const Row& row : std::vector<Row>{
           {"H2O", {}, 1},
           {"NaOH", {{"H^+", -1}, {"Na^+", 1}}, 1},
           {"HCl", {{"H^+", 1}, {"Cl^-", 1}}, 0},
           {"H2SO4", {{"H^+", 2}, {"SO4^2-", 1}}, 0},
           {"NiSO4.6H2O", {{"Ni^2+", 1}, {"SO4^2-", 1}}, 6},
           {"NiCO3.2Ni(OH)2.4H2O", {{"H^+", -4}, {"Ni^2+", 3}, {"CO3^2-", 1}}, 8},
           {"NH4NO3", {{"H^+", 1}, {"NH3", 1}, {"NO3^-", 1}}, 0},
           {"(NH4)2SO4", {{"H^+", 2}, {"NH3", 2}, {"SO4^2-", 1}}, 0},
           {"Fe2(SO4)3", {{"Fe^3+", 2}, {"SO4^2-", 3}}, 0},
           {"FeSO4", {{"Fe^2+", 1}, {"SO4^2-", 1}}, 0},
           {"H3BO3", {{"H3BO3", 1}}, 0},
           {"Na2B4O7.10H2O", {{"H^+", -2}, {"Na^+", 2}, {"H3BO3", 4}}, 5},
           {"Na2S2O3", {{"Na^+", 2}, {"S2O3^2-", 1}}, 0},
           {"KH2PO4", {{"H^+", 2}, {"K^+", 1}, {"PO4^3-", 1}}, 0},
           {"CO2", {{"H^+", 2}, {"CO3^2-", 1}}, -1},
           {"Na2B4O7", {{"H^+", -2}, {"Na^+", 2}, {"H3BO3", 4}}, -5},
           {"K2Cr2O7", {{"H^+", 2}, {"K^+", 2}, {"CrO4^2-", 2}}, -1},
           {"CrO3", {{"H^+", 2}, {"CrO4^2-", 1}}, -1},
           {"Cu2O", {{"H^+", -2}, {"Cu^+", 2}}, 1},
           {"Na2C10H14N2O8.2H2O", {{"H^+", 2}, {"Na^+", 2}, {"edta^4-", 1}}, 2},
           {"NaC6H11O7", {{"Na^+", 1}, {"gluc^-", 1}}, 0},
           {"KNaC4H4O6.4H2O", {{"K^+", 1}, {"Na^+", 1}, {"tart^2-", 1}}, 4},
           {"Ni(SO3NH2)2.4H2O", {{"Ni^2+", 1}, {"NH2SO3^-", 2}}, 4},
           {"Sn(CH3SO3)2", {{"Sn^2+", 1}, {"CH3SO3^-", 2}}, 0},
           {"K2SnO3.3H2O", {{"H^+", -6}, {"K^+", 2}, {"Sn^4+", 1}}, 6},
           {"NH4HF2", {{"H^+", 2}, {"NH3", 1}, {"F^-", 2}}, 0},
           {"K4Fe(CN)6.3H2O", {{"K^+", 4}, {"Fe^2+", 1}, {"CN^-", 6}}, 3},
           {"Cr(OH)SO4", {{"H^+", -1}, {"Cr^3+", 1}, {"SO4^2-", 1}}, 1},
           {"Na2S2O5", {{"H^+", 2}, {"Na^+", 2}, {"SO3^2-", 2}}, -1},
       }) {
    INFO(row.formula);
    const auto parts = parts_of(formula(row.formula), table());
    INFO((parts ? std::string{} : text(parts.problems())));
    CHECK(parts);
    if (!parts) continue;
    CHECK(parts->basis == row.basis);
    CHECK(parts->water == Approx(row.water).margin(1e-9).epsilon(0));
  }
}

TEST_CASE("the parts of every built-in solid conserve its atoms and charge", "[property]") {
  for (const SolidData& solid : table().solids()) {
    INFO(solid.name);
    const matter::Formula whole = formula(solid.formula);
    const auto parts = parts_of(whole, table());
    INFO((parts ? std::string{} : text(parts.problems())));
    CHECK(parts);
    if (!parts) continue;
    check_conserved(whole, *parts);
  }
}

TEST_CASE("stock chemicals are made up of what the tables know, or listed", "[property]") {
  // No redox rows, and no equilibria of these organic substances: engine/data/README.md, "Weak rows and
  // gaps".
  const std::set<std::string> unknown = {"activated-carbon",
                                         "cerium-ammonium-sulfate",
                                         "formaldehyde",
                                         "hydrogen-peroxide",
                                         "hydrogen-peroxide-30",
                                         "hydrogen-peroxide-50",
                                         "iodine",
                                         "lauryl-sulfate",
                                         "mannitol",
                                         "potassium-iodate",
                                         "potassium-permanganate",
                                         "propionic-acid",
                                         "saccharin",
                                         "sodium-dithionite",
                                         "sodium-hypochlorite",
                                         "thiourea",
                                         "zinc-dust"};
  const auto& stock = matter::StockCatalogue::built_in();
  for (const auto convention : {activity::Convention::interaction, activity::Convention::association}) {
    for (const std::string& id : stock.ids()) {
      INFO(id);
      const matter::Formula whole = formula(stock.find(id)->formula);
      const auto parts = parts_of(whole, Equilibria::built_in(convention));
      CHECK(bool(parts) == !unknown.contains(id));
      if (parts) check_conserved(whole, *parts);
    }
  }
}

TEST_CASE("a ligand named by its token stays whole", "[unit]") {
  // Its atoms alone would read as thiocyanate, acetate and succinate.
  CHECK(parts_of(formula("NaC7H4NO3S.2H2O"), table()));
  CHECK_FALSE(parts_of(formula("Na(sac).2H2O"), table()));
  const auto citrate = parts_of(formula("Na3(cit).2H2O"), table());
  REQUIRE(citrate);
  CHECK(citrate->basis == Composition{{"Na^+", 3}, {"cit^3-", 1}});
}

TEST_CASE("what no known ions make up is refused by name", "[failure]") {
  for (const char* text : {"XeF6", "NiAu", "Na"}) {
    INFO(text);
    const auto parts = parts_of(formula(text), table());
    REQUIRE_FALSE(parts);
    CHECK(parts.problems()[0].where == text);
    CHECK_FALSE(parts.problems()[0].expected.empty());
  }
}

TEST_CASE("the nominal ions of salts, strong acids and bases", "[unit]") {
  for (const auto& [text, ions] : std::vector<std::pair<const char*, Composition>>{
           {"NaCl", {{"Na^+", 1}, {"Cl^-", 1}}},
           {"H2SO4", {{"H^+", 2}, {"SO4^2-", 1}}},
           {"NaH2PO4", {{"Na^+", 1}, {"H2PO4^-", 1}}},
           {"NaOH", {{"Na^+", 1}, {"OH^-", 1}}},
           {"NH4Cl", {{"NH4^+", 1}, {"Cl^-", 1}}},
           {"(NH4)2SO4", {{"NH4^+", 2}, {"SO4^2-", 1}}},
           {"NiSO4.6H2O", {{"Ni^2+", 1}, {"SO4^2-", 1}}},
           {"Al2(SO4)3", {{"Al^3+", 2}, {"SO4^2-", 3}}},
           {"KNO3", {{"K^+", 1}, {"NO3^-", 1}}},
           {"H3BO3", {}},
           {"CO2", {}},
       }) {
    INFO(text);
    CHECK(nominal_ions(formula(text), table()) == ions);
  }
}
