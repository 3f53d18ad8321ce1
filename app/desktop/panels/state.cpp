#include "figures.hpp"
#include "panels.hpp"

namespace bathwright::desktop {

void draw_state(const StateView& view, const Look& look) {
  heading(look, "State");
  if (!view.from.empty()) quiet(look, view.from);
  if (!ImGui::BeginTable("levels", 5, ImGuiTableFlags_SizingStretchProp)) return;
  for (const auto& [name, weight] :
       {std::pair{"component", 1.9F}, {"strip", 2.3F}, {"found", 0.8F}, {"then", 1.1F}, {"word", 1.9F}})
    ImGui::TableSetupColumn(name, 0, weight);
  for (const ComponentRow& row : view.rows) {
    ImGui::TableNextRow();
    ImGui::TableNextColumn();
    said(look, look.palette.ink, row.name);
    ImGui::TableNextColumn();
    const float width = ImGui::GetContentRegionAvail().x / look.scale,
                height = ImGui::GetTextLineHeight() / look.scale + 2;
    DrawListCanvas canvas = drawing_room(look, width, height);
    draw_strip(canvas, {6, 0, width - 12, height}, row.strip, look.palette);
    ImGui::TableNextColumn();
    right_aligned(row.found);
    ImGui::TableNextColumn();
    if (!row.predicted.empty()) {
      ImGui::PushStyleColor(ImGuiCol_Text, colour(look.palette.predicted));
      ImGui::TextUnformatted(("then " + row.predicted).c_str());
      ImGui::PopStyleColor();
    }
    ImGui::TableNextColumn();
    standing(look, static_cast<int>(row.state), row.word);
    quiet(look, row.unit + (row.unit.empty() ? "aim " : ", aim ") + row.aim);
  }
  ImGui::EndTable();
  if (!view.rows.empty()) copies(look, "the state", [&] { return figures_of(view); });
}

}  // namespace bathwright::desktop
