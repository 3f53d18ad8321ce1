#include "panels.hpp"

namespace bathwright::desktop {
namespace {

constexpr float rail = 190, strip = 74, status = 24, chemistry = 330;
constexpr ImGuiWindowFlags fixed = ImGuiWindowFlags_NoDecoration | ImGuiWindowFlags_NoMove |
                                   ImGuiWindowFlags_NoBringToFrontOnFocus | ImGuiWindowFlags_NoSavedSettings;

void draw_page(const DeskView& view, PanelState& state, const Look& look, Intents& out) {
  ImGui::PushFont(look.fonts.heading);
  ImGui::TextUnformatted(view.tank_title.c_str());
  ImGui::PopFont();
  if (!view.tank_sub.empty()) quiet(look, view.tank_sub);
  if (!view.empty.empty()) {
    said(look, look.palette.ink, view.empty);
    return;
  }
  draw_readings(view.readings, state, look, out);
  draw_state(view.state, look);
  draw_additions(view.additions, look, out);
  draw_sign(view.sign, view.additions, state, look, out);
}

}  // namespace

void draw_desk(const DeskView& view, PanelState& state, const Look& look, Intents& out) {
  const ImVec2 all = ImGui::GetIO().DisplaySize;
  ImGui::SetNextWindowPos({0, 0});
  ImGui::SetNextWindowSize(all);
  ImGui::PushStyleVar(ImGuiStyleVar_WindowPadding, {0, 0});
  ImGui::PushStyleVar(ImGuiStyleVar_ItemSpacing, {0, 0});
  ImGui::Begin("desk", nullptr, fixed);
  ImGui::PopStyleVar(2);
  const float body = all.y - look.px(strip + status), left = look.px(rail), right = look.px(chemistry);
  const auto panel = [&](const char* name, ImVec2 size, auto&& draw) {
    ImGui::BeginChild(name, size, true);
    draw();
    ImGui::EndChild();
  };
  ImGui::PushStyleVar(ImGuiStyleVar_ItemSpacing, {0, 0});
  const auto spaced = [&](auto&& draw) {
    return [&, draw] {
      ImGui::PushStyleVar(ImGuiStyleVar_ItemSpacing, {look.px(8), look.px(4)});
      draw();
      ImGui::PopStyleVar();
    };
  };
  panel("line", {left, body}, spaced([&] { draw_line(view.line, look, out); }));
  ImGui::SameLine();
  panel("tank", {all.x - left - right, body}, spaced([&] { draw_page(view, state, look, out); }));
  ImGui::SameLine();
  panel("chemistry", {right, body}, spaced([&] { draw_chemistry(view.chemistry, look); }));
  panel("shift", {all.x, look.px(strip)}, spaced([&] { draw_shift(view.shift, look); }));
  ImGui::PopStyleVar();
  ImGui::SetCursorPosX(look.px(12));
  quiet(look, view.status.log + "    " + view.status.renderer + "    " + view.status.doing);
  ImGui::End();
}

}  // namespace bathwright::desktop
