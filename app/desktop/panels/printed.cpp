// A sheet as it is on paper, and its way to the printer.
#include <algorithm>
#include <utility>

#include "../window/textures.hpp"
#include "panels.hpp"

namespace bathwright::desktop {

namespace {

/// Sheets of which only the file is there: a slip that was lost is printed again.
void draw_earlier(const PrintedView& view, const Look& look, Intents& out) {
  bool first = true;
  for (const std::string& file : view.files) {
    if (file == view.file) continue;
    if (std::exchange(first, false)) heading(look, "Printed before");
    ImGui::PushID(file.c_str());
    if (button(look, "Print again", !view.printing)) out.emplace_back(PrintSheet{file});
    note_place(look, "print " + file);
    ImGui::PopID();
    ImGui::SameLine();
    ImGui::TextUnformatted(file.c_str());
  }
}

}  // namespace

void draw_show_printed(const PrintedView& view, const Look& look, Intents& out) {
  if (view.files.empty()) return;
  if (button(look, view.file.empty() ? "Sheets printed before" : "Show the printed sheet"))
    out.emplace_back(ShowPrinted{});
  if (ImGui::IsItemHovered()) ImGui::SetTooltip("%s", view.folder.c_str());
}

void draw_printed(const PrintedView& view, const Look& look, Intents& out) {
  title(look, "To print");
  quiet(look, view.folder);
  if (!view.file.empty()) {
    if (main_button(look, "Print", !view.printing)) out.emplace_back(PrintSheet{view.file});
    ImGui::SameLine();
    quiet(look, view.file + ", with " + view.command);
    ImGui::SameLine(0, look.px(24));
  }
  if (button(look, "Back")) out.emplace_back(ClosePrinted{});
  if (view.printing) quiet(look, "printing ...");
  if (!view.fault.empty()) standing(look, static_cast<int>(charts::State::stop), view.fault);
  if (!view.said.empty()) said(look, look.palette.accent, view.said);
  if (!view.file.empty() && view.sheets.empty() && view.fault.empty()) quiet(look, "drawing ...");
  ImGui::BeginChild("sheets", {0, 0}, false);
  for (std::size_t i = 0; i < view.sheets.size(); ++i) {
    const auto& sheet = view.sheets[i];
    const float width =
                    std::min(ImGui::GetContentRegionAvail().x - look.px(4), static_cast<float>(sheet->width)),
                height = width * static_cast<float>(sheet->height) / static_cast<float>(sheet->width);
    const ImVec2 at = ImGui::GetCursorScreenPos();
    if (look.textures)
      ImGui::Image(look.textures->of(sheet), {width, height});
    else
      ImGui::Dummy({width, height});
    note_place(look, "sheet " + std::to_string(i + 1));
    ImGui::GetWindowDrawList()->AddRect(at, {at.x + width, at.y + height}, packed(look.palette.rule));
    ImGui::Dummy({0, look.px(8)});
  }
  draw_earlier(view, look, out);
  ImGui::EndChild();
}

}  // namespace bathwright::desktop
