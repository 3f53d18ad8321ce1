// A tank carried through what was done to it, by hand-worked amounts.
#include <bathwright/book/entries.hpp>
#include <cmath>

#include "../../support/demo_tank.hpp"

using namespace demo;
using logbook::EntryKind;

namespace {

book::Start start() {
  const bath::TankState made_up = state(280, 50, 42);
  const std::size_t n = made_up.component_mol.size();
  return {made_up, std::vector<double>(n * n, 0), {}, "analysis of entry 1", 1};
}

std::size_t at(const std::string& component) {
  const auto& names = chemistry().components();
  return static_cast<std::size_t>(std::find(names.begin(), names.end(), component) - names.begin());
}

book::Movement added(const std::string& chemical, double kg) {
  return {book::Addition{chemical, kg}, chemical, 5};
}

analysis::Carried carried(const std::vector<book::Movement>& movements, double hours = 0) {
  return book::carry(start(), movements, hours, tank(), chemistry());
}

}  // namespace

TEST_CASE("an addition brings what its formula and assay say, with a doubt of its own", "[reference]") {
  // 12.4 kg boric acid of 99.5 %: 12400 * 0.995 / 61.83 = 199.5 mol.
  const double before = start().state.component_mol[at("H3BO3")];
  const auto now = carried({added("boric-acid", 12.4)});
  CHECK(now.component_mol[at("H3BO3")] - before == Approx(199.5).epsilon(1e-3));
  REQUIRE(now.additions.size() == 1);
  CHECK(now.additions[0].entry == 5);
  const auto term =
      std::find_if(now.terms.begin(), now.terms.end(), [](const auto& t) { return t.entry == 5; });
  REQUIRE(term != now.terms.end());
  CHECK(term->component_mol[at("H3BO3")] == Approx(1.995).epsilon(1e-3));  // 1 %
}

TEST_CASE("a dump takes a share of everything, a level sets the water alone", "[unit]") {
  const auto now = carried({{book::Dumped{240}, "240 L", 6}});
  CHECK(now.component_mol[at("Ni^2+")] ==
        Approx(0.9 * start().state.component_mol[at("Ni^2+")]).epsilon(1e-6));
  CHECK(now.volume_L == Approx(2400).epsilon(1e-6));
  const auto low = carried({{book::StoodAt{2300}, "2300 L", 7}});
  CHECK(low.volume_L == Approx(2300).epsilon(1e-6));
  CHECK(low.component_mol == start().state.component_mol);
}

TEST_CASE("ampere hours move what the bath type says they move", "[reference]") {
  // Anodes give 1.0950 g/Ah, 96 % of it is plated: 1000 Ah leave 43.8 g, 0.746 mol, more in solution.
  const auto now = carried({{book::Worked{"deposition", 1000}, "1000 Ah", 8}});
  CHECK(now.component_mol[at("Ni^2+")] - start().state.component_mol[at("Ni^2+")] ==
        Approx(0.746).epsilon(2e-3));
}

TEST_CASE("time drags out, and every doubt grows with it", "[unit]") {
  const auto day = carried({}, 24), week = carried({}, 168);
  CHECK(day.component_mol[at("Ni^2+")] < start().state.component_mol[at("Ni^2+")]);
  const auto doubt = [&](const analysis::Carried& c) {
    double u2 = 0;
    for (const auto& term : c.terms) u2 += std::pow(term.component_mol[at("Ni^2+")], 2);
    return std::sqrt(u2);
  };
  CHECK(doubt(week) > 2 * doubt(day));
}

TEST_CASE("what the shelf does not have is named and not counted", "[failure]") {
  const auto now = carried({added("copper-sulfate", 3)});
  CHECK(now.component_mol == start().state.component_mol);
  REQUIRE(now.not_counted.size() == 1);
  CHECK_THAT(now.not_counted[0], Catch::Contains("entry 5") && Catch::Contains("shelf"));
}

TEST_CASE("entries are read as people and programs write them", "[unit]") {
  struct Row {
    EntryKind kind;
    const char* body;
    double amount;  ///< kg, L or Ah
  };
  const Row rows[] = {
      {EntryKind::addition, R"({"chemical":"boric-acid","amount":14,"unit":"kg"})", 14},
      {EntryKind::addition, R"({"chemical":"boric-acid","amount":"14 kg"})", 14},
      {EntryKind::addition, R"({"note":"14 kg boric acid"})", 14},
      {EntryKind::addition, R"({"note":"step 1, 500 g Boric Acid, lot 12"})", 0.5},
      {EntryKind::addition, R"({"note":"step 2, 21.36 L water"})", 21.32},  // 0.9982 kg/L
      {EntryKind::level, R"({"volume_L":2340})", 2340},
      {EntryKind::level, R"({"note":"3 cm below the mark"})", 2340},
      {EntryKind::level, R"({"level_below_mark":"3 cm"})", 2340},
      {EntryKind::dump, R"({"note":"200 L"})", 200},
      {EntryKind::ampere_hours, R"({"Ah":1250})", 1250},
      {EntryKind::ampere_hours, R"({"note":"1250 Ah"})", 1250},
  };
  for (const Row& row : rows) {
    INFO(row.body);
    const auto movement = must(book::movement_of(row.kind, row.body, tank(), watts()));
    const double amount = std::visit(
        [](const auto& of) -> double {
          using T = std::decay_t<decltype(of)>;
          if constexpr (std::is_same_v<T, book::Addition>)
            return of.kg;
          else if constexpr (std::is_same_v<T, book::Worked>)
            return of.units;
          else
            return of.L;
        },
        movement.of);
    CHECK(amount == Approx(row.amount).epsilon(1e-3));
  }
}

TEST_CASE("what can be read in two ways is not counted", "[failure]") {
  for (const char* body :
       {R"({"note":"14 kg"})", R"({"note":"boric acid"})", R"({"note":"14 kg boric acid and 5 kg"})",
        R"({"note":"14 bags boric acid"})", R"([])", R"({"chemical":"boric-acid"})"}) {
    INFO(body);
    CHECK_FALSE(book::movement_of(EntryKind::addition, body, tank(), watts()));
  }
}
