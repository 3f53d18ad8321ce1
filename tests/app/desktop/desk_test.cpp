// The model behind the window on the demonstration shop, without a window.
#include <stdlib.h>

#include <algorithm>
#include <bathwright/bath/at_aims.hpp>
#include <bathwright/sheets/page.hpp>
#include <catch2/catch.hpp>
#include <chrono>
#include <fstream>
#include <thread>

#include "../../support/demo_tank.hpp"
#include "model/desk.hpp"

using namespace bathwright;
using namespace bathwright::desktop;
namespace fs = std::filesystem;

namespace {

/// A home of its own for what the program keeps, gone with the object.
class Home {
 public:
  Home() {
    std::string name = (fs::temp_directory_path() / "desk-model-XXXXXX").string();
    REQUIRE(::mkdtemp(name.data()));
    path = name;
    for (const char* variable : {"XDG_DATA_HOME", "XDG_STATE_HOME", "XDG_CACHE_HOME"})
      ::setenv(variable, (path / variable).c_str(), 1);
    ::setenv("USER", "okafor", 1);
  }
  ~Home() {
    std::error_code failed;
    fs::remove_all(path, failed);
  }
  Home(const Home&) = delete;
  Home& operator=(const Home&) = delete;

  fs::path path;
};

work::Session logging_to(const fs::path& log) {
  work::Session session;
  session.log_file = log.string();
  return session;
}

work::Session with_plugins_of(const fs::path& folder) {
  work::Session session;
  session.plugin_folders = {folder.string()};
  return session;
}

/// A copy of one of the plugins made for tests, alone in a folder of the user's.
fs::path own_plugin(const Home& home, const std::string& name) {
  const fs::path folder = home.path / "mine";
  fs::create_directories(folder);
  fs::copy_file(fs::path(TEST_PLUGINS) / name, folder / name);
  return folder / name;
}

void rest(Desk& desk) {
  using namespace std::chrono_literals;
  const auto until = std::chrono::steady_clock::now() + 120s;
  desk.update();
  while (desk.working() && std::chrono::steady_clock::now() < until) {
    std::this_thread::sleep_for(5ms);
    desk.update();
  }
  desk.update();
}

void ask(Desk& desk, const Intent& intent) {
  desk.handle(intent);
  rest(desk);
}

void open(Desk& desk, const std::string& tank) {
  rest(desk);
  const auto& tanks = desk.view().line.tanks;
  const auto found = std::ranges::find(tanks, tank, &TankOnLine::name);
  REQUIRE(found != tanks.end());
  ask(desk, OpenTank{static_cast<int>(found - tanks.begin())});
}

/// baths/readings/n-07-morning.toml as it is typed.
void type_the_readings(Desk& desk) {
  open(desk, "N-07");
  REQUIRE(desk.view().readings.rows.size() == 3);
  for (const auto& [row, field, text] :
       std::initializer_list<std::tuple<int, Field, const char*>>{{-1, Field::volume, "3 cm"},
                                                                  {-1, Field::temperature, "54"},
                                                                  {-1, Field::pH, "4.1"},
                                                                  {0, Field::titrant, "0.1012"},
                                                                  {0, Field::burette, "23.80"},
                                                                  {1, Field::titrant, "0.0998"},
                                                                  {1, Field::burette, "8.10"},
                                                                  {2, Field::titrant, "0.1005"},
                                                                  {2, Field::burette, "11.90"}})
    desk.handle(TypeReading{row, field, text});
  rest(desk);
  REQUIRE(desk.view().readings.faults.empty());
}

/// So much nickel that only taking bath out brings it inside its window, and the plan that does.
void choose_to_take_bath_out(Desk& desk) {
  ask(desk, TypeReading{0, Field::burette, "28.80"});
  const auto& plans = desk.view().additions.plans;
  const auto decant =
      std::ranges::find_if(plans, [](const auto& plan) { return plan.starts_with("with decant"); });
  REQUIRE(decant != plans.end());
  ask(desk, ChoosePlan{static_cast<int>(decant - plans.begin())});
}

SetUnit choice(const std::string& what, const std::string& unit) {
  const auto& all = sheets::unit_choices();
  const auto which = std::ranges::find(all, what, &sheets::UnitChoice::what);
  REQUIRE(which != all.end());
  const auto chosen = std::ranges::find(which->all, unit);
  REQUIRE(chosen != which->all.end());
  return {static_cast<int>(which - all.begin()), static_cast<int>(chosen - which->all.begin())};
}

}  // namespace

