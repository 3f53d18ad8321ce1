// Pictures of every page from the real program, for the README and for eyes: PNG files in the folder given.
//   pictures FOLDER WIDTH HEIGHT SCALE
#include <cstdlib>

#include "driver.hpp"

using bathwright::desktop::PageName;
using desktop_test::Driver;

int main(int count, char** arguments) {
  if (count != 5) return 2;
  const std::filesystem::path folder = arguments[1];
  std::filesystem::create_directories(folder);
  const desktop_test::EmptyHome home;
  std::filesystem::copy(PROJECT_DIR "/baths", home.path() / "shop", std::filesystem::copy_options::recursive);
  Driver driver(std::atoi(arguments[2]), std::atoi(arguments[3]), static_cast<float>(std::atof(arguments[4])),
                home.path() / "shop");
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
