#include <imgui.h>
// after imgui.h, which it needs
#include <imgui_stdlib.h>

#include "panels.hpp"

namespace bathwright::desktop {

void draw_sign(const SignView& view, const AdditionsView& additions, PanelState& state, const Look& look,
               Intents& out) {
  heading(look, "Sign and log");
  if (!additions.verdict.empty())
    standing(look, static_cast<int>(additions.ready ? charts::State::in_window : charts::State::stop),
             additions.verdict);
  if (ImGui::Button("Log the analysis") && view.can_log) out.emplace_back(LogAnalysis{});
  ImGui::SameLine(0, look.px(16));
  const auto signer = static_cast<std::size_t>(state.signer);
  if (!view.people.empty()) {
    ImGui::SetNextItemWidth(look.px(150));
    if (ImGui::BeginCombo("##signer", view.people[std::min(signer, view.people.size() - 1)].c_str())) {
      for (std::size_t i = 0; i < view.people.size(); ++i)
        if (ImGui::Selectable(view.people[i].c_str(), i == signer)) state.signer = static_cast<int>(i);
      ImGui::EndCombo();
    }
    ImGui::SameLine();
    ImGui::SetNextItemWidth(look.px(90));
    ImGui::InputTextWithHint("##pin", "PIN", &state.pin, ImGuiInputTextFlags_Password);
    ImGui::SameLine();
  }
  const bool ready = additions.ready && view.can_log && (!view.needs_pin || !state.pin.empty());
  if (main_button(look, "Sign and issue the slip", ready)) {
    out.emplace_back(IssueSlip{
        view.people.empty() ? view.by : view.people[std::min(signer, view.people.size() - 1)], state.pin});
    state.pin.clear();
  }
  if (!view.fault.empty()) said(look, look.palette.stop, view.fault);
  if (!view.last_logged.empty()) quiet(look, view.last_logged);
}

}  // namespace bathwright::desktop