TEST_CASE("every page's figures are in the chosen units", "[desktop]") {
  const Home home;
  Desk desk({}, PROJECT_DIR "/baths", [] {});
  type_the_readings(desk);
  const std::string in_kg = desk.view().additions.steps.back().what;
  const auto boric_acid = [&] { return desk.view().state.rows[2]; };
  CHECK(boric_acid().unit == "g/L");
  CHECK(boric_acid().found == "37.0");

  ask(desk, choice("concentrations", "mol/L"));
  constexpr double g_per_mol = 61.83;
  CHECK(boric_acid().unit == "mol/L");
  CHECK(std::stod(boric_acid().found) == Approx(36.97 / g_per_mol).epsilon(2e-3));
  CHECK(desk.view().readings.rows[2].result.ends_with("mol/L"));
  CHECK(desk.view().state.rows[3].found == "4.10");  // a pH has no unit

  ask(desk, choice("concentrations", "% w/w"));
  CHECK(boric_acid().unit == "% w/w");
  CHECK(std::stod(boric_acid().found) == Approx(36.97 / 11.75).epsilon(5e-3));  // 1.175 kg/L stands beside it

  ask(desk, choice("concentrations", "N"));
  CHECK(boric_acid().unit == "g/L");  // no equivalents
  CHECK(desk.view().readings.rows[0].result.ends_with("N (2 eq/mol)"));
  CHECK(desk.view().additions.steps.back().then.find("boric acid 42.0 g/L, pH 4.20, 2400 L") !=
        std::string::npos);

  ask(desk, choice("masses", "lb"));
  ask(desk, choice("densities", "°Bé"));
  CHECK(desk.view().additions.steps.back().what != in_kg);
  CHECK(desk.view().additions.additions.back().unit == "lb");
  CHECK(desk.view().chemistry.figures.back().now.ends_with("°Bé"));
  const double planned = desk.view().additions.additions.back().amount;
  const int last = static_cast<int>(desk.view().additions.additions.size()) - 1;
  ask(desk, DragAmount{last, 2 * planned});  // in pounds, as it is shown
  CHECK(desk.view().additions.additions.back().amount == Approx(2 * planned));
}

TEST_CASE("the path ends where the plan does, and leads what is told of the end", "[desktop]") {
  const Home home;
  Desk desk(logging_to(home.path / "log.sqlite"), PROJECT_DIR "/baths", [] {});
  type_the_readings(desk);
  const auto ends_as_its_last_step = [&] {
    const DeskView& view = desk.view();
    INFO(view.additions.steps.back().then);
    // "..., pH 4.20, 2400 L"
    CHECK(view.additions.steps.back().then.find("pH " + view.state.rows.back().predicted) !=
          std::string::npos);
    CHECK(view.chemistry.figures.front().then == view.state.rows.back().predicted);
    CHECK(view.chemistry.path.front().lines.front().y.back() ==
          Approx(std::stod(view.state.rows.back().predicted)).margin(0.005));
  };
  ends_as_its_last_step();
  ask(desk, DragAmount{1, 20});
  ends_as_its_last_step();
  const double before = desk.view().chemistry.path.front().lines.front().x.back();
  ask(desk, DragAmount{1, 25});
  CHECK(desk.view().chemistry.path.front().lines.front().x.back() == Approx(before + 5));

  // A dragged amount is no list yet that somebody may sign for.
  desk.handle(DragAmount{1, 30});
  desk.handle(IssueSlip{});
  CHECK(desk.view().slip.number == 0);
  rest(desk);
  CHECK(desk.view().slip.number == 0);
  CHECK(desk.view().additions.checked);
}

