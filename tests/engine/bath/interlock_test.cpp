// Each rule with a chemical that must be kept out and a near one that must pass.
#include <bathwright/bath/interlock.hpp>
#include <bathwright/matter/reactive_kind.hpp>
#include <catch2/catch.hpp>

using namespace bathwright;
using bath::Level;

namespace {

const matter::StockChemical& stock(const std::string& id) {
  const auto* found = matter::StockCatalogue::built_in().find(id);
  INFO(id);
  REQUIRE(found != nullptr);
  return *found;
}

bath::BathType bath_of(std::vector<std::string> components, std::vector<bath::Incompatible> rules,
                       std::vector<std::string> own = {}) {
  bath::BathType type;
  for (const std::string& one : components) type.components.push_back({one});
  type.incompatibilities = std::move(rules);
  for (const std::string& one : own) {
    type.additions.emplace_back();
    type.additions.back().supply = one;
  }
  return type;
}

bath::Held holding(std::vector<std::string> kinds) {
  bath::Held held;
  for (std::string& kind : kinds) held.kinds.push_back({std::move(kind), "somewhere"});
  return held;
}

std::string stopped_by(const bath::BathType& type, const bath::Held& held, const std::string& id) {
  const auto found = bath::interlock(type, held, stock(id));
  return found && found->level == Level::stop ? found->rule : "";
}

}  // namespace

TEST_CASE("acid stays out of cyanide, and cyanide out of acid", "[unit][bath]") {
  const bath::Incompatible rule{"acid_cyanide", "hydrogen cyanide gas", Level::stop, "common practice"};
  const auto cyanide = bath_of({"H^+", "Cu^+", "CN^-", "Na^+"}, {rule}, {"sodium-cyanide"});
  for (const char* acid : {"sulfuric-acid", "hydrochloric-acid", "nitric-acid", "phosphoric-acid",
                           "citric-acid", "tartaric-acid", "acetic-acid", "sodium-hydrogen-carbonate"}) {
    INFO(acid);
    CHECK(stopped_by(cyanide, {}, acid) == "acid_cyanide");
    // Whatever its bath type says, a tank that holds cyanide takes no acid.
    CHECK(stopped_by(bath_of({"H^+", "CN^-"}, {}, {acid}), holding({"cyanide"}), acid) == "acid_cyanide");
  }
  for (const char* near : {"sodium-cyanide", "copper-cyanide", "sodium-hydroxide", "rochelle-salt"}) {
    INFO(near);
    CHECK(stopped_by(cyanide, holding({"cyanide"}), near).empty());
  }
  const auto acid = bath_of({"H^+", "Cu^2+", "SO4^2-"}, {rule}, {"sulfuric-acid"});
  for (const char* poison :
       {"sodium-cyanide", "potassium-cyanide", "copper-cyanide", "potassium-silver-cyanide"}) {
    INFO(poison);
    CHECK(stopped_by(acid, {}, poison) == "acid_cyanide");
    // A bath without cyanide takes none, whatever its type leaves out and whatever its pH.
    CHECK(stopped_by(bath_of({"H^+", "Zn^2+"}, {}), {}, poison) == "acid_cyanide");
    CHECK(stopped_by(bath_of({"H^+", "CN^-"}, {}, {poison}), holding({"acid"}), poison) == "acid_cyanide");
  }
  CHECK(stopped_by(acid, holding({"acid"}), "sulfuric-acid").empty());
  CHECK(stopped_by(acid, holding({"acid"}), "hydrochloric-acid").empty());
}

TEST_CASE("cyanide that is bound fast is not taken for free cyanide", "[unit][bath]") {
  const auto gold = bath_of({"H^+", "Au(CN)2^-", "cit^3-"}, {}, {"potassium-gold-cyanide", "citric-acid"});
  CHECK(stopped_by(gold, holding({"acid", "bound-cyanide", "organic"}), "citric-acid").empty());
  CHECK(stopped_by(gold, holding({"acid", "bound-cyanide", "organic"}), "potassium-gold-cyanide").empty());
  CHECK(stopped_by(gold, holding({"acid", "bound-cyanide", "cyanide"}), "citric-acid") == "acid_cyanide");
  CHECK(matter::kinds_of("KSCN").empty());
}

