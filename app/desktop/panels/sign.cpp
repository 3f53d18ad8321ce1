#include <imgui.h>
// after imgui.h, which it needs
#include <imgui_stdlib.h>

#include <algorithm>

#include "panels.hpp"

namespace bathwright::desktop {

Names names_of(const SignView& view, const SignerState& state) {
  Names names;
  const auto person = [&](int i) {
    return i >= 0 && i < static_cast<int>(view.people.size()) ? view.people[static_cast<std::size_t>(i)]
                                                              : std::string();
  };
  names.by = view.people.empty() ? state.name : person(state.by);
  names.pin = state.pin;
  names.second = person(state.second);
  names.second_pin = state.second_pin;
  return names;
}

void draw_signer(const SignView& view, SignerState& state, const Look& look) {
  const float name_wide = look.px(130), pin_wide = look.px(80);
  const auto choose = [&](const char* id, int& chosen, bool may_be_none) {
    const std::string shown = chosen >= 0 && chosen < static_cast<int>(view.people.size())
                                  ? view.people[static_cast<std::size_t>(chosen)]
                                  : "nobody";
    ImGui::SetNextItemWidth(name_wide);
    const bool open = ImGui::BeginCombo(id, shown.c_str());
    note_place(look, id);
    if (!open) return;
    if (may_be_none && ImGui::Selectable("nobody", chosen < 0)) chosen = -1;
    for (int i = 0; i < static_cast<int>(view.people.size()); ++i)
      if (ImGui::Selectable(view.people[static_cast<std::size_t>(i)].c_str(), i == chosen)) chosen = i;
    ImGui::EndCombo();
  };
  const auto pin = [&](const char* id, std::string& text) {
    ImGui::SameLine();
    ImGui::SetNextItemWidth(pin_wide);
    ImGui::InputTextWithHint(id, "PIN", &text, ImGuiInputTextFlags_Password);
    note_place(look, id);
  };
  ImGui::AlignTextToFramePadding();
  ImGui::TextUnformatted("signs");
  ImGui::SameLine();
  if (view.people.empty()) {
    ImGui::SetNextItemWidth(name_wide);
    ImGui::InputTextWithHint("##name", view.by.c_str(), &state.name);
    note_place(look, "signer name");
    ImGui::SameLine();
    quiet(look, "the log has no people yet: nothing is signed with a PIN");
    return;
  }
  choose("##by", state.by, false);
  pin("##pin", state.pin);
  ImGui::SameLine(0, look.px(12));
  ImGui::TextUnformatted("and");
  ImGui::SameLine();
  choose("##second", state.second, true);
  if (state.second >= 0) pin("##second pin", state.second_pin);
  if (!state.pin.empty() || !state.second_pin.empty()) {
    ImGui::SameLine();
    if (ImGui::SmallButton("forget the PINs")) state.pin.clear(), state.second_pin.clear();
  }
}

void draw_sign(const SignView& view, const AdditionsView& additions, PanelState& state, const Look& look,
               Intents& out) {
  heading(look, "Sign and log");
  if (!additions.verdict.empty())
    standing(look, static_cast<int>(additions.ready ? charts::State::in_window : charts::State::stop),
             additions.verdict);
  draw_signer(view, state.signer, look);
  const Names names = names_of(view, state.signer);
  const bool may = !view.busy && (view.people.empty() || !names.pin.empty());
  if (main_button(look, "Issue the slip", may && view.can_log && additions.ready))
    out.emplace_back(IssueSlip{names});
  ImGui::SameLine(0, look.px(12));
  const bool may_log = may && view.can_log && !view.analysis_logged;
  if (button(look, "Log the analysis alone", may_log)) out.emplace_back(LogAnalysis{names});
  if (view.can_log && !view.people.empty() && names.pin.empty()) {
    ImGui::SameLine();
    quiet(look, "a PIN is needed");
  }
  if (view.busy) quiet(look, "signing ...");
  if (!view.fault.empty()) standing(look, static_cast<int>(charts::State::stop), view.fault);
  if (!view.said.empty()) said(look, look.palette.accent, view.said);
}

}  // namespace bathwright::desktop