TEST_CASE("the path of a dragged amount is there with the next picture", "[desktop]") {
  const Home home;
  Desk desk(logging_to(home.path / "log.sqlite"), PROJECT_DIR "/baths", [] {});
  type_the_readings(desk);
  const auto end = [&] { return desk.view().chemistry.path.front().lines.front().x.back(); };
  const double amount = desk.view().additions.additions[1].amount, before = end();
  constexpr int steps = 20;
  int at_once = 0;
  for (int i = 1; i <= steps; ++i) {
    desk.handle(DragAmount{1, amount + i});
    desk.update();
    if (end() == Approx(before + i)) ++at_once;
  }
#if !defined(__SANITIZE_THREAD__) && !defined(__SANITIZE_ADDRESS__)  // which make a path too slow for it
  CHECK(at_once > steps / 2);  // where the machine is held up elsewhere, one may come with the checks
#endif
  rest(desk);
  CHECK(end() == Approx(before + steps));
  CHECK(desk.view().additions.checked);
}

TEST_CASE("a path ends where it is told to, and says that it is not whole", "[desktop]") {
  const Home home;
  const work::Shop shop = demo::must(work::open_shop({}, PROJECT_DIR "/baths/n-07.toml"));
  const bath::TankState state = demo::must(bath::state_at_aims(shop.tank, shop.chemistry));
  const std::vector<Move> moves = moves_of(OwnList{10.0, {{"boric-acid", 5}}});
  int asked = 0;
  const Path all = path_of(shop, state, moves, [&] { return ++asked < 0; });
  CHECK(all.whole);
  CHECK(all.points.size() == static_cast<std::size_t>(asked));
  CHECK(all.points.back().kg == Approx(5));
  CHECK(all.points[1].kg == 0);  // bath goes out before anything goes in
  CHECK(all.points[1].view.volume_L == Approx(all.points[0].view.volume_L - 10));
  const Path part = path_of(shop, state, moves, [&] { return --asked < 10; });
  CHECK_FALSE(part.whole);
  CHECK(part.points.size() < all.points.size());
  const Path dry = path_of(shop, state, moves_of(OwnList{1e6, {}}), [] { return false; });
  CHECK_FALSE(dry.whole);  // nothing is left to solve
  CHECK(dry.points.size() == 1);
}

TEST_CASE("a plan that takes bath out keeps that when its amounts are changed", "[desktop]") {
  const Home home;
  Desk desk(logging_to(home.path / "log.sqlite"), PROJECT_DIR "/baths", [] {});
  type_the_readings(desk);
  choose_to_take_bath_out(desk);
  const AdditionRow out = desk.view().additions.additions.front();
  CHECK(out.chemical == "bath taken out");
  CHECK(desk.view().additions.steps.front().what.ends_with(" bath"));
  const auto sulfate = [&] { return std::stod(desk.view().state.rows.front().predicted); };
  const double planned = sulfate();
  CHECK(planned < 300);  // inside its window, which only taking bath out brings it to

  const int last = static_cast<int>(desk.view().additions.additions.size()) - 1;
  ask(desk, DragAmount{last, 1.1 * desk.view().additions.additions.back().amount});
  CHECK(desk.view().additions.edited);
  CHECK(desk.view().additions.steps.front().what.ends_with(" bath"));
  CHECK(sulfate() == Approx(planned).epsilon(2e-3));
  ask(desk, DragAmount{0, out.amount / 2});  // the same water thins more of it less
  CHECK(desk.view().additions.additions.front().amount == Approx(out.amount / 2));
  CHECK(sulfate() > planned + 1);

  ask(desk, DragAmount{0, 10000});  // more than there is
  REQUIRE_FALSE(desk.view().additions.refused.empty());
  CHECK(desk.view().additions.refused.front().find("ath taken out: 10000 L") != std::string::npos);
  CHECK_FALSE(desk.view().additions.ready);
  ask(desk, BackToPlan{});
  CHECK(desk.view().additions.refused.empty());
  CHECK(desk.view().additions.ready);
}

TEST_CASE("bath that a slip takes out is logged as taken out", "[desktop]") {
  const Home home;
  Desk desk(logging_to(home.path / "log.sqlite"), PROJECT_DIR "/baths", [] {});
  type_the_readings(desk);
  choose_to_take_bath_out(desk);
  ask(desk, IssueSlip{});
  INFO(desk.view().fault);
  REQUIRE(desk.view().slip.number > 0);
  CHECK(desk.view().slip.steps.front().what.starts_with("1  take out "));
  ask(desk, StepDone{1, {}});
  INFO(desk.view().fault << desk.view().sign.said);
  CHECK_FALSE(desk.view().slip.steps.front().done.empty());
  CHECK(desk.view().log.rows.front().kind == "dump");
}

