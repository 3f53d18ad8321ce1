// The shipped bath type, found beside the test program and loaded as a user's run of the program would.
#include <algorithm>
#include <bathwright/matter/stock.hpp>
#include <catch2/catch.hpp>

#include "../../support/built_in_types.hpp"

using namespace bathwright;
using namespace bathwright::plugin_host;

namespace {

const bath::BathType& watts_nickel() {
  const BathTypes& types = built_in_types();
  for (const Listed& listed : types.list()) {
    INFO(text(listed.problems));
    CHECK(listed.state == State::ready);
  }
  const bath::BathType* found = types.find("watts-nickel");
  REQUIRE(found);
  return *found;
}

const bath::Indicator& indicator(std::string_view id) {
  const auto& all = watts_nickel().indicators;
  const auto found = std::ranges::find(all, id, &bath::Indicator::id);
  REQUIRE(found != all.end());
  return *found;
}

}  // namespace

TEST_CASE("Watts nickel is found and loaded from beside the program", "[unit][plugin_host]") {
  const bath::BathType& type = watts_nickel();
  CHECK(type.name == "Watts nickel");
  CHECK(type.convention == activity::Convention::interaction);
  CHECK(type.components.size() == 7);
  REQUIRE(type.quantity("NiSO4.6H2O"));
  CHECK(type.quantity("NiSO4.6H2O")->salt_view);
  CHECK(type.quantity("NiSO4.6H2O")->counts == speciation::Composition{{"Ni^2+", 1}, {"Cl^-", -0.5}});
  const auto solids = {"H3BO3",
                       "NiSO4.7H2O",
                       "NiSO4.6H2O (alpha)",
                       "NiSO4.6H2O (beta)",
                       "NiCl2.6H2O",
                       "Ni(OH)2 (freshly precipitated)",
                       "CaSO4.2H2O (gypsum)"};
  for (const char* solid : solids) {
    INFO(solid);
    CHECK(std::ranges::count(type.solids, solid, &bath::WatchedSolid::name) == 1);
  }
}

TEST_CASE("every supply of the addition rules stands in the store", "[property][plugin_host]") {
  for (const bath::AdditionRule& rule : watts_nickel().additions) {
    INFO(rule.supply);
    CHECK(matter::StockCatalogue::built_in().find(rule.supply));
  }
}

TEST_CASE("every supply that can injure has a caution of level stop that names the SDS",
          "[property][plugin_host]") {
  const auto& cautions = watts_nickel().cautions;
  for (const bath::AdditionRule& rule : watts_nickel().additions) {
    INFO(rule.supply);
    CHECK(std::ranges::any_of(cautions, [&](const bath::Caution& c) {
      return c.subject == rule.supply && c.level == bath::Level::stop &&
             c.text.find("SDS") != std::string::npos;
    }));
  }
}

TEST_CASE("the nickel and chloride windows follow from those of the salts", "[reference][plugin_host]") {
  // 280 g/L NiSO4.6H2O with 22.33 % nickel and 50 g/L NiCl2.6H2O with 24.69 %: 74.9 g/L; 29.83 % of 50 g/L is
  // 14.9 g/L chloride. The aims are these, rounded to the gram.
  const auto aim = [](std::string_view subject) {
    const auto& all = watts_nickel().windows;
    const auto found = std::ranges::find(all, subject, &bath::Window::subject);
    REQUIRE(found != all.end());
    return found->aim;
  };
  const auto part = [](const char* salt, const char* ion, double ions) {
    return ions * matter::Formula::parse(ion)->molar_mass().v / matter::Formula::parse(salt)->molar_mass().v;
  };
  const double nickel =
      aim("NiSO4.6H2O") * part("NiSO4.6H2O", "Ni^2+", 1) + aim("NiCl2.6H2O") * part("NiCl2.6H2O", "Ni^2+", 1);
  const double chloride = aim("NiCl2.6H2O") * part("NiCl2.6H2O", "Cl^-", 2);
  CHECK(aim("Ni^2+") == Approx(nickel).margin(0.5).epsilon(0));
  CHECK(aim("Cl^-") == Approx(chloride).margin(0.5).epsilon(0));
  CHECK(aim("chloride-to-nickel") == Approx(chloride / nickel).margin(0.005).epsilon(0));
}

TEST_CASE("the indicators of Watts nickel read the solved bath", "[unit][plugin_host]") {
  const std::vector<std::string> names = {"H^+", "H3BO3", "Ni^2+"};
  const std::vector<double> molality = {1e-4, 0.6, 1.2}, activity = {1e-4, 0.7, 0.01};
  std::vector<double> levels(watts_nickel().quantities.size(), 0);
  levels[0] = 75;  // nickel
  levels[1] = 15;  // chloride
  bath::IndicatorView view{55, 1000, 4, 5, levels, molality, activity, names};
  struct Row {
    const char* id;
    double value;
  };
  for (const Row& row :
       {Row{"chloride-to-nickel", 0.2}, {"free-nickel", -2}, {"undissociated-boric-acid", 0.6}}) {
    INFO(row.id);
    const auto value = indicator(row.id).evaluate(view);
    REQUIRE(value);
    CHECK(*value == Approx(row.value).margin(1e-12).epsilon(0));
  }
  levels[1] = bath::not_given;
  CHECK(indicator("chloride-to-nickel").evaluate(view).problems().front().kind == Fault::bad_input);
  levels[1] = 15, levels[0] = 0;
  CHECK(indicator("chloride-to-nickel").evaluate(view).problems().front().kind == Fault::out_of_range);
}
