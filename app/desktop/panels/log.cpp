#include <imgui.h>
// after imgui.h, which it needs
#include <imgui_stdlib.h>

#include "figures.hpp"
#include "panels.hpp"

namespace bathwright::desktop {
namespace {

void draw_rows(const LogView& view, const Look& look, Intents& out) {
  constexpr ImGuiTableFlags flags =
      ImGuiTableFlags_ScrollY | ImGuiTableFlags_BordersInnerH | ImGuiTableFlags_SizingStretchProp;
  const float height =
      ImGui::GetContentRegionAvail().y * (view.shown_text.empty() ? 1.0F : 0.5F) - look.px(8);
  if (!ImGui::BeginTable("entries", 6, flags, {0, height})) return;
  ImGui::TableSetupScrollFreeze(0, 1);
  for (const auto& [name, weight] : {std::pair{"entry", 0.5F},
                                     {"time", 1.2F},
                                     {"kind", 0.9F},
                                     {"tank", 1.4F},
                                     {"by", 1.0F},
                                     {"what", 4.0F}})
    ImGui::TableSetupColumn(name, 0, weight);
  ImGui::TableHeadersRow();
  ImGuiListClipper clipper;
  clipper.Begin(static_cast<int>(view.rows.size()));
  while (clipper.Step())
    for (int i = clipper.DisplayStart; i < clipper.DisplayEnd; ++i) {
      const LogRow& row = view.rows[static_cast<std::size_t>(i)];
      ImGui::TableNextRow();
      ImGui::TableNextColumn();
      if (ImGui::Selectable(row.seq.c_str(), row.number == view.shown, ImGuiSelectableFlags_SpanAllColumns))
        out.emplace_back(ShowEntry{row.number});
      note_place(look, "entry " + row.seq);
      for (const std::string* text : {&row.at, &row.kind, &row.tank, &row.by, &row.words}) {
        ImGui::TableNextColumn();
        ImGui::TextUnformatted(text->c_str());
      }
    }
  ImGui::EndTable();
}

}  // namespace

void draw_log(const LogView& view, PanelState& state, const Look& look, Intents& out) {
  heading(look, "The log");
  quiet(look, view.file);
  for (const std::string& fault : view.faults) standing(look, static_cast<int>(charts::State::stop), fault);
  ImGui::SetNextItemWidth(look.px(260));
  if (ImGui::InputTextWithHint("##filter", "find in what, by or shift", &state.filter))
    out.emplace_back(FilterLog{state.filter});
  note_place(look, "filter");
  ImGui::SameLine();
  if (button(look, "Copy the rows")) ImGui::SetClipboardText(figures_of(view).c_str());
  if (view.rows.empty()) {
    quiet(look, view.filter.empty()
                    ? "Nothing is logged yet: the first analysis or slip that is signed stands here."
                    : "No entry has that text.");
    return;
  }
  if (view.more_below)
    quiet(look, "The newest " + std::to_string(view.rows.size()) + "; type to find an older one.");
  draw_rows(view, look, out);
  if (view.shown_text.empty()) return;
  heading(look, "Entry " + std::to_string(view.shown));
  ImGui::BeginChild("entry", {0, 0}, false);
  sheet(look, view.shown_text);
  ImGui::EndChild();
}

}  // namespace bathwright::desktop