TEST_CASE("nothing is signed for readings that were changed in the meantime", "[failure][desktop]") {
  const Home home;
  Desk desk(logging_to(home.path / "log.sqlite"), PROJECT_DIR "/baths", [] {});
  type_the_readings(desk);
  for (const Intent& signing : {Intent(IssueSlip{}), Intent(LogAnalysis{})}) {
    desk.handle(TypeReading{2, Field::burette, "12.10"});
    desk.update();
    CHECK_FALSE(desk.view().additions.ready);
    CHECK_FALSE(desk.view().sign.can_log);
    desk.handle(signing);
    CHECK(desk.update());
    CHECK(desk.view().fault.find("readings were changed") != std::string::npos);
    rest(desk);
    CHECK(desk.view().log.rows.empty());
    ask(desk, TypeReading{2, Field::burette, "11.90"});
  }
  ask(desk, IssueSlip{});
  CHECK(desk.view().slip.number > 0);
}

TEST_CASE("a forecast is of the tank that is open", "[desktop]") {
  const Home home;
  Desk desk(logging_to(home.path / "log.sqlite"), PROJECT_DIR "/baths", [] {});
  open(desk, "AL-1");
  desk.handle(GoTo{PageName::forecast});
  desk.handle(GoTo{PageName::shift});
  const auto& tanks = desk.view().line.tanks;
  const auto nickel = std::ranges::find(tanks, "N-07", &TankOnLine::name);
  ask(desk, OpenTank{static_cast<int>(nickel - tanks.begin())});  // while the first is at work
  desk.handle(GoTo{PageName::forecast});
  desk.update();
  CHECK(desk.view().forecast.limits.empty());  // nothing of the other
  rest(desk);
  CHECK(std::ranges::any_of(desk.view().forecast.limits,
                            [](const LimitRow& limit) { return limit.name.starts_with("nickel"); }));
}

TEST_CASE("a tank file that cannot be read stands in the line until it is mended", "[failure][desktop]") {
  const Home home;
  const fs::path shop = home.path / "shop";
  fs::create_directories(shop);
  fs::copy_file(PROJECT_DIR "/baths/al-1.toml", shop / "al-1.toml");
  std::ofstream(shop / "n-07.toml") << "name = 3\n";
  Desk desk(logging_to(home.path / "log.sqlite"), shop, [] {});
  rest(desk);
  REQUIRE(desk.view().line.unread.size() == 1);
  CHECK(desk.view().line.unread.front().file == "n-07.toml");
  CHECK(desk.view().line.unread.front().why.find("n-07.toml:1: name") != std::string::npos);
  CHECK(desk.view().line.tanks.size() == 1);
  fs::copy_file(PROJECT_DIR "/baths/n-07.toml", shop / "n-07.toml", fs::copy_options::overwrite_existing);
  ask(desk, OpenFolder{desk.view().line.folder});
  CHECK(desk.view().line.unread.empty());
  CHECK(desk.view().line.tanks.size() == 2);
}

TEST_CASE("a sample is timed to the second, so that what was added in the same minute stays before it",
          "[desktop]") {
  const Home home;
  Desk desk(logging_to(home.path / "log.sqlite"), PROJECT_DIR "/baths", [] {});
  constexpr std::size_t to_the_second = 19;
  const std::string before = logbook::iso_utc(work::wall_clock().utc_now()).substr(0, to_the_second);
  type_the_readings(desk);
  std::string typed;
  for (const auto& entry : fs::directory_iterator(home.path / "XDG_STATE_HOME/bathwright/typing"))
    if (entry.path().extension() == ".toml") {
      std::ifstream file(entry.path());
      typed.assign(std::istreambuf_iterator<char>(file), {});
    }
  const std::string key = "sampled = ";
  REQUIRE(typed.find(key) != std::string::npos);
  CHECK(typed.substr(typed.find(key) + key.size(), to_the_second) >= before);
}

