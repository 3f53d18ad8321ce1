#include <imgui.h>
// after imgui.h, which it needs
#include <imgui_internal.h>

#include <algorithm>
#include <cmath>

#include "figures.hpp"
#include "panels.hpp"

namespace bathwright::desktop {
namespace {

void draw_cursor(const charts::Chart& chart, const charts::Frame& frame, double x, DrawListCanvas& canvas,
                 const Look& look) {
  const charts::Point top = frame.at(x, frame.y.high()), bottom = frame.at(x, frame.y.low());
  const charts::Point ends[] = {{top.x, frame.plot.top}, {bottom.x, frame.plot.bottom()}};
  canvas.polyline(ends, {look.palette.quiet, 1, false});
  std::string words = chart.x_title + " " + short_figure(x);
  for (const auto& line : chart.lines) {
    const double y = value_at(line, x);
    if (std::isfinite(y))
      words +=
          "\n" + (line.name.empty() ? chart.title : line.name) + " " + short_figure(y) + " " + chart.unit;
  }
  for (const auto& band : chart.bands)
    for (std::size_t i = 0; i < band.x.size(); ++i)
      if (band.x[i] >= x) {
        words += "\n90 % between " + short_figure(band.low[i]) + " and " + short_figure(band.high[i]);
        break;
      }
  ImGui::SetTooltip("%s\n(a click or Enter copies the figures)", words.c_str());
}

}  // namespace

void draw_plot(const charts::Chart& chart, float width_at_100, float height_at_100, const Look& look) {
  const ImVec2 origin = ImGui::GetCursorScreenPos();
  ImGui::PushID(chart.title.c_str());
  if (ImGui::InvisibleButton("plot", {look.px(width_at_100), look.px(height_at_100)}))
    ImGui::SetClipboardText(figures_of(chart).c_str());
  DrawListCanvas canvas(*ImGui::GetWindowDrawList(), look.fonts, origin, look.scale);
  const charts::Frame frame = draw(chart, canvas, {0, 0, width_at_100, height_at_100}, look.palette);
  float* cursor = ImGui::GetStateStorage()->GetFloatRef(ImGui::GetID("cursor"), 0.5F);
  const bool focused = ImGui::IsItemFocused() && ImGui::GetIO().NavVisible;
  if (focused) {
    ring(look);
    constexpr float step = 0.02F;
    const float way = ImGui::IsKeyPressed(ImGui::GetKeyIndex(ImGuiKey_LeftArrow))    ? -step
                      : ImGui::IsKeyPressed(ImGui::GetKeyIndex(ImGuiKey_RightArrow)) ? step
                                                                                     : 0;
    if (ImGui::GetIO().KeyShift && way != 0) {
      *cursor = std::clamp(*cursor + way, 0.0F, 1.0F);
      ImGui::NavMoveRequestCancel();  // the arrow is the line's, the focus stays
    }
  }
  if (ImGui::IsItemHovered()) {
    const double x = (ImGui::GetIO().MousePos.x - origin.x) / look.scale;
    if (x >= frame.plot.left && x <= frame.plot.right())
      draw_cursor(chart, frame, frame.x.value((x - frame.plot.left) / frame.plot.width), canvas, look);
  } else if (focused) {
    draw_cursor(chart, frame, frame.x.value(*cursor), canvas, look);
  }
  ImGui::PopID();
}

}  // namespace bathwright::desktop
