// Each rule with a chemical that must be kept out and a near one that must pass.
#include <bathwright/bath/interlock.hpp>
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

}  // namespace

TEST_CASE("acid stays out of cyanide, and cyanide out of acid", "[unit][bath]") {
  const bath::Incompatible rule{"acid_cyanide", "hydrogen cyanide gas", Level::stop, "common practice"};
  const auto cyanide = bath_of({"H^+", "Cu^+", "CN^-", "Na^+"}, {rule}, {"sodium-cyanide"});
  for (const char* acid :
       {"sulfuric-acid", "hydrochloric-acid", "nitric-acid", "phosphoric-acid", "citric-acid"}) {
    INFO(acid);
    const auto* found = bath::forbidding_rule(cyanide, stock(acid));
    REQUIRE(found != nullptr);
    CHECK(found->level == Level::stop);
  }
  for (const char* near : {"sodium-cyanide", "copper-cyanide", "sodium-hydroxide", "rochelle-salt"}) {
    INFO(near);
    CHECK(bath::forbidding_rule(cyanide, stock(near)) == nullptr);
  }
  const auto acid = bath_of({"H^+", "Cu^2+", "SO4^2-"}, {rule}, {"sulfuric-acid"});
  for (const char* poison :
       {"sodium-cyanide", "potassium-cyanide", "copper-cyanide", "potassium-silver-cyanide"}) {
    INFO(poison);
    CHECK(bath::forbidding_rule(acid, stock(poison)) != nullptr);
  }
  CHECK(bath::forbidding_rule(acid, stock("sulfuric-acid")) == nullptr);
  CHECK(bath::forbidding_rule(acid, stock("hydrochloric-acid")) == nullptr);
}

TEST_CASE("of any other kind only the bath's own chemicals are free", "[unit][bath]") {
  const bath::Incompatible rule{"hypochlorite_acid", "chlorine gas", Level::stop, "common practice"};
  const auto pickle = bath_of({"H^+", "Fe^2+", "Cl^-"}, {rule}, {"hydrochloric-acid"});
  CHECK(bath::forbidding_rule(pickle, stock("sodium-hypochlorite")) != nullptr);
  CHECK(bath::forbidding_rule(pickle, stock("hydrochloric-acid")) == nullptr);
  CHECK(bath::forbidding_rule(pickle, stock("sodium-chloride")) == nullptr);
}

TEST_CASE("a rule may name one chemical, and a stop comes before a warning", "[unit][bath]") {
  const auto type = bath_of({"H^+", "Ni^2+"}, {{"sodium-sulfide", "stinks", Level::warn, ""},
                                               {"acid_sulfide", "hydrogen sulfide gas", Level::stop, ""}});
  const auto* found = bath::forbidding_rule(type, stock("sodium-sulfide"));
  REQUIRE(found != nullptr);
  CHECK(found->level == Level::stop);
  CHECK(bath::forbidding_rule(type, stock("nickel-sulfate")) == nullptr);
}
