// What the colours must keep, in the light and in the dark: contrast for tired eyes, distance for eyes that
// see two of the three primaries, and a shape beside each colour that says something.
#include <imgui.h>

#include <algorithm>
#include <array>
#include <catch2/catch.hpp>
#include <cmath>
#include <optional>

#include <bathwright/charts/signs.hpp>

#include "window/theme.hpp"

using namespace bathwright;
using namespace bathwright::desktop;

namespace {

using Triple = std::array<double, 3>;

/// Linear red, green, blue of an sRGB colour (IEC 61966-2-1), 0 to 1.
Triple linear(const ImVec4& c) {
  const auto one = [](double v) { return v <= 0.04045 ? v / 12.92 : std::pow((v + 0.055) / 1.055, 2.4); };
  return {one(c.x), one(c.y), one(c.z)};
}

double luminance(const ImVec4& c) {
  const Triple l = linear(c);
  return 0.2126 * l[0] + 0.7152 * l[1] + 0.0722 * l[2];
}

/// WCAG 2.1, "contrast ratio": 1 to 21.
double contrast(const ImVec4& a, const ImVec4& b) {
  const auto [low, high] = std::minmax({luminance(a), luminance(b)});
  return (high + 0.05) / (low + 0.05);
}

struct Eyes {
  const char* name;
  std::array<Triple, 3> matrix;  ///< linear RGB to linear RGB
};

/// Machado, Oliveira, Fernandes, "A physiologically-based model for simulation of color vision deficiency",
/// IEEE Transactions on Visualization and Computer Graphics 15 (2009) 1291, severity 1.0; from memory.
constexpr Eyes eyes[] = {
    {"all three primaries", {{{1, 0, 0}, {0, 1, 0}, {0, 0, 1}}}},
    {"protanopia",
     {{{0.152286, 1.052583, -0.204868}, {0.114503, 0.786281, 0.099216}, {-0.003882, -0.048116, 1.051998}}}},
    {"deuteranopia",
     {{{0.367322, 0.860646, -0.227968}, {0.280085, 0.672501, 0.047413}, {-0.011820, 0.042940, 0.968881}}}},
    {"tritanopia",
     {{{1.255528, -0.076749, -0.178779}, {-0.078411, 0.930809, 0.147602}, {0.004733, 0.691367, 0.303900}}}}};

/// CIE 1976 L*a*b* under D65 of a linear sRGB colour.
Triple lab(const Triple& l) {
  const auto f = [](double t) {
    constexpr double d = 6.0 / 29;
    return t > d * d * d ? std::cbrt(t) : t / (3 * d * d) + 4.0 / 29;
  };
  const double x = f((0.4124564 * l[0] + 0.3575761 * l[1] + 0.1804375 * l[2]) / 0.95047),
               y = f(0.2126729 * l[0] + 0.7151522 * l[1] + 0.0721750 * l[2]),
               z = f((0.0193339 * l[0] + 0.1191920 * l[1] + 0.9503041 * l[2]) / 1.08883);
  return {116 * y - 16, 500 * (x - y), 200 * (y - z)};
}

Triple seen_by(const Eyes& who, charts::Colour c) {
  const Triple light = linear(colour(c));
  Triple seen{};
  for (std::size_t i = 0; i < 3; ++i) {
    for (std::size_t j = 0; j < 3; ++j) seen[i] += who.matrix[i][j] * light[j];
    seen[i] = std::clamp(seen[i], 0.0, 1.0);
  }
  return lab(seen);
}

/// CIE 1976 colour difference.
double distance(const Triple& a, const Triple& b) {
  return std::hypot(a[0] - b[0], a[1] - b[1], a[2] - b[2]);
}

class Themed {
 public:
  explicit Themed(bool dark) : context_(ImGui::CreateContext()) { set_theme(palette(dark), 1); }
  ~Themed() { ImGui::DestroyContext(context_); }
  Themed(const Themed&) = delete;
  Themed& operator=(const Themed&) = delete;

 private:
  ImGuiContext* context_;
};

/// What a sign is made of.
class Shapes final : public charts::Canvas {
 public:
  int triangles = 0, other_convex = 0, boxes = 0, dots = 0, rings = 0;

  void polyline(std::span<const charts::Point>, const charts::Pen&) override {}
  void fill(const charts::Box&, charts::Colour) override { ++boxes; }
  void circle(charts::Point, double, charts::Colour, bool filled) override { ++(filled ? dots : rings); }
  void convex(std::span<const charts::Point> corners, charts::Colour) override {
    ++(corners.size() == 3 ? triangles : other_convex);
  }
  void strip(std::span<const charts::Point>, std::span<const charts::Point>, charts::Colour) override {}
  void text(charts::Point, std::string_view, const charts::Lettering&) override {}
  double text_width(std::string_view, const charts::Lettering&) override { return 0; }
  void clip(const charts::Box&) override {}
  void unclip() override {}
};

}  // namespace

