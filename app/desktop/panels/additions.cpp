#include "figures.hpp"
#include "panels.hpp"

namespace bathwright::desktop {
namespace {

void draw_amounts(const AdditionsView& view, const Look& look, Intents& out) {
  if (!ImGui::BeginTable("amounts", 3, ImGuiTableFlags_SizingStretchProp)) return;
  for (const auto& [name, weight] : {std::pair{"chemical", 1.6F}, {"amount", 2.4F}, {"cost", 0.8F}})
    ImGui::TableSetupColumn(name, 0, weight);
  for (std::size_t i = 0; i < view.additions.size(); ++i) {
    const AdditionRow& row = view.additions[i];
    ImGui::TableNextRow();
    ImGui::TableNextColumn();
    ImGui::AlignTextToFramePadding();
    ImGui::TextUnformatted(row.chemical.c_str());
    ImGui::TableNextColumn();
    ImGui::PushID(static_cast<int>(i));
    double amount = row.amount;
    const double least = 0;
    ImGui::SetNextItemWidth(look.px(84));
    bool changed = ImGui::InputDouble("##typed", &amount, 0, 0, row.largest < 10 ? "%.3f" : "%.2f");
    note_place(look, "amount " + row.chemical);
    ImGui::SameLine();
    ImGui::TextUnformatted(row.unit.c_str());
    ImGui::SameLine(look.px(148));  // beside the longest unit, "imp gal"
    ImGui::SetNextItemWidth(-1);
    if (ImGui::SliderScalar("##amount", ImGuiDataType_Double, &amount, &least, &row.largest, "",
                            ImGuiSliderFlags_NoInput))  // the field beside it is for typing
      changed = true;
    note_place(look, "slider " + row.chemical);
    if (changed) out.emplace_back(DragAmount{static_cast<int>(i), std::max(0.0, amount)});
    ImGui::PopID();
    ImGui::TableNextColumn();
    ImGui::AlignTextToFramePadding();
    right_aligned(row.cost);
  }
  ImGui::EndTable();
}

void draw_step(const StepRow& step, int index, const Look& look) {
  ImGui::PushID(index);
  bold(look, step.number + "  " + step.what);
  ImGui::Indent(look.px(20));
  for (const std::string& why : step.stops) standing(look, static_cast<int>(charts::State::stop), why);
  if (!step.how.empty()) said(look, look.palette.ink, step.how);
  if (!step.then.empty()) said(look, look.palette.predicted, "then " + step.then);
  for (const std::string& what : step.watch) standing(look, static_cast<int>(charts::State::act), what);
  if (step.stops.empty())
    quiet(look, std::to_string(step.checks) + " checks passed" + (step.wait.empty() ? "" : "; " + step.wait));
  ImGui::Unindent(look.px(20));
  ImGui::PopID();
}

/// Something of the shelf that the plan does not have.
void draw_add(const AdditionsView& view, PanelState& state, const Look& look, Intents& out) {
  if (view.shelf.empty()) return;
  const auto chosen = std::min(static_cast<std::size_t>(state.add), view.shelf.size() - 1);
  ImGui::SetNextItemWidth(look.px(240));
  const bool open =
      ImGui::BeginCombo("##shelf", view.shelf[chosen].second.c_str(), ImGuiComboFlags_HeightLarge);
  note_place(look, "shelf");
  if (open) {
    note_window(look, "shelf list");
    for (std::size_t i = 0; i < view.shelf.size(); ++i) {
      if (ImGui::Selectable(view.shelf[i].second.c_str(), i == chosen)) state.add = static_cast<int>(i);
      note_place(look, "shelf " + view.shelf[i].first);
    }
    ImGui::EndCombo();
  }
  ImGui::SameLine();
  if (button(look, "Add it to the list")) out.emplace_back(AddChemical{view.shelf[chosen].first});
}

}  // namespace

void draw_additions(const AdditionsView& view, PanelState& state, const Look& look, Intents& out) {
  heading(look, "Additions");
  if (view.plans.empty() && view.refused.empty()) {
    quiet(look, view.working ? "planning ..." : "Type the readings above; the additions follow.");
    return;
  }
  for (std::size_t i = 0; i < view.plans.size(); ++i) {
    if (ImGui::RadioButton(view.plans[i].c_str(), static_cast<int>(i) == view.plan && !view.edited))
      out.emplace_back(ChoosePlan{static_cast<int>(i)});
    note_place(look, "plan " + std::to_string(i + 1));
  }
  // Always a line, so that nothing moves under the pointer that drags.
  ImGui::AlignTextToFramePadding();
  said(look, view.edited ? look.palette.act : look.palette.quiet,
       view.edited ? "amounts changed by hand" : "amounts as planned");
  ImGui::SameLine(look.px(200));
  if (button(look, "Back to the plan", view.edited)) out.emplace_back(BackToPlan{});
  draw_amounts(view, look, out);
  draw_add(view, state, look, out);
  copies(look, "the additions", [&] { return figures_of(view); });
  if (!view.chance.empty()) quiet(look, view.chance);
  for (const std::string& unmet : view.unmet) standing(look, static_cast<int>(charts::State::act), unmet);
  for (const std::string& conflict : view.conflicts)
    standing(look, static_cast<int>(charts::State::act), conflict);
  for (const std::string& refused : view.refused) {
    standing(look, static_cast<int>(charts::State::stop), refused);
    note_place(look, "refused");
  }
  for (std::size_t i = 0; i < view.steps.size(); ++i) draw_step(view.steps[i], static_cast<int>(i), look);
  if (!view.cautions.empty() && ImGui::TreeNodeEx("Handling cautions", ImGuiTreeNodeFlags_DefaultOpen)) {
    for (const std::string& caution : view.cautions) said(look, look.palette.ink, caution);
    ImGui::TreePop();
  }
}

}  // namespace bathwright::desktop
