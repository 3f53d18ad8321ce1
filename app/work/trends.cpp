#include "trends.hpp"

#include <algorithm>
#include <bathwright/analysis/method.hpp>
#include <bathwright/base/nearest.hpp>
#include <bathwright/sheets/log_sheet.hpp>
#include <bathwright/shopfiles/readings_file.hpp>
#include <chrono>
#include <map>

namespace bathwright::work {
namespace {

/// A level by its quantity, of a list of an analysis' document.
using Levels = std::map<std::string, double>;

Levels levels_in(const Json& document, const char* list, bool found_only) {
  Levels levels;
  if (!document.contains(list) || !document[list].is_array()) return levels;
  for (const Json& level : document[list]) {
    if (!level.is_object() || level.value("unit", "") != "g/L" || !level.contains("value") ||
        !level["value"].is_number())
      continue;
    const std::string from = level.value("from", "");
    if (!found_only || from == "titration" || from == "found")
      levels[level.value("quantity", "")] = level["value"].get<double>();
  }
  return levels;
}

struct Analysed {
  logbook::UtcTime time;
  std::string at;
  std::int64_t entry;
  Levels found, predicted;
  std::string readings;  ///< the file's text
  double density_kg_per_L = 0;
};

std::optional<Analysed> analysed_in(const logbook::Entry& entry,
                                    const std::optional<shifts::Calendar>& calendar) {
  const std::string& when = entry.happened.empty() ? entry.at : entry.happened;
  const auto time = logbook::utc_from_iso(when);
  const Json document = Json::parse(entry.body, nullptr, false);
  if (!time || !document.is_object()) return std::nullopt;
  Analysed one{*time,
               sheets::local_time(when, calendar),
               entry.seq,
               levels_in(document, "results", true),
               levels_in(document, "book", false),
               {},
               density_in(document).value_or(0)};
  if (document.contains("pH") && document["pH"].is_number()) one.found["pH"] = document["pH"].get<double>();
  if (document.contains("inputs") && document["inputs"].is_object())
    one.readings = document["inputs"].value("readings_file", "");
  return one;
}

/// In the order of time.
Result<std::vector<Analysed>> analyses_of(const logbook::Logbook& log, const std::string& tank) {
  const auto calendar = calendar_of(log);
  if (!calendar) return calendar.problems();
  logbook::Filter filter;
  filter.tank = tank;
  filter.kind = logbook::EntryKind::analysis;
  const auto entries = log.list(filter);
  if (!entries) return entries.problems();
  std::vector<Analysed> all;
  for (const auto& entry : *entries) {
    const auto corrected = log.is_corrected(entry.seq);
    if (!corrected) return corrected.problems();
    if (auto one = *corrected ? std::nullopt : analysed_in(entry, *calendar)) all.push_back(*std::move(one));
  }
  std::ranges::stable_sort(all, {}, &Analysed::time);
  return all;
}

Result<sheets::QuantityTrend> trend_of(const std::vector<Analysed>& all, const bath::Tank& tank,
                                       const std::string& quantity) {
  sheets::QuantityTrend trend{quantity, quantity == "pH" ? "" : "g/L", {}, {}, {}, {}, {}};
  trends::Window window;
  if (const bath::Aim* aim = tank.aim(quantity)) {
    trend.aim = *aim;
    window = {aim->low, aim->high};
  }
  std::optional<logbook::UtcTime> first;
  for (const Analysed& one : all) {
    const auto found = one.found.find(quantity);
    if (found == one.found.end()) continue;
    if (!first) first = one.time;
    using Days = std::chrono::duration<double, std::ratio<86400>>;
    trends::Point point{Days(one.time - *first).count(), found->second, std::nullopt, one.entry};
    if (const auto predicted = one.predicted.find(quantity); predicted != one.predicted.end())
      point.predicted = predicted->second;
    trend.points.push_back(point);
    trend.at.push_back(one.at);
    trend.density_kg_per_L.push_back(one.density_kg_per_L);
  }
  auto judged = trends::trend_of(trend.points, window);
  if (!judged) return judged.problems();
  trend.trend = *std::move(judged);
  return trend;
}

/// In proportion to what a direct titration found: readings of one sample differ in nothing else. Nothing for
/// other kinds.
std::optional<double> share_of(const analysis::Titration& titration) {
  const analysis::Method* method = analysis::method(titration.method);
  if (!method || method->kind != analysis::Kind::direct || !(titration.sample.v > 0)) return std::nullopt;
  const double strength = titration.titrant.v > 0 ? titration.titrant.v * titration.factor : 1;
  return (titration.burette.v - titration.blank.v) * strength / titration.sample.v;
}

/// Of each quantity, what the first two titrations of a sample found, g/L.
std::vector<sheets::TwiceTitrated> twice_titrated(const std::vector<Analysed>& all) {
  std::map<std::string, std::vector<std::pair<double, double>>> pairs;
  for (const Analysed& one : all) {
    if (one.readings.empty()) continue;
    const auto readings = shopfiles::read_readings_text("entry " + std::to_string(one.entry), one.readings);
    if (!readings) continue;  // of an older form: its levels count all the same
    std::map<std::string, std::vector<double>> shares;
    for (const analysis::Titration& titration : readings->titrations)
      if (const auto share = share_of(titration)) shares[titration.quantity].push_back(*share);
    for (const auto& [quantity, found] : shares) {
      const auto level = one.found.find(quantity);
      if (found.size() < 2 || level == one.found.end()) continue;
      const double mean = (found[0] + found[1]) / 2;
      pairs[quantity].emplace_back(level->second * found[0] / mean, level->second * found[1] / mean);
    }
  }
  std::vector<sheets::TwiceTitrated> twice;
  for (const auto& [quantity, both] : pairs)
    if (const auto s = trends::precision_of(both)) twice.push_back({quantity, both.size(), *s});
  return twice;
}

Json limits_json(const std::optional<trends::ControlChart>& chart) {
  if (!chart) return nullptr;
  const trends::Individuals& limits = chart->limits;
  return {{"values", chart->values.size()},
          {"mean", limits.mean},
          {"mean_moving_range", limits.mean_moving_range},
          {"sigma", limits.sigma},
          {"low", limits.low},
          {"high", limits.high},
          {"moving_range_high", limits.moving_range_high}};
}

void add_findings(Json& list, const sheets::QuantityTrend& trend, const char* of,
                  const std::optional<trends::ControlChart>& chart) {
  if (!chart) return;
  for (const trends::Finding& finding : chart->findings) {
    Json entries = Json::array();
    for (const std::size_t i : finding.points) entries.push_back(trend.points[chart->points[i]].entry);
    list.push_back(
        {{"of", of}, {"rule", finding.rule}, {"what", finding.what}, {"entries", std::move(entries)}});
  }
}

}  // namespace

Result<sheets::Trends> trends_of(const Session& session, const bath::Tank& tank,
                                 const std::string& quantity) {
  const auto log = open_log_to_read(session);
  if (!log) return log.problems();
  const auto all = analyses_of(*log, tank.name);
  if (!all) return all.problems();
  std::vector<std::string> wanted;
  if (quantity.empty()) {
    for (const bath::Aim& aim : tank.aims) wanted.push_back(aim.quantity);
  } else {
    std::vector<std::string> known;
    for (const Analysed& one : *all)
      for (const auto& [id, level] : one.found) known.push_back(id);
    if (std::ranges::find(known, quantity) == known.end()) {
      const auto close = nearest(quantity, known);
      return Problem{Fault::bad_input, "--quantity", "\"" + quantity + "\" was never found in " + tank.name,
                     "a quantity of its analyses in the log",
                     close ? "Did you mean \"" + *close + "\"?" : ""};
    }
    wanted.push_back(quantity);
  }
  sheets::Trends trends{tank.name, log_path(session).string(), {}, twice_titrated(*all)};
  for (const std::string& one : wanted) {
    auto trend = trend_of(*all, tank, one);
    if (!trend) return trend.problems();
    trends.quantities.push_back(*std::move(trend));
  }
  return trends;
}

Json trends_document(const sheets::Trends& trends) {
  Json doc = document({});
  doc["tank"] = trends.tank;
  doc["quantities"] = Json::array();
  for (const sheets::QuantityTrend& one : trends.quantities) {
    Json values = Json::array(), findings = Json::array();
    for (std::size_t i = 0; i < one.points.size(); ++i)
      values.push_back({{"entry", one.points[i].entry},
                        {"at", one.at[i]},
                        {"value", one.points[i].value},
                        {"predicted", or_null(one.points[i].predicted)}});
    add_findings(findings, one, "found", one.trend.found);
    add_findings(findings, one, "residual", one.trend.residual);
    doc["quantities"].push_back({{"quantity", one.quantity},
                                 {"unit", one.unit},
                                 {"values", std::move(values)},
                                 {"found", limits_json(one.trend.found)},
                                 {"residual", limits_json(one.trend.residual)},
                                 {"capability", or_null(one.trend.capability)},
                                 {"resemblance", or_null(one.trend.resemblance)},
                                 {"findings", std::move(findings)}});
  }
  doc["titrated_twice"] = Json::array();
  for (const sheets::TwiceTitrated& one : trends.twice)
    doc["titrated_twice"].push_back(
        {{"quantity", one.quantity}, {"pairs", one.pairs}, {"standard_deviation_g_per_L", one.s_g_per_L}});
  return doc;
}

}  // namespace bathwright::work
