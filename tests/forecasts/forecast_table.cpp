#include "forecast_table.hpp"

#include <fmt/format.h>
#include <bathwright/bath/at_aims.hpp>
#include <bathwright/data/csv.hpp>
#include <bathwright/forecast/forecast.hpp>
#include <bathwright/shopfiles/policy_file.hpp>
#include <bathwright/shopfiles/tank_file.hpp>

#include <algorithm>
#include <cmath>
#include <filesystem>
#include <fstream>
#include <iterator>
#include <stdexcept>

#include "../support/bath_type_named.hpp"

namespace forecast_table {
namespace {

using namespace bathwright;
using forecast::Forecast;

template <class T>
T must_have(Result<T> result) {
  if (!result) throw std::runtime_error(text(result.problems()));
  return *std::move(result);
}

std::optional<double> given(double value) { return std::isnan(value) ? std::nullopt : std::optional(value); }

std::string date_of(const forecast::Policy& policy, double day) {
  const auto date = policy.calendar.date(static_cast<int>(std::floor(day)));
  return date ? fmt::format("{}-{:02}-{:02}", static_cast<int>(date->year()),
                            static_cast<unsigned>(date->month()), static_cast<unsigned>(date->day()))
              : "";
}

/// The two largest of what brings and takes a quantity, g a day.
std::string brought(const forecast::Run& run, std::size_t quantity) {
  auto flows = run.ledger.flows;
  std::ranges::stable_sort(flows, std::greater{},
                           [&](const auto& flow) { return std::abs(flow.kg[quantity]); });
  std::string all;
  for (std::size_t f = 0; f < std::min<std::size_t>(2, flows.size()); ++f)
    if (flows[f].kg[quantity] != 0)
      all += fmt::format("{}{} {:.0f}", all.empty() ? "" : ", ", flows[f].name,
                         1000 * flows[f].kg[quantity] / std::max(1, run.days.back().day));
  return all;
}

}  // namespace

std::vector<Expected> expected() {
  std::ifstream file(TEST_DIR "/believed.csv");
  const std::string content{std::istreambuf_iterator<char>(file), {}};
  constexpr std::string_view numeric[] = {"from_day", "to_day"};
  const auto table = must_have(data::CsvTable::read("believed.csv", content, numeric));
  std::vector<Expected> all;
  for (std::size_t r = 0; r < table.size(); ++r)
    all.push_back({std::string(table[r]["policy"]), std::string(table[r]["subject"]),
                   given(table[r].number("from_day")), given(table[r].number("to_day")),
                   std::string(table[r]["reason"])});
  return all;
}

std::vector<std::string> policies() {
  std::vector<std::string> all;
  for (const auto& entry : std::filesystem::directory_iterator(PROJECT_DIR "/baths/policies"))
    if (entry.path().extension() == ".toml") all.push_back(entry.path().stem().string());
  std::ranges::sort(all);
  return all;
}

bool Row::believed() const {
  if (!ended.empty()) return false;
  if (!expected.from_day) return !day;
  if (!day) return *expected.to_day >= horizon_days;
  return *day >= *expected.from_day && *day <= *expected.to_day;
}

std::vector<Row> rows_of(const std::string& policy_name) {
  std::string tank_name = policy_name;
  for (const char* kind : {"-freeze", "-bleed"})
    if (const auto at = tank_name.find(kind); at != std::string::npos) tank_name.resize(at);
  const auto tank = must_have(
      shopfiles::read_tank(PROJECT_DIR "/baths/" + tank_name + ".toml", matter::StockCatalogue::built_in()));
  const bath::BathType& type = bath_type_named(tank.bath_type);
  const auto policy =
      must_have(shopfiles::read_policy(PROJECT_DIR "/baths/policies/" + policy_name + ".toml", type));
  const auto chemistry = must_have(bath::Chemistry::prepare(type, tank.temperature, tank.idle_temperature));
  const auto start = must_have(bath::state_at_aims(tank, chemistry));
  const auto forecast = must_have(Forecast::prepare(tank, chemistry, policy));
  const auto run = must_have(forecast.run(start));
  const auto limits = forecast.limits(run);
  std::vector<Row> rows;
  for (const Expected& one : expected()) {
    if (one.policy != policy_name) continue;
    const auto quantity = std::ranges::find(type.quantities, one.subject, &bath::Quantity::id);
    if (quantity == type.quantities.end())
      throw std::runtime_error(one.subject + " is no quantity of " + type.name);
    const auto q = static_cast<std::size_t>(quantity - type.quantities.begin());
    Row row;
    row.expected = one;
    row.tank = tank.name;
    row.label = quantity->label;
    row.start_g_per_L = run.days.front().quantity_g_per_L[q];
    row.end_g_per_L = run.days.back().quantity_g_per_L[q];
    row.limit_g_per_L = bath::not_given;
    row.horizon_days = policy.horizon_days;
    row.brought_by = brought(run, q);
    if (!run.ended.empty()) row.ended = text(run.ended);
    for (const auto& limit : limits) {
      if (limit.quantity != one.subject || !limit.from_below) continue;
      row.limit_g_per_L = limit.g_per_L;
      row.day = limit.day;
      if (!limit.day) continue;
      row.date = date_of(policy, *limit.day);
      if (const double turned = run.days[static_cast<std::size_t>(*limit.day)].turnovers; turned > 0)
        row.turnovers = turned;
    }
    rows.push_back(std::move(row));
  }
  return rows;
}

std::string markdown(const std::vector<Row>& rows) {
  std::string page =
      "# The demonstration policies: what builds up, and whether a plater would believe it\n\n"
      "Generated by the target `forecast_table`: every policy of `baths/policies` from its tank's aims, as it stands. "
      "*expected*: the days within which the by-product should reach its limit (`believed.csv`), reckoned by hand from the "
      "figures named; common practice is from memory. They were written down with the forecasts at hand: they catch a "
      "forecast that goes astray, and are no blind trial. *believed*: the forecast's day lies within them. *brought and "
      "taken*: the two largest, g a day over the horizon. Turnovers: of the metal, when the limit is met.\n\n"
      "| policy | by-product | start, end, limit, g/L | brought and taken | met on day | date | turnovers | expected | "
      "believed | why |\n|---|---|---|---|---|---|---|---|---|---|\n";
  std::size_t believed = 0;
  for (const Row& row : rows) {
    believed += row.believed();
    const Expected& e = row.expected;
    page += fmt::format(
        "| {} | {} | {:.3g}, {:.3g}, {} | {} | {} | {} | {} | {} | {} | {} |\n", e.policy, row.label,
        row.start_g_per_L, row.end_g_per_L,
        std::isnan(row.limit_g_per_L) ? "none" : fmt::format("{:.3g}", row.limit_g_per_L), row.brought_by,
        row.day ? fmt::format("{:.1f}", *row.day) : fmt::format("not in {}", row.horizon_days), row.date,
        row.turnovers ? fmt::format("{:.1f}", *row.turnovers) : "",
        e.from_day ? fmt::format("{:.0f} to {:.0f}", *e.from_day, *e.to_day) : "not met",
        row.believed() ? "yes" : "**no**", row.ended.empty() ? e.reason : e.reason + "; " + row.ended);
  }
  page += fmt::format("\n{} of {} believed.\n", believed, rows.size());
  return page;
}

}  // namespace forecast_table
