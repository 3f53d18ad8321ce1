#include "disturbed_tanks.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <bathwright/described/bath_type_file.hpp>
#include <bathwright/plugin_host/registry.hpp>
#include <bathwright/shopfiles/tank_file.hpp>
#include <cmath>
#include <ctime>
#include <filesystem>

#include "independent_check.hpp"

namespace disturbed {
namespace {

using namespace bathwright;

constexpr double push_share = 0.15, push_pH = 0.3;
constexpr double met_per_cent = 0.5, met_pH = 0.02;

const plugin_host::BathTypes& bath_types() {
  static const auto types = [] {
    plugin_host::Places places = plugin_host::built_in_places();
    places.cache = TEST_CACHE;
    places.read_data_file = described::read_bath_type_file;
    return plugin_host::BathTypes::discover(places);
  }();
  return types;
}

/// What is pushed: by how much of its aim each quantity, by how many units the pH.
struct Push {
  std::string name;
  std::map<std::string, double> share;
  double pH = 0;
};

std::vector<Push> pushes_of(const bath::Tank& tank) {
  std::vector<Push> pushes;
  Push all_low{"all low", {}, 0}, all_high{"all high", {}, 0};
  for (const bath::Aim& aim : tank.aims) {
    if (aim.quantity == "pH") {
      pushes.push_back({"pH -0.3", {}, -push_pH});
      pushes.push_back({"pH +0.3", {}, push_pH});
      all_low.pH = -push_pH, all_high.pH = push_pH;
    } else {
      pushes.push_back({aim.quantity + " -15 %", {{aim.quantity, -push_share}}, 0});
      pushes.push_back({aim.quantity + " +15 %", {{aim.quantity, push_share}}, 0});
      all_low.share[aim.quantity] = -push_share, all_high.share[aim.quantity] = push_share;
    }
  }
  pushes.push_back(std::move(all_low));
  pushes.push_back(std::move(all_high));
  return pushes;
}

Result<bath::TankState> pushed(const bath::Tank& tank, const bath::Chemistry& chemistry, const Push& push) {
  std::map<std::string, double> g_per_L;
  std::optional<double> pH;
  for (const bath::Aim& aim : tank.aims) {
    if (aim.quantity == "pH") {
      pH = aim.aim + push.pH;
      continue;
    }
    const auto by = push.share.find(aim.quantity);
    g_per_L[aim.quantity] = aim.aim * (1 + (by == push.share.end() ? 0 : by->second));
  }
  return chemistry.state_from(g_per_L, pH, tank.working_volume, tank.temperature);
}

std::string first_line(const Problems& problems) { return problems.front().text(); }

std::string joined(const std::vector<std::string>& lines) {
  std::string text;
  for (const std::string& line : lines) text += (text.empty() ? "" : "; ") + line;
  return text;
}

/// The first check that stops a step, in words.
std::string stopped_by(const dosing::Plan& plan) {
  for (const dosing::Step& step : plan.steps)
    for (const dosing::Check& check : step.checks)
      if (!check.ok && check.stops)
        return fmt::format("step {}: {}, {}", step.number, check.name, check.detail);
  return "";
}

bool something_brings(const bath::Tank& tank, const bath::Chemistry& chemistry,
                      const bath::Quantity& quantity) {
  return std::ranges::any_of(tank.shelf, [&](const bath::ShelfItem& item) {
    const auto brings = chemistry.brings(item.stock);
    return brings && chemistry.quantity_mol(quantity, brings->component_mol) > 1e-9;
  });
}

Ended judge(const bath::Tank& tank, const bath::Chemistry& chemistry, const Ending& end,
            const dosing::Plan& plan) {
  Ended one;
  bool outside = false, strong = false, weak = false, lower = false, far = false;
  for (const bath::Aim& aim : tank.aims) {
    if (aim.quantity == "pH") {
      one.pH_error = end.pH - aim.aim;
      outside = outside || end.pH < aim.low || end.pH > aim.high;
      far = far || std::abs(*one.pH_error) > met_pH;
      continue;
    }
    const bath::Quantity& quantity = *chemistry.type().quantity(aim.quantity);
    const double level = end.g_per_L.at(aim.quantity);
    const double per_cent = 100 * (level / aim.aim - 1);
    const bool source = something_brings(tank, chemistry, quantity);
    const bool not_missed = quantity.unwanted && (level >= aim.low || !source);
    outside = outside || (level < aim.low && !not_missed) || level > aim.high;
    strong = strong || per_cent > met_per_cent;
    if (per_cent < -met_per_cent) (not_missed ? lower : source ? far : weak) = true;
    if (one.worst.empty() || std::abs(per_cent) > std::abs(one.worst_per_cent))
      one.worst = aim.quantity, one.worst_per_cent = per_cent;
  }
  one.element_defect = end.element_defect;
  using enum Outcome;
  if (outside || !plan.feasible) {
    one.outcome = infeasible;
    one.why = joined(plan.conflicts);
    if (one.why.empty()) one.why = stopped_by(plan);
    if (one.why.empty()) one.why = joined(plan.unmet);
  } else {
    one.outcome = far ? off : strong ? too_strong : weak ? no_source : lower ? Outcome::thinner : met;
    if (one.outcome != met) one.why = joined(plan.unmet);
  }
  return one;
}

/// A plan followed to its end.
Ended ended(const bath::Tank& tank, const bath::Chemistry& chemistry, const bath::TankState& start,
            const dosing::Plan& plan) {
  Ended one;
  const auto end = follow(tank, chemistry.type(), start, plan);
  if (end)
    one = judge(tank, chemistry, *end, plan);
  else
    one.why = "the end cannot be checked: " + first_line(end.problems());
  one.kind = plan.kind;
  one.steps = static_cast<int>(plan.steps.size());
  one.decant_L = plan.decant_L;
  if (!end) return one;
  const auto& quantities = chemistry.type().quantities;
  for (const bath::Aim& aim : tank.aims)
    for (std::size_t q = 0; q < quantities.size(); ++q)
      if (quantities[q].id == aim.quantity)
        one.against_own_prediction =
            std::max(one.against_own_prediction,
                     std::abs(plan.final_view.quantity_g_per_L[q] / end->g_per_L.at(aim.quantity) - 1));
  return one;
}

Case run(const bath::Tank& tank, const bath::Chemistry& chemistry, const std::string& file,
         const Push& push) {
  Case one;
  one.tank = file;
  one.push = push.name;
  const auto start = pushed(tank, chemistry, push);
  if (!start) {
    one.best.why = "no such tank: " + first_line(start.problems());
    return one;
  }
  dosing::Request request;
  request.dead_band = false;
  request.bring_down = true;
  const std::clock_t begin = std::clock();
  const auto sheet = dosing::plan_additions(tank, chemistry, *start, request);
  one.milliseconds = 1000.0 * static_cast<double>(std::clock() - begin) / CLOCKS_PER_SEC;
  if (!sheet) {
    one.best.why = first_line(sheet.problems());
    return one;
  }
  one.plans = static_cast<int>(sheet->plans.size());
  one.best = one.nearest = ended(tank, chemistry, *start, sheet->plans.front());
  for (std::size_t p = 1; p < sheet->plans.size(); ++p)
    if (Ended other = ended(tank, chemistry, *start, sheet->plans[p]); other.outcome < one.nearest.outcome)
      one.nearest = std::move(other);
  return one;
}

std::string cell(std::string text) {
  std::replace(text.begin(), text.end(), '|', '/');
  std::replace(text.begin(), text.end(), '\n', ' ');
  return text;
}

}  // namespace

const char* words(Outcome outcome) {
  switch (outcome) {
    case Outcome::met:
      return "met";
    case Outcome::thinner:
      return "by-product lower";
    case Outcome::too_strong:
      return "left strong";
    case Outcome::no_source:
      return "no source";
    case Outcome::off:
      return "off";
    case Outcome::infeasible:
      return "infeasible";
    case Outcome::refused:
      return "refused";
  }
  return "";
}

std::vector<Case> push_all(const std::vector<std::string>& only) {
  std::vector<std::filesystem::path> files;
  for (const auto& entry : std::filesystem::directory_iterator(PROJECT_DIR "/baths"))
    if (entry.path().extension() == ".toml" &&
        (only.empty() || std::ranges::find(only, entry.path().filename().string()) != only.end()))
      files.push_back(entry.path());
  std::ranges::sort(files);
  std::vector<Case> cases;
  for (const auto& path : files) {
    const std::string file = "baths/" + path.filename().string();
    const auto refuse = [&](const Problems& problems) {
      Case one;
      one.tank = file;
      one.push = "none";
      one.best.why = first_line(problems);
      one.nearest = one.best;
      cases.push_back(std::move(one));
    };
    const auto tank = shopfiles::read_tank(path.string(), matter::StockCatalogue::built_in());
    if (!tank) {
      refuse(tank.problems());
      continue;
    }
    const bath::BathType* type = bath_types().find(tank->bath_type);
    if (!type) {
      refuse(Problems{{Fault::bad_input, file, "no bath type " + tank->bath_type, "", ""}});
      continue;
    }
    const auto chemistry = bath::Chemistry::prepare(*type, tank->temperature, tank->idle_temperature);
    if (!chemistry) {
      refuse(chemistry.problems());
      continue;
    }
    for (const Push& push : pushes_of(*tank)) cases.push_back(run(*tank, *chemistry, file, push));
  }
  return cases;
}

std::string report(const std::vector<Case>& cases) {
  std::map<Outcome, int> count, nearest;
  std::vector<double> times;
  double prediction = 0, elements = 0;
  for (const Case& one : cases) {
    ++count[one.best.outcome];
    ++nearest[one.nearest.outcome];
    if (one.plans > 0) times.push_back(one.milliseconds);
    for (const Ended* end : {&one.best, &one.nearest}) {
      prediction = std::max(prediction, end->against_own_prediction);
      elements = std::max(elements, end->element_defect);
    }
  }
  std::ranges::sort(times);
  std::string text =
      "# Disturbed tanks\n\n"
      "Written by the target `disturbed_table`; do not edit. Every demonstration tank of `baths/`, filled to its mark, with "
      "each controlled quantity 15 % below and above its aim, the pH 0.3 off, one at a time and all together; then "
      "planned back, with leave to take bath out for what is too strong, and each plan followed to its end by a "
      "speciation of its own: masses from the plan, moles from the formulae, a cold solve. The best plan is the one "
      "offered first, which takes no bath out where it can do without; the nearest is that of any kind which comes "
      "closest to the aims. The dead band is off. Amounts are rounded to what a shop can weigh.\n\n"
      "| outcome | best plan | nearest plan | what it means |\n|---|---|---|---|\n";
  const auto line = [&](Outcome outcome, const char* meaning) {
    text += fmt::format("| {} | {} | {} | {} |\n", words(outcome), count[outcome], nearest[outcome], meaning);
  };
  line(Outcome::met, "every aim within 0.5 %, the pH within 0.02");
  line(Outcome::thinner,
       "every aim met but those of by-products and contaminants, which stand lower: nobody adds them");
  line(Outcome::no_source,
       "inside every window; nothing on the shelf brings what ends below its aim: the work does, or nobody");
  line(
      Outcome::too_strong,
      "inside every window; something stands above its aim that only taking bath out would lower, and is left");
  line(Outcome::off, "inside every window, but farther from an aim");
  line(Outcome::infeasible, "a window is missed, or a check stops a step: the last column says why");
  line(Outcome::refused, "no plan: the last column says why");
  if (!times.empty())
    text += fmt::format(
        "\nProcessor time of a sheet with all its plans: median {:.0f} ms, nine in ten below {:.0f} ms, longest "
        "{:.0f} ms. ",
        times[times.size() / 2], times[times.size() * 9 / 10], times.back());
  text += fmt::format(
      "Largest difference between the levels a plan foresees and those found here: {:.1g} %; of the "
      "elements poured in and held: {:.0e}.\n\n",
      100 * prediction, elements);
  text +=
      "| tank | push | outcome | best plan | worst aim | off by % | pH off by | decant L | steps | nearest plan | "
      "outcome | decant L | ms | why |\n"
      "|---|---|---|---|---|---|---|---|---|---|---|---|---|---|\n";
  const auto litres = [](const Ended& end) {
    return end.decant_L > 0 ? fmt::format("{:.0f}", end.decant_L) : "";
  };
  for (const Case& one : cases) {
    const Ended& best = one.best;
    const bool other = one.nearest.kind != best.kind;
    text += fmt::format("| {} | {} | {} | {} | {} | {:.2f} | {} | {} | {} | {} | {} | {} | {:.0f} | {} |\n",
                        one.tank, one.push, words(best.outcome), best.kind, best.worst, best.worst_per_cent,
                        best.pH_error ? fmt::format("{:.3f}", *best.pH_error) : "", litres(best), best.steps,
                        other ? one.nearest.kind : "", other ? words(one.nearest.outcome) : "",
                        other ? litres(one.nearest) : "", one.milliseconds, cell(best.why));
  }
  return text;
}

}  // namespace disturbed
