#include "documents.hpp"

#include <algorithm>
#include <bathwright/sheets/analysis_sheet.hpp>

namespace bathwright::work {

namespace {

void unsign_zeros(Json& value) {
  if (value.is_structured())
    for (Json& element : value) unsign_zeros(element);
  else if (value.is_number_float() && value.get<double>() == 0)
    value = 0.0;
}

/// The rows and columns of the component amounts, without the volume's, which are the last.
std::vector<double> of_the_amounts(const std::vector<double>& covariance, std::size_t components) {
  std::vector<double> kept;
  for (std::size_t row = 0; row < components; ++row) {
    const auto first = covariance.begin() + static_cast<std::ptrdiff_t>(row * (components + 1));
    kept.insert(kept.end(), first, first + static_cast<std::ptrdiff_t>(components));
  }
  return kept;
}

}  // namespace

Json document(const std::vector<std::string>& warnings) {
  return {{"program", "bathwright"}, {"version", BATHWRIGHT_VERSION}, {"warnings", warnings}};
}

Json or_null(const std::optional<double>& value) { return value ? Json(*value) : Json(); }

std::string text_of(Json document, int indent) {
  unsign_zeros(document);
  return document.dump(indent, ' ', false, Json::error_handler_t::replace);
}

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

namespace {

Json json_of(const std::vector<analysis::LevelFound>& levels) {
  Json list = Json::array();
  for (const auto& level : levels)
    list.push_back({{"quantity", level.quantity},
                    {"value", level.value.v},
                    {"unit", "g/L"},
                    {"standard_uncertainty", level.standard_uncertainty.v},
                    {"from", analysis::name(level.from)},
                    {"how", level.how},
                    {"interferences", level.interferences}});
  return list;
}

Json json_of(const analysis::Misfit& misfit) {
  Json residuals = Json::array(), explanations = Json::array();
  const auto entry = [](const std::optional<std::int64_t>& seq) { return seq ? Json(*seq) : Json(nullptr); };
  for (const auto& residual : misfit.residuals)
    residuals.push_back(
        {{"what", residual.what}, {"entry", entry(residual.entry)}, {"studentised", residual.studentised}});
  for (const auto& explanation : misfit.explanations)
    explanations.push_back({{"culprit", explanation.culprit},
                            {"words", explanation.words},
                            {"entry", entry(explanation.entry)},
                            {"chi_square_drop", explanation.chi_square_drop},
                            {"log_evidence", explanation.log_evidence}});
  return {{"chi_square", misfit.chi_square},        {"degrees_of_freedom", misfit.degrees_of_freedom},
          {"probability", misfit.probability},      {"alarm", misfit.alarm},
          {"one_is_clear", misfit.one_is_clear},    {"residuals", std::move(residuals)},
          {"explanations", std::move(explanations)}};
}

}  // namespace

Json analysis_document(const bath::Tank& tank, const bath::Chemistry& chemistry,
                       const analysis::Analysis& analysis) {
  Json doc = document(analysis.notes);
  doc["tank"] = tank.name;
  doc["sampled"] = analysis.sampled;
  if (!tank.limits.revision.empty())
    doc["limits"] = {
        {"revision", tank.limits.revision}, {"from", tank.limits.from}, {"owner", tank.limits.owner}};
  doc["volume_L"] = analysis.volume.v;
  doc["volume_from"] = analysis.volume_from;
  doc["temperature_C"] = analysis.temperature.v;
  doc["pH"] = analysis.pH;
  doc["results"] = json_of(analysis.results);
  doc["book"] = json_of(analysis.expected);
  doc["reconciled"] = json_of(analysis.reconciled);
  doc["volume_reconciled_L"] = analysis.volume_reconciled.v;
  doc["misfit"] = json_of(analysis.misfit);
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
  doc["end_points_unknown"] = Json::array();
  for (const auto& one : analysis.end_points_unknown)
    doc["end_points_unknown"].push_back(
        {{"quantity", one.quantity}, {"method", one.method}, {"why", one.why}});
  doc["levels"] = level_list(sheets::judge(tank, chemistry.type(), analysis));
  doc["tank_state"] = {
      {"components", chemistry.components()},
      {"component_mol", analysis.state.component_mol},
      {"water_kg", analysis.state.water_kg},
      {"covariance_mol2", of_the_amounts(analysis.covariance, chemistry.components().size())}};
  return doc;
}

std::optional<double> density_in(const Json& analysis_document) {
  const Json density = analysis_document.value("density", Json::object());
  for (const char* from : {"measured", "predicted"})
    if (density.is_object() && density.contains(from) && density[from].is_number() &&
        density[from].get<double>() > 0)
      return density[from].get<double>();
  return std::nullopt;
}

bool all_in_window(const std::vector<sheets::Judged>& judged) {
  return std::all_of(judged.begin(), judged.end(),
                     [](const auto& j) { return j.standing == sheets::Standing::in_window; });
}

}  // namespace bathwright::work
