#include "theme.hpp"

namespace bathwright::desktop {
namespace {

constexpr charts::Palette night{
    {0x16, 0x1B, 0x1F}, {0x1F, 0x26, 0x2B}, {0x3A, 0x44, 0x4B}, {0xE8, 0xEA, 0xE6}, {0xA3, 0xAE, 0xB5},
    {0x6F, 0xC3, 0xD6}, {0xAE, 0x86, 0xDE}, {0xF0, 0xA8, 0x5A}, {0xEB, 0x76, 0x86}, {0x7C, 0x87, 0x8E}};

/// `share` of the way from a to b.
charts::Colour between(charts::Colour a, charts::Colour b, double share) {
  const auto mix = [&](std::uint8_t from, std::uint8_t to) {
    return static_cast<std::uint8_t>(from + share * (to - from));
  };
  return {mix(a.red, b.red), mix(a.green, b.green), mix(a.blue, b.blue), 255};
}

}  // namespace

ImVec4 colour(charts::Colour c) {
  return {static_cast<float>(c.red) / 255, static_cast<float>(c.green) / 255,
          static_cast<float>(c.blue) / 255, static_cast<float>(c.alpha) / 255};
}

const charts::Palette& palette(bool dark) { return dark ? night : charts::day_palette; }

void set_theme(const charts::Palette& p, float scale) {
  ImGuiStyle style;
  style.WindowPadding = {12, 12};
  style.FramePadding = {8, 4};
  style.ItemSpacing = {8, 4};
  style.ItemInnerSpacing = {8, 4};
  style.CellPadding = {8, 4};
  style.ScrollbarSize = 12;
  style.WindowRounding = style.ChildRounding = 0;
  style.FrameRounding = style.PopupRounding = style.GrabRounding = 2;
  style.WindowBorderSize = 0;
  style.ChildBorderSize = style.FrameBorderSize = 1;
  style.GrabMinSize = 12;
  style.ScaleAllSizes(scale);

  const auto set = [&](ImGuiCol which, charts::Colour c) { style.Colors[which] = colour(c); };
  const charts::Colour hover = between(p.card, p.accent, 0.08), pressed = between(p.card, p.accent, 0.14);
  for (const ImGuiCol all : {ImGuiCol_WindowBg, ImGuiCol_MenuBarBg, ImGuiCol_TitleBg, ImGuiCol_ScrollbarBg})
    set(all, p.page);
  for (const ImGuiCol all : {ImGuiCol_PopupBg, ImGuiCol_FrameBg, ImGuiCol_Button, ImGuiCol_Tab})
    set(all, p.card);
  // Panels stand on the cleared window, which has the colour of cards.
  for (const ImGuiCol all : {ImGuiCol_ChildBg, ImGuiCol_TableRowBg}) style.Colors[all] = {0, 0, 0, 0};
  for (const ImGuiCol all : {ImGuiCol_Separator, ImGuiCol_TableBorderLight, ImGuiCol_TableBorderStrong})
    set(all, p.rule);
  for (const ImGuiCol all : {ImGuiCol_Border, ImGuiCol_ScrollbarGrab}) set(all, p.edge);
  for (const ImGuiCol all : {ImGuiCol_ButtonHovered, ImGuiCol_FrameBgHovered, ImGuiCol_HeaderHovered,
                             ImGuiCol_TabHovered, ImGuiCol_Header})
    set(all, hover);
  for (const ImGuiCol all :
       {ImGuiCol_ButtonActive, ImGuiCol_FrameBgActive, ImGuiCol_HeaderActive, ImGuiCol_TabActive})
    set(all, pressed);
  for (const ImGuiCol all : {ImGuiCol_CheckMark, ImGuiCol_PlotHistogram, ImGuiCol_SliderGrab,
                             ImGuiCol_SliderGrabActive, ImGuiCol_NavHighlight, ImGuiCol_SeparatorHovered,
                             ImGuiCol_SeparatorActive, ImGuiCol_ScrollbarGrabActive})
    set(all, p.accent);
  for (const ImGuiCol all : {ImGuiCol_Text}) set(all, p.ink);
  for (const ImGuiCol all : {ImGuiCol_TextDisabled, ImGuiCol_ScrollbarGrabHovered}) set(all, p.quiet);
  set(ImGuiCol_TableHeaderBg, p.page);
  set(ImGuiCol_TextSelectedBg, between(p.card, p.accent, 0.35));
  ImGui::GetStyle() = style;
}

}  // namespace bathwright::desktop
