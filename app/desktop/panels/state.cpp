#include "panels.hpp"

namespace bathwright::desktop {

void draw_state(const StateView& view, const Look& look) {
  heading(look, "State");
  if (!view.from.empty()) quiet(look, view.from);
  if (!ImGui::BeginTable("levels", 5, ImGuiTableFlags_SizingStretchProp)) return;
  for (const auto& [name, weight] :
       {std::pair{"component", 1.5F}, {"strip", 2.6F}, {"found", 0.9F}, {"aim", 0.9F}, {"word", 1.6F}})
    ImGui::TableSetupColumn(name, 0, weight);
  for (const ComponentRow& row : view.rows) {
    ImGui::TableNextRow();
    ImGui::TableNextColumn();
    ImGui::TextUnformatted(row.name.c_str());
    ImGui::TableNextColumn();
    const float width = ImGui::GetContentRegionAvail().x / look.scale,
                height = ImGui::GetTextLineHeight() / look.scale + 2;
    DrawListCanvas canvas = drawing_room(look, width, height);
    draw_strip(canvas, {6, 0, width - 12, height}, row.strip, look.palette);
    ImGui::TableNextColumn();
    right_aligned(row.found);
    ImGui::TableNextColumn();
    ImGui::PushStyleColor(ImGuiCol_Text, colour(look.palette.quiet));
    ImGui::TextUnformatted((row.unit + ", aim " + row.aim).c_str());
    ImGui::PopStyleColor();
    ImGui::TableNextColumn();
    standing(look, static_cast<int>(row.state), row.word);
  }
  ImGui::EndTable();
}

}  // namespace bathwright::desktop
