#include "panels.hpp"

namespace bathwright::desktop {
namespace {

/// The shift as a line, its entries as dots where they were logged.
void draw_time_line(const ShiftView& view, const Look& look, Intents& out) {
  const float width = ImGui::GetContentRegionAvail().x / look.scale;
  constexpr float height = 22;
  const ImVec2 origin = ImGui::GetCursorScreenPos();
  DrawListCanvas canvas = drawing_room(look, width, height);
  const double left = 6, room = width - 12, middle = height / 2.0;
  canvas.fill({left, middle - 1, room, 2}, look.palette.rule);
  canvas.fill({left, middle - 1, room * view.elapsed, 2}, look.palette.accent);
  const charts::Point now[] = {{left + room * view.elapsed, 3}, {left + room * view.elapsed, height - 3}};
  canvas.polyline(now, {look.palette.accent, 2, false});
  const LogRow* under = nullptr;
  for (const LogRow& row : view.entries) {
    if (row.place < 0 || row.place > 1) continue;
    const double x = left + room * row.place;
    constexpr double radius = 4.5;
    canvas.circle({x, middle}, radius, look.palette.accent, row.kind != "note");
    const ImVec2 mouse = ImGui::GetIO().MousePos;
    const double away = (mouse.x - origin.x) / look.scale - x;
    if (ImGui::IsItemHovered() && away * away < 2.5 * radius * radius) under = &row;
  }
  if (!under) return;
  ImGui::SetTooltip("entry %s, %s\n%s, %s, by %s\n%s", under->seq.c_str(), under->at.c_str(),
                    under->kind.c_str(), under->tank.c_str(), under->by.c_str(), under->words.c_str());
  if (ImGui::IsMouseClicked(0)) {
    out.emplace_back(ShowEntry{under->number});
    out.emplace_back(GoTo{PageName::log});
  }
}

}  // namespace

void draw_shift(const ShiftView& view, const Look& look, Intents& out) {
  bold(look, view.shift);
  ImGui::SameLine();
  ImGui::PushFont(look.fonts.caption);
  ImGui::PushStyleColor(ImGuiCol_Text, colour(look.palette.quiet));
  ImGui::TextUnformatted(view.clock.c_str());
  ImGui::PopStyleColor();
  for (const std::string& open : view.open) {
    ImGui::SameLine(0, look.px(16));
    standing(look, static_cast<int>(charts::State::act), open);
  }
  // As many as the line has room for.
  std::string due = view.due.empty() ? "" : "due: ";
  std::size_t named = 0;
  const auto more = [&] { return " and " + std::to_string(view.due.size() - named) + " more"; };
  ImGui::SameLine(0, look.px(16));
  const float room = ImGui::GetContentRegionAvail().x - ImGui::CalcTextSize(more().c_str()).x;
  for (; named < view.due.size(); ++named) {
    const std::string longer = due + (named > 0 ? ", " : "") + view.due[named];
    if (ImGui::CalcTextSize(longer.c_str()).x > room) break;
    due = longer;
  }
  if (named == 0 && !due.empty())
    due += std::to_string(view.due.size()) + " analyses";
  else if (named < view.due.size())
    due += more();
  if (!due.empty()) {
    ImGui::PushStyleColor(ImGuiCol_Text, colour(look.palette.ink));
    ImGui::TextUnformatted(due.c_str());
    ImGui::PopStyleColor();
    if (ImGui::IsItemHovered() && named < view.due.size()) {
      std::string all;
      for (const std::string& one : view.due) all += one + "\n";
      ImGui::SetTooltip("%s", all.c_str());
    }
  }
  if (due.empty()) ImGui::NewLine();
  ImGui::PopFont();
  constexpr float time_line = 22;
  if (view.elapsed >= 0 && ImGui::GetContentRegionAvail().y >= look.px(time_line))
    draw_time_line(view, look, out);
}

}  // namespace bathwright::desktop
