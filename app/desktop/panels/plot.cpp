#include <imgui.h>
// after imgui.h, which it needs
#include <imgui_internal.h>

#include <algorithm>
#include <cmath>
#include <cstdio>

#include "panels.hpp"

namespace bathwright::desktop {
namespace {

std::string short_figure(double value) {
  char text[32];
  std::snprintf(text, sizeof text, "%.4g", value);
  return text;
}

/// The value of a line at x, between its points; NaN outside.
double value_at(const charts::Series& line, double x) {
  for (std::size_t i = 1; i < line.x.size(); ++i)
    if (line.x[i - 1] <= x && x <= line.x[i]) {
      const double width = line.x[i] - line.x[i - 1];
      const double share = width > 0 ? (x - line.x[i - 1]) / width : 0;
      return line.y[i - 1] + share * (line.y[i] - line.y[i - 1]);
    }
  return std::nan("");
}

/// One row a point, as spreadsheets take it.
std::string data_of(const charts::Chart& chart) {
  std::string text = chart.x_title;
  for (const auto& line : chart.lines)
    text +=
        '\t' + (line.name.empty() ? chart.title : line.name) + (chart.unit.empty() ? "" : " " + chart.unit);
  text += '\n';
  if (chart.lines.empty()) return text;
  for (const double x : chart.lines.front().x) {
    text += short_figure(x);
    for (const auto& line : chart.lines) text += '\t' + short_figure(value_at(line, x));
    text += '\n';
  }
  for (const auto& found : chart.found)
    text += short_figure(found.x) + '\t' + short_figure(found.y) + "\tfound\n";
  return text;
}

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
    ImGui::SetClipboardText(data_of(chart).c_str());
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
