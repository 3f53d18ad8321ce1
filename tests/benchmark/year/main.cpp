// year_benchmark [--report=FILE] [--paths=N]: a year of the electroless nickel tank, three shifts a day, by
// the engine and by general solvers. Status 1: they do not agree, or the file could not be written.
#include <sys/resource.h>
#include <bathwright/base/normal.hpp>
#include <bathwright/described/bath_type_file.hpp>
#include <bathwright/shopfiles/policy_file.hpp>
#include <bathwright/shopfiles/tank_file.hpp>

#include <algorithm>
#include <cmath>
#include <cstdio>
#include <cstdlib>
#include <cstring>
#include <ctime>
#include <fstream>
#include <set>
#include <string>

#include "general.hpp"

namespace {

using namespace bathwright;
using forecast::Forecast;

template <class T>
T must_have(Result<T> result) {
  if (result) return *std::move(result);
  std::fputs((text(result.problems()) + "\n").c_str(), stderr);
  std::exit(1);
}

/// Processor time of this process, s: what else runs on the machine does not count.
double processor_s() {
  timespec now{};
  clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &now);
  return static_cast<double>(now.tv_sec) + 1e-9 * static_cast<double>(now.tv_nsec);
}

/// The bath type with nothing in it that the tank has none of: general solvers cannot take what is not there.
bath::BathType without_absent(bath::BathType type) {
  const std::set<std::string> there = {"H^+",  "Ni^2+", "H2PO2^-", "HPO3^2-", "SO4^2-",
                                       "Na^+", "lac^-", "gly^-",   "CH3COO^-"};
  std::erase_if(type.components, [&](const auto& c) { return !there.contains(c.species); });
  std::erase_if(type.quantities, [&](const auto& q) {
    return std::ranges::any_of(q.counts, [&](const auto& c) { return !there.contains(c.first); });
  });
  const auto known = [&](const std::string& id) { return id == "pH" || type.quantity(id) != nullptr; };
  std::erase_if(type.windows, [&](const auto& w) { return !known(w.subject); });
  std::erase_if(type.solids, [](const auto& solid) { return solid.name.find("Ca") != std::string::npos; });
  type.indicators.clear();
  return type;
}

struct Worst {
  double level = 0, pH = 0, headroom = 0;  ///< relative; absolute; absolute, log10
};

void compare(const std::vector<forecast::Day>& engine, const std::vector<forecast::Day>& general,
             Worst& worst) {
  for (std::size_t d = 0; d < engine.size(); ++d) {
    const auto &a = engine[d], &b = general[d];
    for (std::size_t q = 0; q < a.quantity_g_per_L.size(); ++q)
      worst.level = std::max(worst.level, std::abs(b.quantity_g_per_L[q] - a.quantity_g_per_L[q]) /
                                              std::max(1.0, std::abs(a.quantity_g_per_L[q])));
    if (a.beyond != forecast::Beyond::no) continue;
    worst.pH = std::max(worst.pH, std::abs(b.pH - a.pH));
    for (std::size_t s = 0; s < a.working_log10.size(); ++s) {
      if (std::isfinite(a.working_log10[s]))
        worst.headroom = std::max(worst.headroom, std::abs(b.working_log10[s] - a.working_log10[s]));
      if (std::isfinite(a.idle_log10[s]))
        worst.headroom = std::max(worst.headroom, std::abs(b.idle_log10[s] - a.idle_log10[s]));
    }
  }
}

std::string number(const char* format, double value) {
  char text[40];
  std::snprintf(text, sizeof text, format, value);
  return text;
}

}  // namespace

