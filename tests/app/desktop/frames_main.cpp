// What a picture of the desktop costs with the software renderer, and how soon a dragged amount is seen:
// writes REPORT.md.
#include <sys/resource.h>

#include <algorithm>
#include <bathwright/logbook/logbook.hpp>
#include <chrono>
#include <cmath>
#include <cstdio>
#include <cstdlib>
#include <fstream>
#include <thread>

#include "driver.hpp"
#include "work/shift_log.hpp"

using namespace bathwright;
using desktop_test::Driver;
using desktop_test::PictureCost;

namespace {

struct Spread {
  double median, worst;
};

Spread of(std::vector<double> values) {
  std::ranges::sort(values);
  return {values[values.size() / 2], values.back()};
}

double cpu_s() {
  rusage used{};
  getrusage(RUSAGE_SELF, &used);
  const auto seconds = [](const timeval& time) {
    return static_cast<double>(time.tv_sec) + 1e-6 * static_cast<double>(time.tv_usec);
  };
  return seconds(used.ru_utime) + seconds(used.ru_stime);
}

double load() {
  double one_minute = 0;
  return getloadavg(&one_minute, 1) == 1 ? one_minute : 0;
}

std::string row(const std::string& what, const std::vector<PictureCost>& costs) {
  std::vector<double> ui, all;
  for (const PictureCost& cost : costs) ui.push_back(cost.ui_ms), all.push_back(cost.all_ms);
  char text[200];
  std::snprintf(text, sizeof text, "| %s | %zu | %.2f | %.2f | %.1f | %.1f | %.1f |\n", what.c_str(),
                costs.size(), of(ui).median, of(ui).worst, of(all).median, of(all).worst, load());
  return text;
}

/// The kg at the end of the path chart: what it shows of the amounts.
double end_of_path(const Driver& driver) {
  const auto& path = driver.view().chemistry.path;
  return path.empty() || path.front().lines.empty() ? 0 : path.front().lines.front().x.back();
}

/// 100 steps of a drag, each waited for: pictures and time until the path chart has it.
std::string drag_told(Driver& driver) {
  constexpr int boric_acid = 1, steps = 100;
  constexpr double step_kg = 0.05;
  const double from = driver.view().additions.additions[boric_acid].amount, end = end_of_path(driver);
  std::vector<double> taken, ms;
  for (int i = 1; i <= steps; ++i) {
    const auto begin = std::chrono::steady_clock::now();
    driver.desk().handle(desktop::DragAmount{boric_acid, from + i * step_kg});
    int pictures = 0;
    constexpr double nearly = 1e-3;  // kg
    while (std::abs(end_of_path(driver) - (end + i * step_kg)) > nearly && pictures < 1000)
      driver.picture(), ++pictures;
    taken.push_back(pictures);
    ms.push_back(std::chrono::duration<double, std::milli>(std::chrono::steady_clock::now() - begin).count());
  }
  const auto next = std::ranges::count(taken, 1);
  char text[300];
  std::snprintf(
      text, sizeof text,
      "\nFrom a dragged amount to the path chart that shows it, %d steps: the next picture in %td of "
      "them, picture %.0f at worst; %.0f ms in the median, %.0f ms at worst.\n",
      steps, next, of(taken).worst, of(ms).median, of(ms).worst);
  return text;
}

std::vector<PictureCost> pictures(Driver& driver, int count, const std::function<void(int)>& before) {
  std::vector<PictureCost> costs;
  for (int i = 0; i < count; ++i) {
    before(i);
    costs.push_back(driver.picture());
  }
  return costs;
}

void fill_log(const std::filesystem::path& file, int entries) {
  auto opened = logbook::Logbook::open(file, logbook::OpenMode::create, work::wall_clock());
  if (!opened) throw std::runtime_error(text(opened.problems()));
  logbook::Logbook log = *std::move(opened);
  std::vector<logbook::NewEntry> all;
  for (int i = 0; i < entries; ++i) {
    logbook::NewEntry entry;
    entry.tank = i % 2 == 0 ? "N-07 Watts nickel" : "AL-1 sulfuric anodizing";
    entry.by = "okafor";
    entry.body = R"({"note": "filter changed, basket )" + std::to_string(i) + R"( filled"})";
    all.push_back(std::move(entry));
  }
  if (const auto logged = log.append_all(all); !logged) throw std::runtime_error(text(logged.problems()));
}

std::string at_size(int width, int height) {
  const desktop_test::EmptyHome home;
  std::filesystem::copy(PROJECT_DIR "/baths", home.path() / "shop", std::filesystem::copy_options::recursive);
  std::filesystem::create_directories(home.path() / "XDG_DATA_HOME" / "bathwright");
  fill_log(home.path() / "XDG_DATA_HOME" / "bathwright" / "shift-log.sqlite", 500);
  std::string rows;
  {
    const Driver warm_up(width, height, 1, home.path() / "shop");  // probes the plugins
  }
  const auto begin = std::chrono::steady_clock::now();
  Driver driver(width, height, 1, home.path() / "shop");
  const double start_s = std::chrono::duration<double>(std::chrono::steady_clock::now() - begin).count();
  driver.click("tank N-07");
  driver.until([&] { return driver.view().readings.rows.size() == 3; });
  for (const auto& [field, text] : {std::pair{"burette Ni²⁺", "23.80"},
                                    {"burette Cl⁻", "8.10"},
                                    {"burette H₃BO₃", "11.90"},
                                    {"pH", "4.1"}})
    driver.put(field, text);
  driver.until([&] { return !driver.view().additions.plans.empty() && !driver.desk().working(); });
  const std::string size = std::to_string(width) + " x " + std::to_string(height);
  rows += row(size + ", shift's page, at rest", pictures(driver, 200, [](int) {}));
  rows += row(size + ", an amount dragged", pictures(driver, 200, [&](int i) {
                driver.desk().handle(desktop::DragAmount{1, 5 + 0.05 * i});
              }));
  driver.until([&] { return !driver.desk().working(); });
  driver.desk().handle(desktop::BackToPlan{});
  driver.until([&] { return !driver.desk().working(); });
  const std::string told = drag_told(driver);
  driver.click("Log");
  driver.until([&] { return driver.view().log.rows.size() >= 500; });
  rows += row(size + ", log of 500 entries", pictures(driver, 200, [](int) {}));
  driver.click("The shift");
  driver.until([&] { return !driver.desk().working(); });
  const double cpu = cpu_s();
  constexpr int idle_s = 12;
  const auto idle = std::chrono::steady_clock::now();
  driver.sleep_as_the_window_does(idle_s);
  const double share =
      (cpu_s() - cpu) / std::chrono::duration<double>(std::chrono::steady_clock::now() - idle).count();
  char text[200];
  std::snprintf(
      text, sizeof text,
      "\nAt %s the window stood %.2f s after the start, plugins cached; at rest it took %.1f %% of a core.\n",
      size.c_str(), start_s, 100 * share);
  return rows + told + text;
}

}  // namespace

int main(int, char** arguments) {
  std::ofstream report(arguments[1]);
  report
      << "# What a picture of the desktop costs\n\n"
         "Written by the target `frame_table`: a real window under Xvfb, Mesa's software renderer, the demonstration\n"
         "shop of 28 tanks, a log of 500 entries. Milliseconds; `panels` is the code of the panels and the views made\n"
         "anew, `whole` adds drawing and showing. Aims: whole 16 at 1280 x 800 in the median, panels 4. `load` is the\n"
         "machine's of the last minute: what else ran on its two cores.\n\n";
  constexpr const char* head =
      "| what | pictures | panels, median | panels, worst | whole, median | whole, worst | load |\n"
      "|---|---|---|---|---|---|---|\n";
  report << head << at_size(1280, 800) << '\n' << head << at_size(1920, 1080);
  return report.good() ? 0 : 1;
}
