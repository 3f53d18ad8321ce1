// A Canvas on an ImGui draw list: what is saved to a file is what was seen here.
#pragma once

#include <imgui.h>

#include <bathwright/charts/canvas.hpp>

#include "../window/fonts.hpp"

namespace bathwright::desktop {

class DrawListCanvas final : public charts::Canvas {
 public:
  /// Draws with the upper left of the canvas at `origin` of the screen; `scale` pixels are one of the canvas.
  DrawListCanvas(ImDrawList& list, const Fonts& fonts, ImVec2 origin, float scale)
      : list_(list), fonts_(fonts), origin_(origin), scale_(scale) {}

  void polyline(std::span<const charts::Point> points, const charts::Pen& pen) override;
  void fill(const charts::Box& box, charts::Colour colour) override;
  void circle(charts::Point centre, double radius, charts::Colour colour, bool filled) override;
  void convex(std::span<const charts::Point> corners, charts::Colour colour) override;
  void strip(std::span<const charts::Point> upper, std::span<const charts::Point> lower,
             charts::Colour colour) override;
  void text(charts::Point at, std::string_view words, const charts::Lettering& lettering) override;
  [[nodiscard]] double text_width(std::string_view words, const charts::Lettering& lettering) override;
  void clip(const charts::Box& box) override;
  void unclip() override;

 private:
  [[nodiscard]] ImVec2 on_screen(charts::Point p) const {
    return {origin_.x + static_cast<float>(p.x) * scale_, origin_.y + static_cast<float>(p.y) * scale_};
  }
  [[nodiscard]] const ImFont* font_for(const charts::Lettering& lettering) const;

  ImDrawList& list_;
  const Fonts& fonts_;
  ImVec2 origin_;
  float scale_;
  bool clipped_ = false;
};

}  // namespace bathwright::desktop