TEST_CASE("what the tank holds decides, not only its type", "[unit][bath]") {
  const auto any = bath_of({"H^+"}, {}, {"sulfuric-acid", "nitric-acid", "chromic-acid", "ammonia-solution"});
  struct Case {
    const char *rule, *chemical, *held;
  };
  for (const Case& c :
       {Case{"acid_sulfide", "sulfuric-acid", "sulfide"}, Case{"acid_sulfide", "sodium-sulfide", "acid"},
        Case{"hypochlorite_acid", "sodium-hypochlorite", "acid"},
        Case{"hypochlorite_acid", "sulfuric-acid", "hypochlorite"},
        Case{"hypochlorite_ammonia", "sodium-hypochlorite", "ammonia"},
        Case{"hypochlorite_ammonia", "ammonia-solution", "hypochlorite"},
        Case{"nitric_organic", "formic-acid", "nitric-acid"},
        Case{"nitric_reducer", "sodium-hypophosphite", "nitric-acid"},
        Case{"cr6_reductant", "sodium-metabisulfite", "chromium-6"},
        Case{"cr6_reductant", "stannous-sulfate", "chromium-6"},
        Case{"oxidizer_organic", "acetic-acid", "chromium-6"},
        Case{"oxidizer_cyanide", "hydrogen-peroxide", "cyanide"},
        Case{"base_aluminium", "sodium-hydroxide", "aluminium"},
        Case{"hcl_formaldehyde", "hydrochloric-acid", "formaldehyde"},
        Case{"nitrite", "sodium-nitrite", "sulfamate"}, Case{"acid_nitrite", "sodium-nitrite", "acid"}}) {
    INFO(c.chemical << " into " << c.held);
    CHECK(stopped_by(any, holding({c.held}), c.chemical) == c.rule);
    CHECK(stopped_by(any, {}, c.chemical).empty());
  }
  // The bath's own chemicals stand on its side of a pair, but for the gases that kill at once.
  const auto etch = bath_of({"H^+"}, {}, {"hydrogen-peroxide", "hydrochloric-acid"});
  CHECK(stopped_by(bath_of({"H^+"}, {}, {"sodium-nitrite"}), holding({"acid"}), "sodium-nitrite").empty());
  CHECK(stopped_by(bath_of({"H^+"}, {}, {"sodium-hypochlorite"}), holding({"acid"}), "sodium-hypochlorite") ==
        "hypochlorite_acid");
  CHECK(stopped_by(etch, holding({"acid"}), "hydrogen-peroxide").empty());
}

TEST_CASE("of any other kind only the bath's own chemicals are free", "[unit][bath]") {
  const bath::Incompatible rule{"hypochlorite_acid", "chlorine gas", Level::stop, "common practice"};
  const auto pickle = bath_of({"H^+", "Fe^2+", "Cl^-"}, {rule}, {"hydrochloric-acid"});
  CHECK(stopped_by(pickle, {}, "sodium-hypochlorite") == "hypochlorite_acid");
  CHECK(stopped_by(pickle, {}, "hydrochloric-acid").empty());
  CHECK(stopped_by(pickle, {}, "sodium-chloride").empty());
}

TEST_CASE("a rule may name one chemical, and a stop comes before a warning", "[unit][bath]") {
  const auto type = bath_of({"H^+", "Ni^2+"}, {{"sodium-sulfide", "stinks", Level::warn, ""},
                                               {"acid_sulfide", "hydrogen sulfide gas", Level::stop, ""}});
  CHECK(stopped_by(type, {}, "sodium-sulfide") == "acid_sulfide");
  CHECK(stopped_by(type, {}, "nickel-sulfate").empty());
}