TEST_CASE("every ink can be read on every ground it stands on", "[unit][desktop][property]") {
  const bool dark = GENERATE(false, true);
  const Themed themed(dark);
  const charts::Palette& p = palette(dark);
  const ImVec4* const style = ImGui::GetStyle().Colors;
  const auto check = [&](const char* what, charts::Colour ink, std::initializer_list<ImVec4> grounds,
                         double least) {
    int at = 0;
    for (const ImVec4& ground : grounds) {
      INFO((dark ? "dark, " : "light, ") << what << ", ground " << at++);
      CHECK(contrast(colour(ink), ground) >= least);
    }
  };
  constexpr double of_text = 4.5, of_signs = 3;  // WCAG 2.1, 1.4.3 and 1.4.11, level AA
  const ImVec4 page = style[ImGuiCol_WindowBg], card = colour(p.card), popup = style[ImGuiCol_PopupBg],
               chosen = style[ImGuiCol_Header], under_pointer = style[ImGuiCol_HeaderHovered],
               button = style[ImGuiCol_ButtonHovered], button_down = style[ImGuiCol_ButtonActive],
               field = style[ImGuiCol_FrameBg], field_hovered = style[ImGuiCol_FrameBgHovered],
               field_typed_in = style[ImGuiCol_FrameBgActive], head = style[ImGuiCol_TableHeaderBg];
  check("ink", p.ink,
        {page, card, popup, chosen, under_pointer, style[ImGuiCol_HeaderActive], button, button_down, field,
         field_hovered, field_typed_in, head, style[ImGuiCol_TextSelectedBg]},
        of_text);
  check("quiet ink", p.quiet, {page, card, popup, chosen, under_pointer}, of_text);
  check("the hint in a field", p.quiet, {field, field_hovered, field_typed_in}, of_text);
  check("act", p.act, {page, card, chosen, under_pointer}, of_text);
  check("stop", p.stop, {page, card, chosen, under_pointer}, of_text);
  check("predicted", p.predicted, {page, card}, of_text);
  check("accent", p.accent, {page, card, button, button_down}, of_text);
  check("letters of the main button", p.card, {colour(p.accent)}, of_text);
  // Bars behind figures and the liquid in a vessel are a quarter of the accent at the most.
  const ImVec4 a = colour(p.accent);
  const ImVec4 bar{card.x + (a.x - card.x) / 4, card.y + (a.y - card.y) / 4, card.z + (a.z - card.z) / 4, 1};
  check("ink on a bar", p.ink, {bar}, of_text);

  check("the edge of a field, a box, a slider", p.edge, {card, field}, of_signs);
  check("the ring of the focus and a slider's grip", p.accent, {page, card, chosen, field_typed_in},
        of_signs);
  check("the mark of act", p.act, {page, card, chosen}, of_signs);
  check("the mark of stop", p.stop, {page, card, chosen}, of_signs);
}

TEST_CASE("colours that say something stay apart for every kind of eyes", "[unit][desktop][property]") {
  for (const Eyes& who : eyes)
    for (const Triple& row : who.matrix)
      CHECK(row[0] + row[1] + row[2] == Approx(1).margin(2e-6));  // grey stays grey

  const charts::Palette& p = palette(GENERATE(false, true));
  const std::pair<const char*, charts::Colour> all[] = {{"in window", p.ink},
                                                        {"found", p.accent},
                                                        {"predicted", p.predicted},
                                                        {"act", p.act},
                                                        {"stop", p.stop}};
  constexpr double apart = 15;  // of CIE 1976; about 2.3 is just seen
  for (const Eyes& who : eyes)
    for (const auto& one : all)
      for (const auto& other : all) {
        if (one.first >= other.first) continue;
        INFO(who.name << ": " << one.first << " and " << other.first);
        CHECK(distance(seen_by(who, one.second), seen_by(who, other.second)) > apart);
      }
}

TEST_CASE("no colour speaks alone: each state has a shape of its own", "[unit][desktop]") {
  Shapes in_window, act, stop, found, predicted;
  const charts::Palette& p = palette(false);
  draw_mark(in_window, {0, 0}, 10, charts::State::in_window, p);
  CHECK(in_window.triangles + in_window.boxes + in_window.other_convex == 0);
  draw_mark(act, {0, 0}, 10, charts::State::act, p);
  CHECK((act.triangles == 1 && act.boxes == 0));
  draw_mark(stop, {0, 0}, 10, charts::State::stop, p);
  CHECK((stop.triangles == 0 && stop.boxes == 1));
  charts::StripSign aimed;
  aimed.low = 60, aimed.aim = 75, aimed.high = 90;
  charts::StripSign with_found = aimed, with_predicted = aimed;
  with_found.found = 70;
  with_predicted.predicted = 70;
  draw_strip(found, {0, 0, 100, 20}, with_found, p);
  CHECK((found.dots == 1 && found.rings == 0));
  draw_strip(predicted, {0, 0, 100, 20}, with_predicted, p);
  CHECK((predicted.dots == 0 && predicted.rings == 1));
}
