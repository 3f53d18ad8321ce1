#include "dose_document.hpp"

namespace bathwright::work {
namespace {

Json json_of(const bath::BathType& type, const dosing::Step& step) {
  Json checks = Json::array();
  for (const auto& check : step.checks)
    checks.push_back({{"name", check.name},
                      {"ok", check.ok},
                      {"stops", check.stops},
                      {"interlock", check.interlock},
                      {"detail", check.detail}});
  return {{"number", step.number},
          {"takes_out", step.takes_out},
          {"shift", step.shift},
          {"chemical", step.chemical},
          {"name", step.name},
          {"amount", step.amount},
          {"unit", step.unit},
          {"portion", step.portion},
          {"portions", step.portions},
          {"dissolve_in_L", step.dissolve_in_L ? Json(*step.dissolve_in_L) : Json(nullptr)},
          {"dissolve_in", step.dissolve_in},
          {"how", step.how},
          {"why_here", step.why_here},
          {"warms_C", step.warms_C},
          {"wait_h", step.wait_h},
          {"analyse_after", step.analyse_after},
          {"predicted",
           {{"pH", step.predicted.pH},
            {"volume_L", step.predicted.volume_L},
            {"concentrations", concentrations(type, step.predicted)}}},
          {"checks", std::move(checks)}};
}

Json json_of(const dosing::Percentiles& of) { return {of.p05, of.p50, of.p95}; }

/// Share of the samples inside the window, by quantity.
Json inside(const dosing::Chances& chances) {
  Json shares = Json::object();
  for (const auto& level : chances.levels) shares[level.quantity] = level.inside;
  return shares;
}

Json json_of(const dosing::Chances& chances) {
  Json levels = Json::object(), solids = Json::object();
  for (const auto& level : chances.levels) levels[level.quantity] = json_of(level.level);
  for (const auto& solid : chances.solids)
    solids[solid.solid] = {{"working", or_null(solid.working)},
                           {"idle", or_null(solid.idle)},
                           {"working_log10", json_of(solid.working_log10)},
                           {"idle_log10", json_of(solid.idle_log10)}};
  return {{"in_window_and_dissolved", chances.all},
          {"percentiles_5_50_95", std::move(levels)},
          {"dissolved", std::move(solids)},
          {"samples", chances.samples},
          {"unsolved", chances.unsolved}};
}

Json json_of(const std::vector<dosing::Removal>& removals) {
  Json list = Json::array();
  for (const auto& one : removals)
    list.push_back({{"quantity", one.quantity},
                    {"chemical", one.chemical},
                    {"solid", one.solid},
                    {"whole", one.whole_kg},
                    {"first", one.first_kg},
                    {"unit", "kg"}});
  return list;
}

Json json_of(const std::vector<dosing::Rest>& rest) {
  Json list = Json::array();
  for (const auto& one : rest)
    list.push_back({{"chemical", one.addition.chemical},
                    {"amount", one.addition.amount},
                    {"unit", one.addition.unit},
                    {"evaporate_L", one.evaporate_L}});
  return list;
}

Json json_of(const std::vector<dosing::Wait>& waits) {
  Json list = Json::array();
  for (const auto& one : waits)
    list.push_back({{"quantity", one.quantity},
                    {"use", one.use},
                    {"units", one.units},
                    {"unit", one.unit},
                    {"takes", one.takes}});
  return list;
}

Json json_of(const bath::BathType& type, const dosing::Plan& plan) {
  Json additions = Json::array(), steps = Json::array();
  for (const auto& a : plan.additions)
    additions.push_back({{"chemical", a.chemical}, {"amount", a.amount}, {"unit", a.unit}, {"cost", a.cost}});
  for (const auto& step : plan.steps) steps.push_back(json_of(type, step));
  Json shares, sampled, second_look;  // null where no chance was asked for
  if (plan.chances) shares = inside(*plan.chances), sampled = json_of(*plan.chances);
  if (plan.second_look)
    second_look = {{"at", plan.second_look->at},
                   {"probability_in_window", plan.second_look->in_every_window}};
  return {{"kind", plan.kind},
          {"reason", plan.reason},
          {"feasible", plan.feasible},
          {"cost", plan.cost},
          {"salt_load_mol", plan.salt_load_mol},
          {"decant_L", plan.decant_L},
          {"waste_L", plan.decant_L},
          {"probability_in_window", plan.chances ? Json(plan.chances->in_every_window) : Json(nullptr)},
          {"chances", std::move(shares)},
          {"sampled", std::move(sampled)},
          {"second_look", std::move(second_look)},
          {"additions", std::move(additions)},
          {"steps", std::move(steps)},
          {"final",
           {{"pH", plan.final_view.pH},
            {"volume_L", plan.final_view.volume_L},
            {"concentrations", concentrations(type, plan.final_view)},
            {"headroom", headroom_log10(plan.final_view)}}},
          {"unmet", plan.unmet},
          {"left_alone", plan.left_alone},
          {"conflicts", plan.conflicts},
          {"keep_apart", plan.keep_apart},
          {"rest", json_of(plan.rest)},
          {"waits", json_of(plan.waits)},
          {"removals", json_of(plan.removals)}};
}

}  // namespace

Json dose_document(const Shop& shop, const dosing::AdditionSheet& sheet,
                   const std::vector<std::string>& changed_since) {
  std::vector<std::string> warnings = changed_since;
  warnings.insert(warnings.end(), sheet.now.warnings.begin(), sheet.now.warnings.end());
  Json doc = document(warnings);
  doc["tank"] = shop.tank.name;
  doc["currency"] = shop.tank.currency;
  doc["plans"] = Json::array();
  for (const auto& plan : sheet.plans) doc["plans"].push_back(json_of(shop.type(), plan));
  doc["refused"] = Json::array();
  for (const auto& refusal : sheet.refused)
    doc["refused"].push_back({{"reason", refusal.reason}, {"rule", refusal.rule}});
  doc["cautions"] = sheet.cautions;
  return doc;
}

}  // namespace bathwright::work
