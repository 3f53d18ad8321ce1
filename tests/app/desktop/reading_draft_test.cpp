#include <unistd.h>

#include <bathwright/shopfiles/readings_file.hpp>
#include <catch2/catch.hpp>
#include <fstream>

#include "model/reading_draft.hpp"

using namespace bathwright;
using namespace bathwright::desktop;

namespace {

Draft nickel_and_chloride() {
  Draft draft;
  draft.sampled = "2026-03-02T05:40:00";
  draft.volume = "2340";
  draft.temperature = "54 degC";
  draft.pH = "4,1";
  draft.rows = {{"Ni^2+", {"edta-nickel", ""}, 0, "2.00 mL", "0.1012 mol/L", "", ""},
                {"Cl^-", {"mohr-chloride", ""}, 1, "", "", "", "14.3 g/L"}};
  return draft;
}

}  // namespace

TEST_CASE("what is typed becomes the readings a file would give", "[unit][desktop]") {
  Draft draft = nickel_and_chloride();
  draft.rows[0].burette = "23,80";
  std::vector<int> line_of_row;
  const std::string text = readings_text(draft, {}, line_of_row);
  const auto readings = shopfiles::read_readings_text("typed", text);
  INFO(text);
  REQUIRE(readings);
  CHECK(readings->volume->v == Approx(2340));
  CHECK(*readings->pH == Approx(4.1));
  REQUIRE(readings->titrations.size() == 1);
  CHECK(readings->titrations[0].burette.v == Approx(0.02380));
  REQUIRE(readings->found.size() == 1);
  CHECK(line_of_row == std::vector<int>{5, 11});
}

TEST_CASE("a row not read yet is left out, a wrong one is named by its line", "[unit][desktop]") {
  Draft draft = nickel_and_chloride();
  std::vector<int> line_of_row;
  CHECK(shopfiles::read_readings_text("typed", readings_text(draft, {}, line_of_row))->titrations.empty());
  CHECK(line_of_row[0] == 0);
  draft.rows[0].burette = "23.80 \"\\";
  const auto readings = shopfiles::read_readings_text("typed", readings_text(draft, {}, line_of_row));
  REQUIRE_FALSE(readings);
  CHECK(readings.problems().front().where.find("typed:" + std::to_string(line_of_row[0] + 5)) == 0);
}

TEST_CASE("typing on in one field is one step of undo", "[unit][desktop]") {
  DraftHistory history(nickel_and_chloride());
  for (const char* text : {"2", "23", "23.8"}) history.type({0, Field::burette, text}, "");
  history.type({-1, Field::pH, "4.2"}, "");
  CHECK(history.now().rows[0].burette == "23.8");
  history.undo();
  CHECK(history.now().pH == "4,1");
  CHECK(history.now().rows[0].burette == "23.8");
  history.undo();
  CHECK(history.now() == nickel_and_chloride());
  CHECK_FALSE(history.can_undo());
  history.redo();
  CHECK(history.now().rows[0].burette == "23.8");
  history.type({0, Field::burette, "9"}, "");
  CHECK_FALSE(history.can_redo());
}

TEST_CASE("another method brings its usual sample and titrant", "[unit][desktop]") {
  DraftHistory history(nickel_and_chloride());
  history.choose({1, 0});
  CHECK_FALSE(history.now().rows[1].is_value());
  CHECK_FALSE(history.now().rows[1].sample.empty());
  history.choose({1, 7});
  history.choose({9, 0});
  CHECK(history.now().rows[1].method == 0);
}

TEST_CASE("typed readings are there after a crash", "[unit][desktop]") {
  const auto file =
      std::filesystem::temp_directory_path() / ("draft-" + std::to_string(::getpid())) / "N-07.json";
  Draft draft = nickel_and_chloride();
  const Draft blank = draft;
  draft.rows[0].burette = "23.80 mL";
  draft.pH = "\"4,2\xC3\xA9";
  REQUIRE(keep_draft(file, draft));
  const auto kept = kept_draft(file, blank);
  REQUIRE(kept);
  CHECK(**kept == draft);
  std::ofstream(file) << "{";
  CHECK_FALSE(kept_draft(file, blank));
  std::filesystem::remove_all(file.parent_path());
  CHECK_FALSE((*kept_draft(file, blank)).has_value());
}

TEST_CASE("a bare number keeps its meaning when another unit is chosen", "[unit][desktop]") {
  Draft draft;
  draft.volume = "620";
  draft.temperature = "130";
  draft.rows = {{"Ni^2+", {""}, 0, "", "", "", "9.4"}, {"Cl^-", {""}, 0, "", "", "", "14.3 g/L"}};
  DraftHistory history(draft);
  history.type({0, Field::value, "9,5"}, "");
  const HeadUnits heads{"US gal", "°F", {{"Ni^2+", "oz/US gal"}}};
  history.write_out(heads);
  CHECK(history.now().volume == "620 US gal");
  CHECK(history.now().temperature == "130 °F");
  CHECK(history.now().rows[0].value == "9,5 oz/US gal");
  CHECK(history.now().rows[1].value == "14.3 g/L");
  history.undo();
  CHECK(history.now().rows[0].value == "9.4 oz/US gal");
  draft.volume = "3 cm";
  CHECK(with_units(draft, heads).volume == "3 cm");
}
