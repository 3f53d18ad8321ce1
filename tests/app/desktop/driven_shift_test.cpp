// A shift's work at the window, with mouse and keys, on the demonstration shop: the readings of
// baths/readings/n-07-morning.toml typed, a plan taken, an amount changed, a mixture refused, a slip issued
// and carried out, the log read, the shift handed over, a forecast moved and its charts saved.
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

void type_the_readings(Driver& driver) {
  driver.put("volume", "3 cm");
  driver.put("temperature", "54");
  driver.put("pH", "4,1");
  driver.put("titrant Ni²⁺", "0,1012");
  driver.put("burette Ni²⁺", "23,80");
  driver.put("titrant Cl⁻", "0.0998");
  driver.put("burette Cl⁻", "8.10");
  driver.put("titrant H₃BO₃", "0.1005 mol/L");
  driver.put("burette H₃BO₃", "11.90 mL");
}

bool quiet(Driver& driver) {
  return driver.until([&] { return !driver.desk().working(); });
}

std::vector<logbook::Entry> entries_of(const std::filesystem::path& log) {
  const auto book = logbook::Logbook::open(log, logbook::OpenMode::read_only, work::wall_clock());
  REQUIRE(book);
  CHECK(book->verify().ok);
  return *book->list();
}

}  // namespace