TEST_CASE("what is printed is shown and sent to the print command", "[desktop]") {
  const Home home;
  Desk desk(logging_to(home.path / "log.sqlite"), PROJECT_DIR "/baths", [] {});
  type_the_readings(desk);
  ask(desk, ShowPrinted{});
  CHECK_FALSE(desk.view().printed.open);  // nothing is there
  ask(desk, IssueSlip{});
  REQUIRE(desk.view().slip.number > 0);
  ask(desk, ShowPrinted{});
  CHECK(desk.view().printed.open);
  REQUIRE_FALSE(desk.view().printed.sheets.empty());
  const sheets::Picture& sheet = *desk.view().printed.sheets.front();
  CHECK(sheet.rgba.size() == 4U * static_cast<std::size_t>(sheet.width * sheet.height));
  CHECK(static_cast<double>(sheet.height) / sheet.width == Approx(297.0 / 210).epsilon(2e-3));

  ask(desk, SetPrintCommand{"cp {file} " + (home.path / "paper.pdf").string()});
  ask(desk, PrintSheet{desk.view().printed.file});
  CHECK(desk.view().printed.fault.empty());
  CHECK_FALSE(desk.view().printed.said.empty());
  CHECK(fs::file_size(home.path / "paper.pdf") ==
        fs::file_size(fs::path(desk.view().printed.folder) / desk.view().printed.file));
  ask(desk, SetPrintCommand{"no-such-printer"});
  ask(desk, PrintSheet{desk.view().printed.file});
  CHECK(desk.view().printed.said.empty());
  CHECK(desk.view().printed.fault.find("could not be started") != std::string::npos);
  ask(desk, ClosePrinted{});
  CHECK_FALSE(desk.view().printed.open);

  const fs::path charts = home.path / "path.svg";
  ask(desk, SaveCharts{Charts::path, charts.string()});
  CHECK(fs::file_size(charts) > 1000);
}

TEST_CASE("other days are in the chosen unit, and printed in it", "[desktop]") {
  const Home home;
  Desk desk(logging_to(home.path / "log.sqlite"), PROJECT_DIR "/baths", [] {});
  open(desk, "AL-1");
  ask(desk, GoTo{PageName::forecast});
  const auto aluminium = [&] {
    const auto& all = desk.view().forecast.charts;
    const auto chart =
        std::ranges::find_if(all, [](const auto& c) { return c.title.starts_with("aluminium"); });
    REQUIRE(chart != all.end());
    return *chart;
  };
  const charts::Chart in_g_per_L = aluminium();
  CHECK(in_g_per_L.unit == "g/L");
  ask(desk, choice("concentrations", "% w/w"));
  const charts::Chart by_mass = aluminium();
  CHECK(by_mass.unit == "% w/w");
  const auto kg_per_L = [&](std::size_t day) {
    return in_g_per_L.lines[0].y[day] / by_mass.lines[0].y[day] / 10;
  };
  CHECK(kg_per_L(0) > 1.1);
  CHECK(kg_per_L(by_mass.lines[0].y.size() - 1) > kg_per_L(0) + 0.05);  // aluminium builds up
  REQUIRE_FALSE(by_mass.limits.empty());
  CHECK(by_mass.limits[0].y.front() > by_mass.limits[0].y.back());  // 15 g/L all the time
  for (const std::string& note : desk.view().forecast.notes) CHECK(note.find("density") == std::string::npos);
  ask(desk, choice("concentrations", "mol/kg water"));
  CHECK(aluminium().unit == "mol/kg water");
}

TEST_CASE("a forecast is printed with what was moved", "[desktop]") {
  const Home home;
  Desk desk(logging_to(home.path / "log.sqlite"), PROJECT_DIR "/baths", [] {});
  open(desk, "AL-1");
  ask(desk, GoTo{PageName::forecast});
  REQUIRE(desk.view().forecast.may_print);
  ask(desk, MoveLever{0, 50});
  ask(desk, PrintForecast{});
  CHECK(desk.view().printed.open);
  CHECK(desk.view().printed.file == "forecast-al-1.pdf");
  CHECK(desk.view().printed.folder == (home.path / "printed").string());
  CHECK(fs::file_size(fs::path(desk.view().printed.folder) / desk.view().printed.file) > 10000);
  CHECK_FALSE(desk.view().printed.sheets.empty());
  ask(desk, GoTo{PageName::log});
  CHECK_FALSE(desk.view().printed.open);

  ForecastWork work;
  std::string paper;
  work.answer({{},
               PROJECT_DIR "/baths/al-1.toml",
               {},
               PROJECT_DIR "/baths/policies/al-1.toml",
               Levers{50, 1, 1.2, 100},
               0},
              {}, [&](const Forecasted& told) {
                REQUIRE(told.problems.empty());
                if (!told.complete) return;
                const sheets::Units gallons(*sheets::unit_names("US gal"));
                CHECK_THAT(told.in(gallons).policy_file, Catch::Contains("bleed 13.2 US gal a day"));
                for (const std::string& line : sheets::text_of(sheets::forecast_page(told.in({}))))
                  paper += " " + line.substr(std::min(line.find_first_not_of(" "), line.size()));
              });
  INFO(paper);
  CHECK(paper.find("Policy: al-1.toml with bleed 50.0 L a day, work 1.20 times, 100 days.") !=
        std::string::npos);
}

