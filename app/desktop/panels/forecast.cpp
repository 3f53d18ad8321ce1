#include <imgui.h>
// after imgui.h, which it needs
#include <imgui_stdlib.h>

#include "figures.hpp"
#include "panels.hpp"

namespace bathwright::desktop {
namespace {

void draw_levers(const ForecastView& view, const Look& look, Intents& out) {
  for (std::size_t i = 0; i < view.levers.size(); ++i) {
    const LeverView& lever = view.levers[i];
    ImGui::AlignTextToFramePadding();
    ImGui::TextUnformatted(lever.name.c_str());
    ImGui::SameLine(look.px(90));
    ImGui::SetNextItemWidth(look.px(130));
    double value = lever.value;
    ImGui::PushID(static_cast<int>(i));
    if (ImGui::SliderScalar("##lever", ImGuiDataType_Double, &value, &lever.low, &lever.high, ""))
      out.emplace_back(MoveLever{static_cast<int>(i), value});
    ImGui::PopID();
    note_place(look, "lever " + lever.name);
    ImGui::SameLine();
    said(look, look.palette.ink, lever.words);
  }
}

void draw_limits(const ForecastView& view, const Look& look) {
  if (!ImGui::BeginTable("limits", 3, ImGuiTableFlags_SizingStretchProp)) return;
  for (const auto& [name, weight] : {std::pair{"limit", 2.0F}, {"met", 1.5F}, {"90 %", 0.8F}})
    ImGui::TableSetupColumn(name, 0, weight);
  ImGui::PushFont(look.fonts.caption);
  ImGui::TableHeadersRow();
  for (const LimitRow& row : view.limits) {
    ImGui::TableNextRow();
    ImGui::TableNextColumn();
    standing(look, static_cast<int>(row.state), row.name);
    if (ImGui::IsItemHovered()) ImGui::SetTooltip("%s", row.why.c_str());
    ImGui::TableNextColumn();
    said(look, row.state == charts::State::act ? look.palette.act : look.palette.quiet, row.when);
    ImGui::TableNextColumn();
    quiet(look, row.span);
  }
  ImGui::PopFont();
  ImGui::EndTable();
}

void draw_charts(const ForecastView& view, const Look& look) {
  constexpr float least_wide = 330, height = 200, gap = 12;
  const float all = ImGui::GetContentRegionAvail().x / look.scale;
  const int columns = std::max(1, static_cast<int>((all + gap) / (least_wide + gap)));
  const float width = (all - gap * static_cast<float>(columns - 1)) / static_cast<float>(columns);
  for (std::size_t i = 0; i < view.charts.size(); ++i) {
    if (i % static_cast<std::size_t>(columns) != 0) ImGui::SameLine(0, look.px(gap));
    draw_plot(view.charts[i], width, height, look);
  }
}

}  // namespace

void draw_forecast(const ForecastView& view, const PrintedView& printed, const std::string& tank,
                   PanelState& state, const Look& look, Intents& out) {
  title(look, tank + ": what builds up");
  if (!view.empty.empty()) {
    said(look, look.palette.ink, view.empty);
    return;
  }
  const bool stacked = ImGui::GetContentRegionAvail().x < look.px(700);
  const float side = stacked ? 0 : look.px(380), half = stacked ? ImGui::GetContentRegionAvail().y / 2 : 0;
  ImGui::BeginChild("levers", {side, half}, false, ImGuiWindowFlags_NavFlattened);
  quiet(look, view.from);
  ImGui::AlignTextToFramePadding();
  ImGui::TextUnformatted("policy");
  ImGui::SameLine(look.px(90));
  ImGui::SetNextItemWidth(-1);
  const auto chosen = static_cast<std::size_t>(view.policy);
  if (ImGui::BeginCombo("##policy", chosen < view.policies.size() ? view.policies[chosen].c_str() : "")) {
    for (std::size_t i = 0; i < view.policies.size(); ++i)
      if (ImGui::Selectable(view.policies[i].c_str(), i == chosen))
        out.emplace_back(ChoosePolicy{static_cast<int>(i)});
    ImGui::EndCombo();
  }
  draw_levers(view, look, out);
  if (view.working) {
    const std::string words = std::to_string(static_cast<int>(100 * view.progress)) + " % of the samples";
    ImGui::ProgressBar(static_cast<float>(view.progress), {look.px(240), 0}, words.c_str());
    ImGui::SameLine();
    // What it takes to print is worked out before there is anything to stop.
    if (button(look, "Stop", view.may_print)) out.emplace_back(StopSampling{});
  }
  for (const std::string& fault : view.faults) standing(look, static_cast<int>(charts::State::stop), fault);
  heading(look, "Limits");
  draw_limits(view, look);
  if (!view.limits.empty()) copies(look, "the limits", [&] { return figures_of(view); });
  heading(look, "What it costs");
  for (const auto& [name, value] : view.figures) {
    quiet(look, name);
    ImGui::SameLine();
    right_aligned(value);
  }
  heading(look, "Keep it");
  ImGui::SetNextItemWidth(look.px(230));
  ImGui::InputTextWithHint("##file", "forecast.pdf, .svg or .png", &state.file);
  note_place(look, "forecast file");
  ImGui::SameLine();
  const bool may_save = !state.file.empty() && !view.charts.empty();
  if (button(look, "Save the charts", may_save)) out.emplace_back(SaveCharts{Charts::forecast, state.file});
  if (button(look, "Print the forecast", view.may_print)) out.emplace_back(PrintForecast{});
  ImGui::SameLine();
  if (!view.charts.empty()) copies(look, "the charts", [&] { return figures_of(view.charts); });
  draw_show_printed(printed, look, out);
  for (const std::string& note : view.notes) quiet(look, note);
  ImGui::EndChild();
  if (!stacked) ImGui::SameLine(0, look.px(16));
  ImGui::BeginChild("charts", {0, 0}, false, ImGuiWindowFlags_NavFlattened);
  if (view.charts.empty()) quiet(look, view.working ? "working out ..." : "nothing to show yet");
  draw_charts(view, look);
  ImGui::EndChild();
}

}  // namespace bathwright::desktop
