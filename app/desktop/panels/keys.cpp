// The window without a mouse: keys that lead to a page, a tank or a part of the window, and their list.
#include <imgui.h>
// after imgui.h, which it needs
#include <imgui_internal.h>

#include <algorithm>

#include "panels.hpp"

namespace bathwright::desktop {
namespace {

bool pressed(ImGuiKey key, bool again = true) { return ImGui::IsKeyPressed(ImGui::GetKeyIndex(key), again); }

/// GLFW's numbers of the keys that ImGui 1.86 has no name for.
constexpr int f1 = 290, f6 = 295;

void next_part(const DeskView& view, PanelState& state) {
  const int parts = view.page == PageName::shift ? 4 : 3;
  const int step = ImGui::GetIO().KeyShift ? parts - 1 : 1;
  const int now = std::min(static_cast<int>(state.part), parts - 1);
  state.part = static_cast<Part>((now + step) % parts);
  state.go_to_part = true;
}

}  // namespace

void keys(const DeskView& view, PanelState& state, Intents& out) {
  const ImGuiIO& io = ImGui::GetIO();
  // A field that is typed in shows it whether the mouse or a key led there.
  if (io.WantTextInput) ImGui::GetCurrentContext()->NavDisableHighlight = false;
  if (ImGui::IsKeyPressed(f1, false)) state.key_list = true;
  if (ImGui::IsKeyPressed(f6)) next_part(view, state);
  if (state.awaited == view.page) {
    state.awaited.reset();
    state.part = Part::page;
    state.go_to_part = true;
  }
  if (!io.KeyCtrl) return;
  for (int i = 0; i < static_cast<int>(std::size(pages)); ++i)
    if (ImGui::IsKeyPressed('1' + i, false)) {
      out.emplace_back(GoTo{pages[i].first});
      state.awaited = pages[i].first;
    }
  if (pressed(ImGuiKey_DownArrow)) out.emplace_back(OpenTank{view.line.selected + 1});
  if (pressed(ImGuiKey_UpArrow)) out.emplace_back(OpenTank{view.line.selected - 1});
  if (!io.WantTextInput && pressed(ImGuiKey_Z, false)) out.emplace_back(UndoTyping{});
}

bool focus_lost(PanelState& state) {
  if (!ImGui::IsWindowFocused()) return false;
  const ImGuiContext& now = *ImGui::GetCurrentContext();
  const bool seen = !now.IO.NavVisible || now.NavIdIsAlive;
  // What a click has just given the focus counts as drawn from the next picture on: lost is lost in two.
  const unsigned before = std::exchange(state.not_drawn, seen ? 0 : now.NavId);
  return state.not_drawn != 0 && state.not_drawn == before;
}

void draw_key_list(PanelState& state, const Look& look) {
  const bool stays = ImGui::IsPopupOpen("keys"), asked = std::exchange(state.key_list, false);
  if (asked && !stays) ImGui::OpenPopup("keys");
  const ImVec2 all = ImGui::GetIO().DisplaySize;
  ImGui::SetNextWindowPos({all.x / 2, all.y / 2}, ImGuiCond_Always, {0.5F, 0.5F});
  if (!ImGui::BeginPopup("keys", ImGuiWindowFlags_NoMove)) return;
  heading(look, "Without a mouse");
  if (ImGui::BeginTable("keys", 2, ImGuiTableFlags_SizingFixedFit)) {
    for (const auto& [key, what] :
         {std::pair{"Tab, Shift Tab", "next field, field before"},
          {"arrows", "next thing in that direction"},
          {"Enter", "presses it, opens it, begins to type"},
          {"Esc", "out of a list; takes back what is typed in a field"},
          {"F6, Shift F6", "next part: pages, tanks, page, chemistry"},
          {"Ctrl 1 to Ctrl 8", "the pages from left to right"},
          {"Ctrl up, Ctrl down", "the tank above, the tank below"},
          {"Ctrl Z", "takes the last reading back"},
          {"on a slider", "Space, then left and right; Enter lets a number be typed"},
          {"on a chart", "Shift and arrows move the line, Enter copies the figures"}}) {
      ImGui::TableNextRow();
      ImGui::TableNextColumn();
      bold(look, key);
      ImGui::TableNextColumn();
      ImGui::TextUnformatted(what);
    }
    ImGui::EndTable();
  }
  if (button(look, "Close") || pressed(ImGuiKey_Escape, false) || (asked && stays))
    ImGui::CloseCurrentPopup();
  ImGui::EndPopup();
}

void ring(const Look& look) {
  const ImVec2 low = ImGui::GetItemRectMin(), high = ImGui::GetItemRectMax();
  ImGui::GetWindowDrawList()->AddRect(low, high, packed(look.palette.accent), 0, 0, look.px(2));
}

}  // namespace bathwright::desktop
