// The bath types at hand, and who may run: two steps and a tick let one in, so that no single click does.
#include "panels.hpp"

namespace bathwright::desktop {
namespace {

void draw_facts(const std::vector<std::pair<std::string, std::string>>& facts, const Look& look) {
  for (const auto& [name, value] : facts) {
    quiet(look, name);
    ImGui::SameLine(look.px(110));
    said(look, look.palette.ink, value);
  }
}

void draw_examined(const ExaminedView& view, PanelState& state, const Look& look, Intents& out) {
  heading(look, "May it run?");
  draw_facts(view.facts, look);
  for (const std::string& fault : view.faults) standing(look, static_cast<int>(charts::State::stop), fault);
  if (view.faults.empty()) {
    said(look, look.palette.ink, view.what_it_means);
    bool agreed = state.agreed_plugin == view.sha256;
    if (ImGui::Checkbox("I would let its author work on this computer", &agreed))
      state.agreed_plugin = agreed ? view.sha256 : "";
    note_place(look, "agree");
    if (button(look, "Allow it", agreed)) {
      out.emplace_back(AllowPlugin{view.sha256});
      state.agreed_plugin.clear();
    }
    ImGui::SameLine();
  }
  if (button(look, "Leave it")) out.emplace_back(ExaminePlugin{});
}

void draw_withdrawing(const BathTypeRow& row, PanelState& state, const Look& look, Intents& out) {
  heading(look, "Withdraw trust?");
  draw_facts({{"bath type", row.id}, {"file", row.file}, {"SHA-256", row.sha256}}, look);
  said(
      look, look.palette.ink,
      "It runs no more: its tanks cannot be opened any more. One that is open keeps it until the program ends.");
  if (button(look, "Withdraw trust")) {
    out.emplace_back(WithdrawPlugin{row.sha256});
    state.withdrawn_plugin.clear();
  }
  ImGui::SameLine();
  if (button(look, "Keep it")) state.withdrawn_plugin.clear();
}

void draw_rows(const BathTypesView& view, PanelState& state, const Look& look, Intents& out) {
  if (!ImGui::BeginTable("types", 5, ImGuiTableFlags_SizingStretchProp | ImGuiTableFlags_BordersInnerH))
    return;
  for (const auto& [name, weight] :
       {std::pair{"bath type", 1.6F}, {"version", 0.6F}, {"state", 1.0F}, {"file", 2.2F}, {"why", 2.6F}})
    ImGui::TableSetupColumn(name, 0, weight);
  ImGui::TableHeadersRow();
  for (const BathTypeRow& row : view.rows) {
    ImGui::PushID(row.file.c_str());
    ImGui::PushID(row.id.c_str());
    ImGui::TableNextRow();
    ImGui::TableNextColumn();
    ImGui::TextUnformatted(row.id.c_str());
    ImGui::TableNextColumn();
    ImGui::TextUnformatted(row.version.c_str());
    ImGui::TableNextColumn();
    standing(look, static_cast<int>(row.mark), row.state);
    ImGui::TableNextColumn();
    ImGui::TextUnformatted(row.file.substr(row.file.rfind('/') + 1).c_str());
    if (ImGui::IsItemHovered()) ImGui::SetTooltip("%s\n%s", row.file.c_str(), row.sha256.c_str());
    ImGui::TableNextColumn();
    if (!row.why.empty()) said(look, look.palette.stop, row.why);
    if (row.may_be_allowed && ImGui::SmallButton("Look at it")) out.emplace_back(ExaminePlugin{row.file});
    if (row.may_be_allowed) note_place(look, "look at " + row.id);
    if (row.may_be_withdrawn && ImGui::SmallButton("Withdraw trust ...")) state.withdrawn_plugin = row.sha256;
    if (row.may_be_withdrawn) note_place(look, "withdraw " + row.id);
    ImGui::PopID();
    ImGui::PopID();
  }
  ImGui::EndTable();
}

}  // namespace

void draw_bath_types(const BathTypesView& view, PanelState& state, const Look& look, Intents& out) {
  title(look, "Bath types");
  quiet(
      look,
      "One file each. A compiled one that did not come with the program runs only once it is allowed, by the hash of "
      "its file.");
  if (view.working) quiet(look, "looking ...");
  if (view.examined) draw_examined(*view.examined, state, look, out);
  for (const BathTypeRow& row : view.rows)
    if (row.may_be_withdrawn && row.sha256 == state.withdrawn_plugin) {
      draw_withdrawing(row, state, look, out);
      break;
    }
  draw_rows(view, state, look, out);
}

}  // namespace bathwright::desktop