TEST_CASE("a plugin is looked at, allowed and withdrawn at the window", "[desktop]") {
  const Home home;
  const fs::path file = own_plugin(home, "sound.bathtype.so");
  Desk desk(with_plugins_of(file.parent_path()), PROJECT_DIR "/baths", [] {});
  ask(desk, GoTo{PageName::bath_types});
  const auto row = [&] {
    const auto& rows = desk.view().bath_types.rows;
    const auto found = std::ranges::find(rows, file.string(), &BathTypeRow::file);
    REQUIRE(found != rows.end());
    return *found;
  };
  REQUIRE(row().may_be_allowed);
  CHECK(desk.view().bath_types.rows.front().file == file.string());  // what is to be decided stands first
  REQUIRE_FALSE(row().may_be_withdrawn);
  const std::string sha256 = row().sha256;
  ask(desk, AllowPlugin{sha256});  // nobody has looked at it
  CHECK(row().may_be_allowed);

  ask(desk, ExaminePlugin{file.string()});
  REQUIRE(desk.view().bath_types.examined);
  CHECK(desk.view().bath_types.examined->sha256 == sha256);
  CHECK(desk.view().bath_types.examined->faults.empty());
  ask(desk, AllowPlugin{std::string(64, '0')});
  CHECK(row().may_be_allowed);
  ask(desk, AllowPlugin{sha256});
  CHECK(row().state == "ready");
  CHECK(row().may_be_withdrawn);
  CHECK_FALSE(desk.view().bath_types.examined);

  ask(desk, WithdrawPlugin{sha256});
  CHECK(row().state == "not allowed yet");
}

TEST_CASE("a plugin with a fault is shown with it and cannot be allowed", "[failure][desktop]") {
  const Home home;
  const fs::path file = own_plugin(home, "prints.bathtype.so");
  Desk desk(with_plugins_of(file.parent_path()), PROJECT_DIR "/baths", [] {});
  ask(desk, ExaminePlugin{file.string()});
  REQUIRE(desk.view().bath_types.examined);
  CHECK_FALSE(desk.view().bath_types.examined->faults.empty());
  ask(desk, AllowPlugin{desk.view().bath_types.examined->sha256});
  CHECK_FALSE(desk.view().fault.empty());
  CHECK_FALSE(fs::exists(home.path / "XDG_DATA_HOME/bathwright/plugins.allow.toml"));
}

TEST_CASE("only who may signs that somebody left", "[desktop]") {
  const Home home;
  Desk desk({}, PROJECT_DIR "/baths", [] {});
  const Names chemist{"A. Chemist", "246824", "", ""}, hand{"M. Okafor", "135713", "", ""};
  ask(desk, AdmitPerson{"A. Chemist", "chemist", "246824", chemist});
  ask(desk, AdmitPerson{"M. Okafor", "operator", "135713", chemist});
  INFO(desk.view().fault << desk.view().sign.said);
  REQUIRE(desk.view().people.size() == 2);
  ask(desk, RetirePerson{"A. Chemist", hand});
  CHECK_FALSE(desk.view().fault.empty());
  CHECK(desk.view().people[0].active);
  ask(desk, RetirePerson{"M. Okafor", chemist});
  const auto left = std::ranges::find(desk.view().people, "M. Okafor", &PersonRow::name);
  REQUIRE(left != desk.view().people.end());
  CHECK_FALSE(left->active);
  CHECK(left->signs == "no more");
  CHECK(std::ranges::count(desk.view().sign.people, "M. Okafor") == 0);
}