TEST_CASE("hydrofluoric acid goes nowhere without its cautions", "[unit][bath]") {
  matter::StockChemical acid = stock("hydrofluoric-acid");
  auto type = bath_of({"H^+", "F^-"}, {}, {"hydrofluoric-acid"});
  const auto stops = [&] {
    const auto found = bath::interlock(type, holding({"acid"}), acid);
    return found && found->level == Level::stop;
  };
  acid.cautions = {"wear gloves"};
  CHECK(stops());
  acid.cautions = {"hydrofluoric acid goes through skin"};
  CHECK_FALSE(stops());
  acid.cautions.clear();
  type.cautions.push_back({"", "Hydrogen fluoride: gel laid out.", Level::stop, ""});
  CHECK_FALSE(stops());
}

TEST_CASE("water does not go into strong acid", "[unit][bath]") {
  matter::StockChemical water;
  water.id = "water";
  water.formula = "H2O";
  const auto strip = bath_of({"H^+", "SO4^2-"}, {});
  bath::Held held;
  held.sulfuric_acid_fraction = 0.6;
  REQUIRE(bath::interlock(strip, held, water));
  CHECK(bath::interlock(strip, held, water)->level == Level::stop);
  held.sulfuric_acid_fraction = 0.2;
  CHECK_FALSE(bath::interlock(strip, held, water));
}

TEST_CASE("two chemicals of one plan that must not meet", "[unit][bath]") {
  const auto phosphate = bath_of({"H^+"}, {}, {"phosphoric-acid", "sodium-nitrite"});
  const auto between = [&](const char* one, const char* other) {
    return bath::interlock_between(phosphate, stock(one), stock(other));
  };
  REQUIRE(between("phosphoric-acid", "sodium-nitrite"));
  CHECK(between("phosphoric-acid", "sodium-nitrite")->level == Level::warn);  // each alone is the bath's own
  REQUIRE(between("sodium-cyanide", "sulfuric-acid"));
  CHECK(between("sodium-cyanide", "sulfuric-acid")->level == Level::stop);
  REQUIRE(between("sulfuric-acid", "sodium-hypochlorite"));
  CHECK(between("sulfuric-acid", "sodium-hypochlorite")->level == Level::stop);
  CHECK_FALSE(between("phosphoric-acid", "zinc-dihydrogen-phosphate"));
  CHECK_FALSE(between("sodium-cyanide", "sodium-hydroxide"));
}

TEST_CASE(
    "every pair that names its sides names kinds there are, and every chemical that lists it has a side",
    "[unit][bath]") {
  const auto& catalogue = matter::StockCatalogue::built_in();
  const auto known = [](const std::string& kind) {
    for (const auto& one : matter::reactive_kinds())
      if (one.id == kind) return true;
    return false;
  };
  const std::vector<std::string> of_neither_side{"acid_cyanide potassium-ferrocyanide",
                                                 "acid_cyanide potassium-gold-cyanide",
                                                 "oxidizer_cyanide potassium-gold-cyanide",
                                                 "acid_cyanide potassium-thiocyanate",
                                                 "acid_nitrite thiourea",
                                                 "base_ammonia_gas sodium-nitrite"};
  for (const auto& pair : catalogue.incompatibilities()) {
    INFO(pair.id);
    CHECK(pair.kinds_a.empty() == pair.kinds_b.empty());
    for (const auto& kind : pair.kinds_a) CHECK(known(kind));
    for (const auto& kind : pair.kinds_b) CHECK(known(kind));
    if (pair.kinds_a.empty()) continue;
    for (const std::string& id : catalogue.ids()) {
      const auto& one = *catalogue.find(id);
      if (std::ranges::find(one.incompatible_with, pair.id) == one.incompatible_with.end()) continue;
      // Bound cyanide has a pair of its own; of the others the store keeps apart what no bath brings
      // together.
      if (std::ranges::count(of_neither_side, pair.id + " " + id) > 0) continue;
      INFO(id);
      bool told = false;
      for (const std::string& kind : matter::kinds_of(one.formula))
        told = told || std::ranges::count(pair.kinds_a, kind) + std::ranges::count(pair.kinds_b, kind) > 0;
      CHECK(told);
    }
  }
}
