#include <imgui.h>
// after imgui.h, which it needs
#include <imgui_stdlib.h>

#include "panels.hpp"

namespace bathwright::desktop {

void draw_slip(const SlipView& view, const SignView& sign, const PrintedView& printed, PanelState& state,
               const Look& look, Intents& out) {
  heading(look, "Slip " + std::to_string(view.number) + " is open");
  quiet(look, view.issued);
  standing(look, static_cast<int>(view.approved_by_second ? charts::State::in_window : charts::State::act),
           view.approved);
  draw_show_printed(printed, look, out);
  // The focus was on the button that issued it, which is gone.
  if (std::exchange(state.slip, view.number) != view.number && ImGui::GetIO().NavVisible)
    ImGui::SetKeyboardFocusHere();
  draw_signer(sign, state.signer, look);
  const Names names = names_of(sign, state.signer);
  const bool may = !sign.busy && (sign.people.empty() || !names.pin.empty());
  if (!view.approved_by_second) {
    if (button(look, "I have read it and stand for it", may)) out.emplace_back(ApproveSlip{names});
  }
  for (const SlipView::Row& step : view.steps) {
    ImGui::PushID(step.step);
    bool done = !step.done.empty();
    ImGui::BeginDisabled(done || !may);
    if (ImGui::Checkbox("##done", &done) && may && step.done.empty())
      out.emplace_back(StepDone{step.step, names});
    ImGui::EndDisabled();
    note_place(look, "step " + std::to_string(step.step));
    ImGui::SameLine();
    bold(look, step.what);
    ImGui::Indent(look.px(32));
    if (step.done.empty()) {
      if (!step.how.empty()) said(look, look.palette.ink, step.how);
      if (!step.wait.empty()) quiet(look, step.wait);
    } else {
      said(look, look.palette.accent, "in the tank: " + step.done);
    }
    ImGui::Unindent(look.px(32));
    ImGui::PopID();
  }
  if (main_button(look, "Close the slip: carried out", may && view.all_done))
    out.emplace_back(CloseSlip{false, "", names});
  ImGui::SameLine(0, look.px(12));
  ImGui::SetNextItemWidth(look.px(200));
  ImGui::InputTextWithHint("##reason", "why the rest is not added", &state.reason);
  ImGui::SameLine();
  const bool may_cancel = may && !state.reason.empty();
  if (button(look, "Cancel the rest", may_cancel)) {
    out.emplace_back(CloseSlip{true, state.reason, names});
    state.reason.clear();
  }
  if (sign.busy) quiet(look, "signing ...");
  if (!sign.fault.empty()) standing(look, static_cast<int>(charts::State::stop), sign.fault);
  if (!sign.said.empty()) said(look, look.palette.accent, sign.said);
}

}  // namespace bathwright::desktop
