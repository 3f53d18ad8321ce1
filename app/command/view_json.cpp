#include "view_json.hpp"

#include <algorithm>
#include <bathwright/sheets/analysis_sheet.hpp>

namespace bathwright::command {

Json concentrations(const bath::BathType& type, const bath::TankView& view) {
  Json object = Json::object();
  for (std::size_t i = 0; i < type.quantities.size(); ++i)
    object[type.quantities[i].id] = view.quantity_g_per_L[i];
  return object;
}

Json headroom_log10(const bath::TankView& view) {
  Json object = Json::object();
  for (const auto& h : view.headroom)
    object[h.solid] = h.covers_working ? Json(h.working_log10) : Json(nullptr);
  return object;
}

Json log10_activities(const bath::TankView& view) {
  Json object = Json::object();
  for (const auto& s : view.species) object[s.name] = s.log10_activity;
  return object;
}

Json free_molalities(const bath::TankView& view) {
  Json object = Json::object();
  for (const auto& s : view.species) object[s.name] = s.molality;
  return object;
}

Json level_list(const std::vector<sheets::Judged>& judged) {
  Json list = Json::array();
  for (const auto& j : judged)
    list.push_back({{"quantity", j.aim->quantity},
                    {"value", j.found},
                    {"unit", j.unit},
                    {"low", j.aim->low},
                    {"aim", j.aim->aim},
                    {"high", j.aim->high},
                    {"state", sheets::words(j.standing)}});
  return list;
}

Json analysis_document(const bath::Tank& tank, const bath::BathType& type,
                       const analysis::Analysis& analysis) {
  Json doc = document(analysis.notes);
  doc["tank"] = tank.name;
  doc["volume_L"] = analysis.volume.v;
  doc["volume_from"] = analysis.volume_from;
  doc["temperature_C"] = analysis.temperature.v;
  doc["pH"] = analysis.pH;
  doc["results"] = Json::array();
  for (const auto& level : analysis.results)
    doc["results"].push_back({{"quantity", level.quantity},
                              {"value", level.value.v},
                              {"unit", "g/L"},
                              {"standard_uncertainty", level.standard_uncertainty.v},
                              {"from", analysis::name(level.from)},
                              {"how", level.how},
                              {"interferences", level.interferences}});
  doc["reconciled"] = doc["results"];  // the levels the state is made of: nothing moves them in this version
  doc["suspects"] = Json::array();
  for (const auto& suspect : analysis.suspects)
    doc["suspects"].push_back(
        {{"what", suspect.what}, {"reason", suspect.reason}, {"try", suspect.try_this}});
  doc["density"] = {
      {"predicted", analysis.density_predicted.v},
      {"measured", analysis.density_measured ? Json(analysis.density_measured->v) : Json(nullptr)}};
  doc["end_points"] = Json::array();
  for (const auto& bias : analysis.end_points)
    doc["end_points"].push_back({{"quantity", bias.quantity},
                                 {"method", bias.method},
                                 {"indicator", bias.indicator},
                                 {"bias_mL", bias.mL},
                                 {"bias_percent", 100 * bias.share},
                                 {"range_mL", {bias.from_mL, bias.to_mL}}});
  doc["levels"] = level_list(sheets::judge(tank, type, analysis));
  return doc;
}

bool all_in_window(const std::vector<sheets::Judged>& judged) {
  return std::all_of(judged.begin(), judged.end(),
                     [](const auto& j) { return j.standing == sheets::Standing::in_window; });
}

}  // namespace bathwright::command
