#include "interlock_table.hpp"

#include <algorithm>
#include <bathwright/bath/at_aims.hpp>
#include <bathwright/data/csv.hpp>
#include <bathwright/shopfiles/tank_file.hpp>
#include <charconv>
#include <filesystem>
#include <fstream>
#include <sstream>
#include <stdexcept>

#include "../support/bath_type_named.hpp"
#include "gases.hpp"

namespace interlock_table {
namespace {

using namespace bathwright;

struct Ready {
  bath::Tank tank;
  bath::Chemistry chemistry;
  bath::TankState state;
};

template <class T>
T value(Result<T> result) {
  if (!result) throw std::runtime_error(text(result.problems()));
  return std::move(result).value();
}

Ready ready(const std::string& name, const std::vector<std::pair<std::string, double>>& levels = {}) {
  bath::Tank tank =
      value(shopfiles::read_tank(PROJECT_DIR "/baths/" + name + ".toml", matter::StockCatalogue::built_in()));
  bath::Chemistry chemistry = value(
      bath::Chemistry::prepare(bath_type_named(tank.bath_type), tank.temperature, tank.idle_temperature));
  bath::Tank at = tank;
  for (const auto& [id, level] : levels)
    for (bath::Aim& aim : at.aims)
      if (aim.quantity == id) aim.aim = level;
  bath::TankState state = value(bath::state_at_aims(at, chemistry));
  return {std::move(tank), std::move(chemistry), std::move(state)};
}

std::vector<std::pair<std::string, double>> pairs(const std::vector<std::string>& parts, char between) {
  std::vector<std::pair<std::string, double>> read;
  for (const std::string& part : parts) {
    const std::size_t at = part.rfind(between);
    double number = 0;
    std::from_chars(part.data() + at + 1, part.data() + part.size(), number);
    read.emplace_back(part.substr(0, at), number);
  }
  return read;
}

matter::StockChemical stock(const bath::Tank& tank, const std::string& id) {
  if (const auto* item = tank.on_shelf(id)) return item->stock;
  const auto* found = matter::StockCatalogue::built_in().find(id);
  if (!found) throw std::runtime_error("no chemical " + id);
  return *found;
}

}  // namespace

std::vector<Case> read_cases() {
  std::ifstream file(TEST_CASES);
  std::stringstream text;
  text << file.rdbuf();
  const auto table = value(data::CsvTable::read("cases.csv", text.str()));
  std::vector<Case> cases;
  for (std::size_t i = 0; i < table.size(); ++i) {
    const auto row = table[i];
    cases.push_back({std::string(row["rule"]), std::string(row["tank"]), std::string(row["expect"]),
                     std::string(row["by"]), pairs(row.list("levels"), '='),
                     pairs(row.list("additions"), ' ')});
  }
  return cases;
}

Outcome try_case(const Case& one) {
  const Ready at = ready(one.tank, one.levels);
  std::vector<dosing::Wanted> wanted;
  for (const auto& [id, kg] : one.additions) wanted.push_back({stock(at.tank, id), kg});
  const auto sheet = value(dosing::check_plan(at.tank, at.chemistry, at.state, wanted));
  Outcome out{"pass", "", one.expect == "pass"};
  if (!sheet.refused.empty()) {
    out = {"refused", sheet.refused.front().reason, false};
    for (const auto& refusal : sheet.refused)
      if (one.expect == "refused" && refusal.rule == "interlock: " + one.by)
        out = {"refused", refusal.reason, true};
    return out;
  }
  for (const auto& step : sheet.plans.front().steps)
    for (const auto& check : step.checks) {
      if (check.ok || !check.stops || !(check.interlock || check.name == "order")) continue;
      const bool expected = one.expect == "stopped" && check.name == one.by;
      if (out.got == "pass" || expected) out = {"stopped", check.name + ": " + check.detail, expected};
      if (expected) return out;
    }
  return out;
}

std::vector<std::string> demonstration_tanks() {
  std::vector<std::string> names;
  for (const auto& entry : std::filesystem::directory_iterator(PROJECT_DIR "/baths"))
    if (entry.path().extension() == ".toml") names.push_back(entry.path().stem().string());
  std::ranges::sort(names);
  return names;
}

std::vector<OwnAddition> own_additions(const std::string& name) {
  const Ready at = ready(name);
  std::vector<OwnAddition> all;
  for (const bath::ShelfItem& item : at.tank.shelf) {
    const auto rule =
        std::ranges::find(at.chemistry.type().additions, item.stock.id, &bath::AdditionRule::supply);
    double rise = item.largest_rise_g_per_L.value_or(
        rule == at.chemistry.type().additions.end() ? 1.0 : rule->largest_rise_g_per_L);
    if (!(rise > 0)) rise = 0.5;
    OwnAddition one{name, item.stock.id, rise * at.tank.working_volume.v / 1000 / item.stock.assay, ""};
    const auto sheet = value(dosing::check_plan(at.tank, at.chemistry, at.state, {{item.stock, one.kg}}));
    for (const auto& refusal : sheet.refused) one.stopped_by = refusal.rule + ": " + refusal.reason;
    for (const auto& step : sheet.plans.front().steps)
      for (const auto& check : step.checks)
        if (check.interlock && check.stops && !check.ok) one.stopped_by = check.name + ": " + check.detail;
    all.push_back(std::move(one));
  }
  return all;
}

std::vector<NormalGas> normal_gases(const std::string& name) {
  const Ready at = ready(name);
  const auto solved = value(at.chemistry.speciate(at.state));
  const auto& gases = at.chemistry.working().system().gases();
  std::vector<NormalGas> all;
  for (const auto& caution : dosing::gas_cautions())
    for (std::size_t g = 0; g < gases.size(); ++g)
      if (gases[g].name == caution.gas && solved.gas_bar[g] > 1e-9)
        all.push_back({name, caution.gas, 1e6 * solved.gas_bar[g], caution.caution_ppm,
                       dosing::most_over_danger * caution.danger_ppm});
  return all;
}

}  // namespace interlock_table
