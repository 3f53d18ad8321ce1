// A shift's work at the window with the keys alone: the mouse is never touched, and wherever the focus goes
// it is seen.
#include <X11/keysym.h>

#include <bathwright/logbook/logbook.hpp>
#include <catch2/catch.hpp>

#include "driver.hpp"
#include "work/shift_log.hpp"
#include "work/user_folders.hpp"

using namespace bathwright;
using namespace bathwright::desktop;
using desktop_test::Driver;

namespace {

constexpr int width = 1280, height = 800;

bool quiet(Driver& driver, double seconds = 60) {
  return driver.until([&] { return !driver.desk().working(); }, seconds);
}

void press(Driver& driver) {
  driver.key(XK_Return);
  driver.pictures(3);
}

/// Leads the focus there with the arrows and presses Enter.
void press(Driver& driver, const std::string& name) {
  driver.walk_to(name);
  INFO(name);
  if (!name.starts_with("entry")) CHECK(driver.focus_is_seen());  // a row of a list is lit and edged instead
  press(driver);
}

void fill(Driver& driver, const std::string& field, const std::string& text) {
  driver.tab_to(field);
  INFO(field);
  CHECK(driver.focus_is_seen());
  driver.type(text);
}

}  // namespace

TEST_CASE("a shift's work with the keys alone", "[desktop][window]") {
  const desktop_test::EmptyHome home;
  Driver driver(width, height, 1, {});
  REQUIRE(driver.view().first_start);
  press(driver, "Open the demonstration shop");
  REQUIRE(driver.until([&] { return !driver.view().first_start; }));

  // A tank of the line.
  driver.key(XK_F6);
  driver.pictures(2);
  REQUIRE(driver.focused().starts_with("tank "));
  press(driver, "tank N-07");
  REQUIRE(driver.until([&] { return driver.view().readings.rows.size() == 3; }));

  // The readings, from field to field.
  driver.key(XK_F6);
  driver.pictures(2);
  REQUIRE(driver.focused() == "volume");
  fill(driver, "volume", "3 cm");
  for (const auto& [field, text] : {std::pair{"temperature", "54"},
                                    {"pH", "4,1"},
                                    {"titrant Ni²⁺", "0,1012"},
                                    {"burette Ni²⁺", "23,80"},
                                    {"titrant Cl⁻", "0.0998"},
                                    {"burette Cl⁻", "8.10"},
                                    {"titrant H₃BO₃", "0.1005"},
                                    {"burette H₃BO₃", "11.90"}})
    fill(driver, field, text);
  REQUIRE(quiet(driver));
  CHECK(driver.view().readings.rows[0].result.starts_with("70.68"));
  REQUIRE(driver.view().additions.plans.size() > 1);

  // The second plan, then an amount of its own.
  press(driver, "plan 2");
  REQUIRE(quiet(driver));
  CHECK(driver.view().additions.plan == 1);
  const std::string chemical = driver.view().additions.additions.front().chemical;
  const double planned = driver.view().additions.additions.front().amount;
  driver.walk_to("amount " + chemical);
  press(driver);
  driver.type("12.5");
  REQUIRE(driver.until([&] { return driver.view().additions.edited && !driver.desk().working(); }));
  CHECK(driver.view().additions.additions.front().amount == Approx(12.5));
  press(driver);  // out of the field
  driver.walk_to("slider " + chemical);
  driver.key(XK_space);
  driver.pictures(2);
  driver.key(XK_Right);
  driver.pictures(2);
  driver.key(XK_space);
  REQUIRE(quiet(driver));
  CHECK(driver.view().additions.additions.front().amount > 12.5);
  press(driver, "Back to the plan");
  REQUIRE(driver.until([&] { return !driver.view().additions.edited && !driver.desk().working(); }));
  CHECK(driver.view().additions.additions.front().amount == Approx(planned));

  press(driver, "Issue the slip");
  REQUIRE(driver.until([&] { return driver.view().slip.number > 0 && !driver.desk().working(); }));
  // The button that issued it is gone: the focus waits where the second person's name goes.
  REQUIRE(driver.until([&] { return driver.focused() == "signer name"; }));
  driver.type("M. Roth");
  press(driver);  // out of the field
  press(driver, "I have read it and stand for it");
  REQUIRE(driver.until([&] { return driver.view().slip.approved_by_second && !driver.desk().working(); }));
  press(driver, "step 1");
  REQUIRE(
      driver.until([&] { return !driver.view().slip.steps[0].done.empty() && !driver.desk().working(); }));

  driver.key(XK_4, true);  // Ctrl 4: the log
  REQUIRE(driver.until([&] { return driver.view().page == PageName::log; }));
  REQUIRE(driver.focused() == "filter");
  REQUIRE(driver.until([&] { return driver.view().log.rows.size() >= 3 && !driver.desk().working(); }));
  const std::int64_t newest = driver.view().log.rows.front().number;
  driver.key(XK_Down);  // onto the list
  driver.pictures(2);
  press(driver);  // into it
  press(driver, "entry " + std::to_string(newest));
  REQUIRE(driver.until([&] { return !driver.view().log.shown_text.empty(); }));

  driver.key(XK_2, true);  // Ctrl 2: the forecast
  REQUIRE(driver.until([&] { return !driver.view().forecast.charts.empty(); }));
  fill(driver, "lever bleed", "120");
  press(driver);
  REQUIRE(driver.until([&] { return driver.view().forecast.levers.front().value == 120; }));
  const auto chart = home.path() / "build-up.svg";
  fill(driver, "forecast file", chart.string());
  press(driver);  // out of the field
  press(driver, "Save the charts");
  REQUIRE(std::filesystem::exists(chart));
  CHECK(std::filesystem::file_size(chart) > 1000);

  // The list of keys, and away with it.
  driver.key(XK_F1);
  driver.pictures(3);
  CHECK(driver.focused() == "Close");
  driver.key(XK_Escape);
  driver.pictures(3);
  CHECK(driver.focused() != "Close");
}
