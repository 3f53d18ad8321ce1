// Pictures of every page from the real program, for the README and for eyes: PNG files in the folder given.
//   desktop_pictures FOLDER WIDTH HEIGHT SCALE [dark]
#include <bathwright/logbook/logbook.hpp>
#include <cmath>
#include <cstdlib>
#include <fstream>
#include <string_view>

#include "driver.hpp"
#include "work/documents.hpp"
#include "work/shift_log.hpp"
#include "work/tank_state.hpp"

using bathwright::desktop::PageName;
using desktop_test::Driver;

namespace {

using namespace bathwright;

/// The clock of a day that is over.
class Earlier final : public logbook::Clock {
 public:
  logbook::UtcTime now{};
  [[nodiscard]] logbook::UtcTime utc_now() const override { return now; }
};

template <class T>
T must(Result<T> result) {
  if (!result) throw std::runtime_error(text(result.problems()));
  return *std::move(result);
}

/// Six weeks of analyses of the Watts tank, every second day: the nickel creeps up, the boric acid is put
/// back on Mondays, and one pH was read from another tank.
void log_six_weeks(const std::filesystem::path& shop, const std::filesystem::path& log_file) {
  std::filesystem::create_directories(log_file.parent_path());
  work::Session session;
  session.log_file = log_file.string();
  const work::Shop open = must(work::open_shop(session, (shop / "n-07.toml").string()));
  const std::filesystem::path readings = shop / "then.toml";
  Earlier clock;
  constexpr int days = 42, every = 2, wrong_one = 26;
  for (int day = 0; day < days; day += every) {
    const double scatter = std::sin(2.4 * day);
    std::ofstream file(readings);
    file << "level_below_mark = \"2 cm\"\ntemperature = \"55 degC\"\npH = "
         << (day == wrong_one ? 4.9 : 4.15 + 0.05 * scatter) << '\n';
    for (const auto& [quantity, g_per_L] : {std::pair{"Ni^2+", 68 + 0.12 * day + 0.6 * scatter},
                                            {"Cl^-", 14.6 + 0.2 * std::cos(1.7 * day)},
                                            {"H3BO3", 42 - 0.5 * (day % 7) + 0.3 * scatter}})
      file << "[[found]]\nquantity = \"" << quantity << "\"\nvalue = \"" << g_per_L << " g/L\"\n";
    file.close();
    clock.now = work::wall_clock().utc_now() - std::chrono::hours(24 * (days - day));
    const auto found = must(work::analyse(session, open, readings.string()));
    auto entry =
        must(work::entry_computed(open, readings.string(), logbook::EntryKind::analysis,
                                  work::analysis_document(open.tank, open.chemistry, found.analysis)));
    entry.by = "okafor";
    auto log = must(logbook::Logbook::open(log_file, logbook::OpenMode::create, clock));
    must(log.append(std::move(entry)));
  }
}

}  // namespace

int main(int count, char** arguments) {
  if (count != 5 && count != 6) return 2;
  const std::filesystem::path folder = arguments[1];
  std::filesystem::create_directories(folder);
  const desktop_test::EmptyHome home;
  std::filesystem::copy(PROJECT_DIR "/baths", home.path() / "shop", std::filesystem::copy_options::recursive);
  log_six_weeks(home.path() / "shop", home.path() / "XDG_DATA_HOME" / "bathwright" / "shift-log.sqlite");
  Driver driver(std::atoi(arguments[2]), std::atoi(arguments[3]), static_cast<float>(std::atof(arguments[4])),
                home.path() / "shop", count == 6);
  const auto rest = [&] { driver.until([&] { return !driver.desk().working(); }, 120); };
  driver.desk().handle(bathwright::desktop::SetShifts{"3x8", "Europe/Berlin", {}});
  rest();
  driver.click("tank N-07");
  driver.until([&] { return driver.view().readings.rows.size() == 3; });
  for (const auto& [field, text] : {std::pair{"volume", "3 cm"},
                                    {"temperature", "54"},
                                    {"pH", "4.1"},
                                    {"titrant Ni²⁺", "0.1012"},
                                    {"burette Ni²⁺", "23.80"},
                                    {"titrant Cl⁻", "0.0998"},
                                    {"burette Cl⁻", "8.10"},
                                    {"titrant H₃BO₃", "0.1005"},
                                    {"burette H₃BO₃", "11.90"}})
    driver.put(field, text);
  rest();
  driver.save(folder / "shift.png");
  driver.bring_into_sight("Issue the slip");
  driver.save(folder / "additions.png");
  driver.click("Issue the slip");
  driver.until([&] { return driver.view().slip.number > 0; });
  rest();
  driver.bring_into_sight("step 1");
  driver.save(folder / "slip.png");
  driver.desk().handle(bathwright::desktop::ShowPrinted{});
  rest();
  driver.pictures(3);
  driver.save(folder / "printed.png");
  for (const auto& [page, name] : {std::pair{PageName::forecast, "forecast"},
                                   {PageName::trends, "trends"},
                                   {PageName::log, "log"},
                                   {PageName::hand_over, "hand-over"},
                                   {PageName::bath_types, "bath-types"},
                                   {PageName::people, "people"},
                                   {PageName::settings, "settings"}}) {
    driver.desk().handle(bathwright::desktop::GoTo{page});
    driver.pictures(3);
    rest();
    driver.pictures(3);
    driver.save(folder / (std::string(name) + ".png"));
  }
  return 0;
}