int main(int argc, char** argv) {
  std::string report;
  int paths = 20, samples = 1000;
  for (int i = 1; i < argc; ++i) {
    if (std::strncmp(argv[i], "--report=", 9) == 0) report = argv[i] + 9;
    if (std::strncmp(argv[i], "--paths=", 8) == 0) paths = std::max(2, std::atoi(argv[i] + 8));
    if (std::strncmp(argv[i], "--samples=", 10) == 0) samples = std::max(1, std::atoi(argv[i] + 10));
  }
  const std::string baths = PROJECT_DIR "/baths/";
  const auto tank = must_have(shopfiles::read_tank(baths + "e-02.toml", matter::StockCatalogue::built_in()));
  const bath::BathType type = without_absent(must_have(described::read_bath_type_file(
      PROJECT_DIR "/plugins/electroless-nickel/electroless-nickel.bathtype.toml")));
  const auto chemistry = must_have(bath::Chemistry::prepare(type, tank.temperature, tank.idle_temperature));
  auto policy = must_have(shopfiles::read_policy(baths + "policies/e-02-bleed.toml", type));
  policy.calendar = {};
  policy.calendar.shifts_per_day = 3;
  policy.calendar.hours_per_shift = 8;
  policy.horizon_days = 365;
  const auto start = must_have(chemistry.state_from({{"Ni^2+", 6},
                                                     {"NaH2PO2.H2O", 30},
                                                     {"HPO3^2-", 5},
                                                     {"SO4^2-", 3},
                                                     {"C3H6O3", 28},
                                                     {"C2H5NO2", 4},
                                                     {"CH3COOH", 10}},
                                                    4.8, tank.working_volume, tank.temperature));
  const auto forecast = must_have(Forecast::prepare(tank, chemistry, policy));

  // The same draws for both, one path after the other.
  Worst worst;
  double engine_s = 0, general_s = 0;
  benchmark::GeneralYear general(tank, chemistry, policy);
  Normal normal(20261201);
  for (int path = 0; path < paths; ++path) {
    forecast::Draw draw;
    if (path > 0) {
      draw.drag_out = std::exp(0.3 * normal());
      draw.work.assign(policy.work.size(), std::exp(0.1 * normal()));
      draw.effects.assign(type.uses.size(), std::exp(0.05 * normal()));
    }
    double began = processor_s();
    const auto run = must_have(forecast.run(start, &draw));
    engine_s += processor_s() - began;
    began = processor_s();
    const auto days = general.run(start, draw);
    general_s += processor_s() - began;
    if (!run.ended.empty() || days.size() != run.days.size()) {
      std::fputs("a path ended before its year\n", stderr);
      return 1;
    }
    compare(run.days, days, worst);
  }
  // Side by side, as the program samples them.
  Forecast::Sampling sampling;
  sampling.samples = samples;
  sampling.threads = 1;
  const double began = processor_s();
  const auto bands = must_have(forecast.sample(start, sampling));
  const double sampled_s = processor_s() - began;
  rusage used{};
  getrusage(RUSAGE_SELF, &used);

  const double each_ms = 1e3 * engine_s / paths, general_ms = 1e3 * general_s / paths,
               sampled_ms = 1e3 * sampled_s / samples;
  std::string page =
      "# A year of a tank: the engine against general solvers\n\n"
      "Made by the target `year_report`. Electroless nickel E-02 of the demonstration shop, policy e-02-bleed, three "
      "shifts of eight hours, every day of 365; nickel, hypophosphite and pH put right at the end of every shift, "
      "complexants every day; the full speciation at 88 degC for every pH, at 88 and 20 degC every evening. " +
      std::to_string(chemistry.working().system().species().size()) + " species, " +
      std::to_string(chemistry.components().size()) +
      " components. The general way (`year/general.cpp`): SUNDIALS 6.4, CVODE with Adams' formulas for the shift, the "
      "level held by dV/dt = 0, KINSOL as in README.md for each equilibrium, each from the last. Processor time of "
      "one thread.\n\nCompiler: " COMPILER ", flags `" COMPILER_FLAGS
      "`.\n\n"
      "| a year of one path | ms | ratio |\n|---|---:|---:|\n"
      "| engine, " +
      std::to_string(samples) + " paths side by side | " + number("%.1f", sampled_ms) +
      " | 1.00 |\n| engine, one path alone | " + number("%.1f", each_ms) + " | " +
      number("%.2f", each_ms / sampled_ms) + " |\n| CVODE and KINSOL, one path after the other | " +
      number("%.1f", general_ms) + " | " + number("%.2f", general_ms / sampled_ms) + " |\n\n" +
      std::to_string(samples) + " paths: " + number("%.1f", sampled_s) + " s of one core, " +
      number("%.1f", sampled_s / 2) + " s of two; the whole program held " +
      number("%.0f", static_cast<double>(used.ru_maxrss) / 1024) + " MB at most.\n\n" +
      "The two answers over " + std::to_string(paths) +
      " draws of drag-out, work and side reactions, all days: levels differ by " +
      number("%.1e", worst.level) + " of the level at most (of 1 g/L where it is lower), the pH by " +
      number("%.1e", worst.pH) + ", the headroom of a solid by " + number("%.1e", worst.headroom) +
      " in log10. The engine fills the tank up at an even rate within a shift, CVODE as the level asks at every moment.\n";
  std::fputs(page.c_str(), stdout);
  if (!report.empty() && !(std::ofstream(report) << page).flush()) return 1;
  constexpr double agreed = 1e-4;
  return worst.level < agreed && worst.pH < agreed && worst.headroom < agreed ? 0 : 1;
}