TEST_CASE("a shift's work at the window", "[desktop][window]") {
  const desktop_test::EmptyHome home;
  constexpr int width = 1280, height = 800;
  Driver driver(width, height, 1, {});
  REQUIRE(driver.view().first_start);
  driver.click("Open the demonstration shop");
  REQUIRE(driver.until([&] { return !driver.view().first_start; }));
  const auto shop = work::data_folder() / "demonstration";
  CHECK(driver.view().line.tanks.size() >= 25);

  // Shifts, so that the strip and the hand-over have one.
  driver.click("Settings");
  driver.put("zone", "Europe/Berlin");
  driver.click("Set the shifts");
  REQUIRE(driver.until([&] { return driver.view().hand_over.shifts_set; }));

  driver.click("The shift");
  driver.click("tank N-07");
  REQUIRE(driver.until([&] { return driver.view().readings.rows.size() == 3; }));
  type_the_readings(driver);
  REQUIRE(quiet(driver));
  REQUIRE(driver.view().readings.faults.empty());
  // README and tests/scenarios have the same figures from the command line.
  CHECK(driver.view().readings.rows[0].result.starts_with("70.68"));
  CHECK(driver.view().readings.rows[1].result.starts_with("14.33"));
  CHECK(driver.view().readings.rows[2].result.starts_with("36.97"));
  REQUIRE_FALSE(driver.view().additions.plans.empty());
  CHECK(driver.view().additions.ready);

  // An amount changed by hand: the plan becomes a list of one's own, and its end moves.
  const std::string planned = driver.view().state.rows.back().predicted;
  driver.press_at("slider nickel(II) sulfate hexahydrate", 0.9);
  REQUIRE(driver.until([&] { return driver.view().additions.edited && !driver.desk().working(); }));
  CHECK(driver.view().state.rows.front().predicted != planned);
  driver.click("Back to the plan");
  REQUIRE(driver.until([&] { return !driver.view().additions.edited && !driver.desk().working(); }));

  // Hypochlorite must not meet an acid nickel bath: refused in words and with the mark of a stop.
  const int before = driver.shot().count(charts::day_palette.stop);
  driver.click("shelf");
  driver.click("shelf sodium-hypochlorite", "shelf list");
  driver.click("Add it to the list");
  REQUIRE(driver.until([&] { return !driver.view().additions.refused.empty() && !driver.desk().working(); }));
  CHECK_FALSE(driver.view().additions.ready);
  driver.bring_into_sight("refused");
  CHECK(driver.shot().count(charts::day_palette.stop) > before);
  driver.click("Issue the slip");
  driver.pictures(5);
  CHECK(driver.view().slip.number == 0);
  driver.click("Back to the plan");
  REQUIRE(driver.until([&] { return driver.view().additions.ready && !driver.desk().working(); }));

  driver.click("Issue the slip");
  REQUIRE(driver.until([&] { return driver.view().slip.number > 0 && !driver.desk().working(); }));
  const std::int64_t slip = driver.view().slip.number;
  CHECK(std::filesystem::exists(shop / "printed" / ("slip-" + std::to_string(slip) + ".pdf")));
  // Who made it may not stand for it as well.
  driver.click("I have read it and stand for it");
  REQUIRE(driver.until([&] { return !driver.view().sign.fault.empty() && !driver.desk().working(); }));
  CHECK_FALSE(driver.view().slip.approved_by_second);
  driver.put("signer name", "M. Roth");
  driver.click("I have read it and stand for it");
  REQUIRE(driver.until([&] { return driver.view().slip.approved_by_second && !driver.desk().working(); }));
  const std::size_t steps = driver.view().slip.steps.size();
  REQUIRE(steps > 1);
  for (std::size_t i = 0; i < steps; ++i) {
    driver.click("step " + std::to_string(i + 1));
    INFO("step " << i + 1 << ": " << driver.view().sign.fault);
    REQUIRE(driver.until([&] {
      return i < driver.view().slip.steps.size() && !driver.view().slip.steps[i].done.empty() &&
             !driver.desk().working();
    }));
  }
  CHECK(driver.view().slip.all_done);
  driver.click("Close the slip: carried out");
  REQUIRE(driver.until([&] { return driver.view().slip.number == 0 && !driver.desk().working(); }));
  const LineView& line = driver.view().line;
  CHECK(line.tanks[static_cast<std::size_t>(line.selected)].word == "added: analyse again");

  driver.click("Log");
  driver.pictures(3);
  const auto found = std::ranges::find(driver.view().log.rows, slip, &LogRow::number);
  REQUIRE(found != driver.view().log.rows.end());
  CHECK(found->kind == "slip");
  driver.click("entry " + std::to_string(slip));
  REQUIRE(driver.until([&] { return !driver.view().log.shown_text.empty(); }));

  driver.click("Hand over");
  driver.click("Sign and hand over");
  REQUIRE(driver.until([&] { return driver.view().sign.said.find("Logged") != std::string::npos; }));

  driver.key(XK_2, true);  // Ctrl 2: the forecast
  REQUIRE(driver.view().page == PageName::forecast);
  REQUIRE(
      driver.until([&] { return !driver.view().forecast.charts.empty() && !driver.desk().working(); }, 120));
  const double bleed = driver.view().forecast.levers.front().value;
  driver.press_at("lever bleed", 0.6);
  REQUIRE(driver.until([&] { return driver.view().forecast.levers.front().value > bleed + 1; }, 120));
  const auto chart = home.path() / "build-up.svg";
  driver.put("forecast file", chart.string());
  driver.click("Save the charts");
  CHECK(std::filesystem::file_size(chart) > 1000);

  const auto log = entries_of(shop / "shift-log.sqlite");
  const auto count = [&](logbook::EntryKind kind) {
    return std::ranges::count(log, kind, &logbook::Entry::kind);
  };
  CHECK(count(logbook::EntryKind::analysis) == 1);
  CHECK(count(logbook::EntryKind::slip) == 1);
  CHECK(count(logbook::EntryKind::addition) == static_cast<std::ptrdiff_t>(steps));
  CHECK(count(logbook::EntryKind::slip_approved) == 1);
  CHECK(count(logbook::EntryKind::slip_closed) == 1);
  CHECK(count(logbook::EntryKind::hand_over) == 1);
}

TEST_CASE("typed readings are there again after the window is gone", "[desktop][window]") {
  const desktop_test::EmptyHome home;
  constexpr int width = 1100, height = 700;
  {
    Driver driver(width, height, 1, PROJECT_DIR "/baths");
    driver.click("tank N-07");
    REQUIRE(driver.until([&] { return driver.view().readings.rows.size() == 3; }));
    driver.put("burette Ni²⁺", "23,80");
  }
  Driver driver(width, height, 1, {});  // the shop is the one of last time
  driver.click("tank N-07");
  REQUIRE(driver.until([&] { return driver.view().readings.rows.size() == 3; }));
  CHECK(driver.view().readings.rows[0].burette == "23,80");
  driver.put("burette Ni²⁺", "no number");
  REQUIRE(driver.until(
      [&] { return !driver.view().readings.rows[0].fault.empty() && !driver.desk().working(); }));
  driver.click("Undo");
  REQUIRE(quiet(driver));
  CHECK(driver.view().readings.rows[0].fault.empty());
}
