#include <algorithm>

#include "panels.hpp"

namespace bathwright::desktop {
namespace {

constexpr float pages_high = 40, strip = 70, status = 24;
/// Large letters in a small window: a narrow line, no time line, the chemistry below the page.
constexpr float cramped = 1000, cramped_strip = 36;
bool is_cramped(const Look& look) { return ImGui::GetIO().DisplaySize.x < look.px(cramped); }

/// Beside the page; in a small window they leave it room for a row of burettes.
struct Sides {
  float line, chemistry;
};
Sides sides(const Look& look) {
  constexpr float very_small = 800, small = 1200;
  const float width = ImGui::GetIO().DisplaySize.x / look.scale;
  if (is_cramped(look)) return {width < very_small ? 130.F : 174.F, 0};
  return width < small ? Sides{174, 300} : Sides{190, 330};
}

/// One line that ends at the window's edge; the whole of it under the pointer.
void status_line(const std::string& words, charts::Colour c) {
  ImGui::PushStyleColor(ImGuiCol_Text, colour(c));
  ImGui::TextUnformatted(words.c_str(), words.c_str() + std::min(words.find('\n'), words.size()));
  ImGui::PopStyleColor();
  if (ImGui::IsItemHovered() && ImGui::GetItemRectMax().x > ImGui::GetIO().DisplaySize.x)
    ImGui::SetTooltip("%s", words.c_str());
}

// The window is cleared in the colour of the cards: on a software renderer a ground that covers all of it is
// dear.
constexpr ImGuiWindowFlags fixed = ImGuiWindowFlags_NoBackground | ImGuiWindowFlags_NoDecoration |
                                   ImGuiWindowFlags_NoMove | ImGuiWindowFlags_NoBringToFrontOnFocus |
                                   ImGuiWindowFlags_NoSavedSettings;

/// The pages as words; the one that is open is underlined.
void draw_pages(const DeskView& view, PanelState& state, const Look& look, Intents& out) {
  ImGui::SetCursorPos({look.px(is_cramped(look) ? 4 : sides(look).line), look.px(6)});
  if (state.go_to_part && state.part == Part::pages) ImGui::SetKeyboardFocusHere();
  for (const auto& [page, words] : pages) {
    const bool open = page == view.page;
    ImGui::PushFont(open ? look.fonts.bold : look.fonts.body);
    ImGui::PushStyleColor(ImGuiCol_Button, colour(look.palette.page));
    ImGui::PushStyleColor(ImGuiCol_Text, colour(open ? look.palette.accent : look.palette.ink));
    if (button(look, words)) out.emplace_back(GoTo{page});
    ImGui::PopStyleColor(2);
    ImGui::PopFont();
    const ImVec2 low = ImGui::GetItemRectMin(), high = ImGui::GetItemRectMax();
    if (open)
      ImGui::GetWindowDrawList()->AddRectFilled({low.x, high.y}, {high.x, high.y + look.px(2)},
                                                packed(look.palette.accent));
    ImGui::SameLine(0, look.px(4));
  }
  ImGui::SetCursorPosX(ImGui::GetWindowWidth() - look.px(is_cramped(look) ? 44 : 80));
  if (button(look, is_cramped(look) ? "F1" : "F1 keys")) state.key_list = true;
}

void draw_tank(const DeskView& view, PanelState& state, const Look& look, Intents& out) {
  title(look, view.tank_title);
  if (!view.tank_sub.empty()) quiet(look, view.tank_sub);
  draw_readings(view.readings, state, look, out);
  draw_state(view.state, look);
  if (view.slip.number != 0) {
    draw_slip(view.slip, view.sign, view.printed, state, look, out);
  } else {
    state.slip = 0;
    draw_additions(view.additions, state, look, out);
    draw_sign(view.sign, view.additions, state, look, out);
  }
}

/// Another page, tank or printed sheet begins at its top.
void scroll_to_its_top(const DeskView& view, PanelState& state) {
  std::string now = view.tank_title + (view.printed.open ? " printed " : " page ") +
                    std::to_string(static_cast<int>(view.page));
  if (now != state.in_sight) ImGui::SetScrollY(0);
  state.in_sight = std::move(now);
}

void draw_page(const DeskView& view, PanelState& state, const Look& look, Intents& out) {
  scroll_to_its_top(view, state);
  if (view.printed.open) return draw_printed(view.printed, look, out);
  switch (view.page) {
    case PageName::shift:
      return draw_tank(view, state, look, out);
    case PageName::forecast:
      return draw_forecast(view.forecast, view.printed, view.tank_title, state, look, out);
    case PageName::trends:
      return draw_trends(view.trends, view.tank_title, state, look, out);
    case PageName::log:
      return draw_log(view.log, state, look, out);
    case PageName::hand_over:
      return draw_hand_over(view.hand_over, view.sign, view.printed, state, look, out);
    case PageName::bath_types:
      return draw_bath_types(view.bath_types, state, look, out);
    case PageName::people:
      return draw_people(view, state, look, out);
    case PageName::settings:
      return draw_settings(view, state, look, out);
  }
}

}  // namespace

void draw_desk(const DeskView& view, PanelState& state, const Look& look, Intents& out) {
  keys(view, state, out);
  const ImVec2 all = ImGui::GetIO().DisplaySize;
  ImGui::SetNextWindowPos({0, 0});
  ImGui::SetNextWindowSize(all);
  ImGui::PushStyleVar(ImGuiStyleVar_WindowPadding, {0, 0});
  ImGui::PushStyleVar(ImGuiStyleVar_ItemSpacing, {0, 0});
  ImGui::Begin("desk", nullptr, fixed);
  std::optional<Part> lost;
  const auto panel = [&](const char* name, ImVec2 size, std::optional<Part> part, const auto& draw) {
    ImGui::PushStyleVar(ImGuiStyleVar_WindowPadding, {look.px(12), look.px(8)});
    ImGui::PushStyleColor(ImGuiCol_Border, colour(look.palette.rule));
    ImGui::BeginChild(name, size, true);
    ImGui::PopStyleColor();
    ImGui::PushStyleVar(ImGuiStyleVar_ItemSpacing, {look.px(8), look.px(4)});
    if (state.go_to_part && state.part == part) ImGui::SetKeyboardFocusHere();
    draw();
    if (part && focus_lost(state)) lost = part;
    ImGui::PopStyleVar();
    ImGui::EndChild();
    ImGui::PopStyleVar();
  };
  if (view.first_start) {
    panel("first", all, {}, [&] {
      if (ImGui::IsWindowAppearing()) ImGui::SetKeyboardFocusHere();
      draw_first_start(view, state, look, out);
    });
  } else {
    ImDrawList& ground = *ImGui::GetWindowDrawList();
    ground.AddRectFilled({0, 0}, {all.x, look.px(pages_high)}, packed(look.palette.page));
    ground.AddRectFilled({0, all.y - look.px(status)}, all, packed(look.palette.page));
    draw_pages(view, state, look, out);
    const bool narrow = is_cramped(look), with_chemistry = view.page == PageName::shift && !view.printed.open;
    const float foot = narrow ? cramped_strip : strip, top = look.px(pages_high),
                body = all.y - top - look.px(foot + status), left = look.px(sides(look).line),
                right = with_chemistry ? look.px(sides(look).chemistry) : 0;
    ImGui::SetCursorPos({0, top});
    panel("line", {left, body}, Part::line, [&] { draw_line(view.line, look, out); });
    ImGui::SameLine(0, 0);
    panel("page", {all.x - left - right, body}, Part::page, [&] {
      draw_page(view, state, look, out);
      if (with_chemistry && narrow) draw_chemistry(view.chemistry, view.source, state, look, out);
    });
    if (with_chemistry && !narrow) {
      ImGui::SameLine(0, 0);
      panel("chemistry", {right, body}, Part::chemistry,
            [&] { draw_chemistry(view.chemistry, view.source, state, look, out); });
    }
    panel("shift", {all.x, look.px(foot)}, {}, [&] { draw_shift(view.shift, look, out); });
    ImGui::SetCursorPosX(look.px(12));
    const std::string words = view.status.log + "     " + view.status.renderer + "     " + view.status.doing;
    ImGui::PushFont(look.fonts.caption);
    if (!view.fault.empty())
      status_line(view.fault, look.palette.stop);
    else if (!view.status.said.empty())
      status_line(view.status.said, look.palette.accent);
    else
      status_line(words, look.palette.quiet);
    ImGui::PopFont();
  }
  state.go_to_part = lost.has_value();
  state.part = lost.value_or(state.part);
  ImGui::PopStyleVar(2);
  draw_key_list(state, look);
  ImGui::End();
}

}  // namespace bathwright::desktop
