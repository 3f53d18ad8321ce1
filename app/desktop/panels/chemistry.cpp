#include <imgui.h>
// after imgui.h, which it needs
#include <imgui_stdlib.h>

#include "figures.hpp"
#include "panels.hpp"

namespace bathwright::desktop {
namespace {

/// Of the tank after the additions.
void then(const std::string& figure, const Look& look) {
  ImGui::PushStyleColor(ImGuiCol_Text, colour(look.palette.predicted));
  right_aligned(figure);
  ImGui::PopStyleColor();
}

void draw_figures(const ChemistryView& view, const Look& look) {
  if (view.figures.empty() || !ImGui::BeginTable("figures", 3, ImGuiTableFlags_SizingStretchProp)) return;
  for (const auto& [name, weight] : {std::pair{"", 1.2F}, {"now", 1.1F}, {"then", 0.6F}})
    ImGui::TableSetupColumn(name, 0, weight);
  for (const FigureRow& row : view.figures) {
    ImGui::TableNextRow();
    ImGui::TableNextColumn();
    ImGui::TextUnformatted(row.name.c_str());
    ImGui::TableNextColumn();
    right_aligned(row.now, look.fonts.bold);
    ImGui::TableNextColumn();
    then(row.then, look);
  }
  ImGui::EndTable();
}

void draw_ions(const ChemistryView& view, const Look& look, Intents& out) {
  const int columns = view.path.empty() ? 3 : 4;  // nothing is to be added: there is no "then"
  if (!ImGui::BeginTable("ions", columns, ImGuiTableFlags_SizingStretchProp)) return;
  for (const auto& [name, weight] :
       {std::pair{"ion", 1.2F}, {"mol/kg", 1.15F}, {"activity", 1.05F}, {"then", 1.05F}})
    if (std::string_view(name) != "then" || columns == 4) ImGui::TableSetupColumn(name, 0, weight);
  ImGui::PushFont(look.fonts.caption);
  ImGui::TableHeadersRow();
  for (const IonRow& ion : view.ions) {
    ImGui::TableNextRow();
    ImGui::TableNextColumn();
    if (ImGui::Selectable(ion.name.c_str(), false)) out.emplace_back(AskSource{ion.id});
    if (ImGui::IsItemHovered()) ImGui::SetTooltip("where its constants come from");
    ImGui::TableNextColumn();
    const float width = ImGui::GetContentRegionAvail().x / look.scale,
                height = ImGui::GetTextLineHeight() / look.scale;
    const ImVec2 at = ImGui::GetCursorScreenPos();
    DrawListCanvas canvas(*ImGui::GetWindowDrawList(), look.fonts, at, look.scale);
    charts::Colour faint = look.palette.accent;
    faint.alpha = 50;
    canvas.fill({0, 1, width * ion.share, height - 2}, faint);
    right_aligned(ion.molality);
    ImGui::TableNextColumn();
    right_aligned(ion.activity);
    if (ImGui::IsItemHovered()) ImGui::SetTooltip("activity coefficient %s", ion.gamma.c_str());
    if (columns == 4) ImGui::TableNextColumn(), then(ion.then, look);
  }
  ImGui::PopFont();
  ImGui::EndTable();
}

void draw_solids(const ChemistryView& view, const Look& look, Intents& out) {
  if (view.solids.empty() || !ImGui::BeginTable("solids", 3, ImGuiTableFlags_SizingStretchProp)) return;
  ImGui::TableSetupColumn("solid", 0, 1.4F);
  ImGui::TableSetupColumn(view.working_at.c_str(), 0, 1);
  ImGui::TableSetupColumn(view.idle_at.c_str(), 0, 1);
  ImGui::PushFont(look.fonts.caption);
  ImGui::TableHeadersRow();
  const auto room = [&](const std::string& words, double share, std::optional<double> share_then) {
    ImGui::TableNextColumn();
    const float width = ImGui::GetContentRegionAvail().x / look.scale;
    DrawListCanvas canvas = drawing_room(look, width, 8);
    draw_headroom(canvas, {0, 1, width, 6}, share, share_then, look.palette);
    right_aligned(words);
  };
  for (const SolidRow& solid : view.solids) {
    ImGui::TableNextRow();
    ImGui::TableNextColumn();
    standing(look, static_cast<int>(solid.forms ? charts::State::stop : charts::State::in_window),
             solid.name);
    if (ImGui::IsItemClicked()) out.emplace_back(AskSource{solid.id});
    room(solid.working, solid.working_share, solid.working_then);
    room(solid.idle, solid.idle_share, solid.idle_then);
  }
  ImGui::PopFont();
  ImGui::EndTable();
}

}  // namespace

void draw_chemistry(const ChemistryView& view, const SourceView& source, PanelState& state, const Look& look,
                    Intents& out) {
  heading(look, "The chemistry of it");
  if (view.ions.empty()) quiet(look, "It stands here once the tank's state can be worked out.");
  if (view.ions.empty()) return;
  draw_figures(view, look);
  heading(look, "Free ions");
  draw_ions(view, look, out);
  if (!view.solids.empty()) {
    heading(look, "Room before it crystallises");
    draw_solids(view, look, out);
  }
  copies(look, "the chemistry", [&] { return figures_of(view); });
  if (!view.path.empty()) {
    heading(look, "Along the additions");
    for (const charts::Chart& chart : view.path) {
      const float width = ImGui::GetContentRegionAvail().x / look.scale;
      draw_plot(chart, width, 190, look);
    }
    ImGui::SetNextItemWidth(look.px(150));
    ImGui::InputTextWithHint("##file", "path.pdf, .svg or .png", &state.file);
    note_place(look, "path file");
    ImGui::SameLine();
    if (button(look, "Save the charts", !state.file.empty()))
      out.emplace_back(SaveCharts{Charts::path, state.file});
    copies(look, "the path", [&] { return figures_of(view.path); });
  }
  if (!view.doubts.empty()) {
    heading(look, "Doubts");
    for (const std::string& doubt : view.doubts) quiet(look, doubt);
  }
  if (!source.text.empty()) {
    heading(look, "Where " + source.species + " comes from");
    for (const std::string& line : source.text) quiet(look, line);
  }
}

}  // namespace bathwright::desktop
