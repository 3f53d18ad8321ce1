// Pages of a few lines each: trends, hand-over, people, settings, the first start.
#include <imgui.h>
// after imgui.h, which it needs
#include <imgui_stdlib.h>

#include <algorithm>

#include "figures.hpp"
#include "panels.hpp"

namespace bathwright::desktop {
namespace {

void came_of_it(const SignView& sign, const Look& look) {
  if (sign.busy) quiet(look, "signing ...");
  if (!sign.fault.empty()) standing(look, static_cast<int>(charts::State::stop), sign.fault);
  if (!sign.said.empty()) said(look, look.palette.accent, sign.said);
}

bool choose(const char* label, const std::vector<std::string>& all, int& chosen, const Look& look) {
  ImGui::SetNextItemWidth(look.px(160));
  bool changed = false;
  if (ImGui::BeginCombo(label, all[static_cast<std::size_t>(chosen)].c_str())) {
    for (int i = 0; i < static_cast<int>(all.size()); ++i)
      if (ImGui::Selectable(all[static_cast<std::size_t>(i)].c_str(), i == chosen))
        chosen = i, changed = true;
    ImGui::EndCombo();
  }
  return changed;
}

/// Asked once more, for nothing is signed with that name again.
void draw_leaving(const DeskView& view, PanelState& state, const Look& look, Intents& out) {
  const auto person = std::ranges::find(view.people, state.leaving, &PersonRow::name);
  if (person == view.people.end() || !person->active) return;
  heading(look, "Has " + state.leaving + " left?");
  said(look, look.palette.ink,
       "The entries stay. Nothing is signed with that name any more, unless a chemist admits it again.");
  draw_signer(view.sign, state.signer, look);
  const Names names = names_of(view.sign, state.signer);
  if (button(look, "Retire", !view.sign.busy && !names.pin.empty())) {
    out.emplace_back(RetirePerson{state.leaving, names});
    state.leaving.clear();
    state.signer = {};  // the list of those who sign gets shorter
  }
  ImGui::SameLine();
  if (button(look, "Keep")) state.leaving.clear();
}

}  // namespace

void draw_trends(const TrendsView& view, const std::string& tank, PanelState& state, const Look& look,
                 Intents& out) {
  title(look, tank + ": trends");
  if (!view.empty.empty()) {
    said(look, look.palette.ink, view.empty);
    return;
  }
  const std::size_t found = view.findings.size();
  if (found == 0)
    quiet(look, "No rule finds anything.");
  else
    standing(look, static_cast<int>(charts::State::act),
             std::to_string(found) + (found == 1 ? " finding" : " findings") + ", told under the charts");
  for (const std::string& note : view.notes) quiet(look, note);
  ImGui::SetNextItemWidth(look.px(230));
  ImGui::InputTextWithHint("##file", "trends.pdf, .svg or .png", &state.file);
  ImGui::SameLine();
  if (button(look, "Save the charts", !state.file.empty() && !view.charts.empty()))
    out.emplace_back(SaveCharts{Charts::trends, state.file});
  if (!view.charts.empty()) {
    ImGui::SameLine();
    copies(look, "the charts", [&] { return figures_of(view.charts); });
  }
  constexpr float height = 220;
  const float width = ImGui::GetContentRegionAvail().x / look.scale;
  for (const charts::Chart& chart : view.charts) draw_plot(chart, width, height, look);
  if (found == 0) return;
  heading(look, "Findings");
  copies(look, "the findings", [&] { return figures_of(view); });
  for (const std::string& finding : view.findings)
    standing(look, static_cast<int>(charts::State::act), finding);
}

void draw_hand_over(const HandOverView& view, const SignView& sign, const PrintedView& printed,
                    PanelState& state, const Look& look, Intents& out) {
  title(look, "Hand over");
  if (!view.shifts_set) {
    said(look, look.palette.ink,
         "No shifts are set in this log. Settings has them; then this page tells the next shift "
         "what it must know first.");
    return;
  }
  draw_signer(sign, state.signer, look);
  const Names names = names_of(sign, state.signer);
  const bool may = !sign.busy && (sign.people.empty() || !names.pin.empty());
  if (main_button(look, "Sign and hand over", may)) out.emplace_back(HandOver{names});
  came_of_it(sign, look);
  draw_show_printed(printed, look, out);
  ImGui::Separator();
  sheet(look, view.text);
}

void draw_people(const DeskView& view, PanelState& state, const Look& look, Intents& out) {
  title(look, "People");
  if (view.people.empty())
    said(look, look.palette.ink,
         "The log has no people: everybody may write, and nothing is signed. To begin, the "
         "chemist signs up first; from then on every entry is signed with a PIN.");
  else if (ImGui::BeginTable("people", 4,
                             ImGuiTableFlags_SizingStretchProp | ImGuiTableFlags_BordersInnerH)) {
    for (const char* name : {"name", "role", "signs", ""}) ImGui::TableSetupColumn(name);
    ImGui::TableHeadersRow();
    for (const PersonRow& person : view.people) {
      ImGui::TableNextRow();
      for (const std::string* text : {&person.name, &person.role, &person.signs}) {
        ImGui::TableNextColumn();
        ImGui::TextUnformatted(text->c_str());
      }
      ImGui::TableNextColumn();
      ImGui::PushID(person.name.c_str());
      if (person.active && ImGui::SmallButton("Left the shop ...")) state.leaving = person.name;
      note_place(look, "left " + person.name);
      ImGui::PopID();
    }
    ImGui::EndTable();
  }
  draw_leaving(view, state, look, out);
  heading(look, view.people.empty() ? "Sign up" : "Admit somebody");
  ImGui::SetNextItemWidth(look.px(200));
  ImGui::InputTextWithHint("##new name", "name", &state.new_name);
  note_place(look, "new name");
  ImGui::SameLine();
  static const std::vector<std::string> roles{"chemist", "operator", "auditor"};
  choose("##role", roles, state.new_role, look);
  ImGui::SameLine();
  ImGui::SetNextItemWidth(look.px(90));
  ImGui::InputTextWithHint("##new pin", "new PIN", &state.new_pin, ImGuiInputTextFlags_Password);
  note_place(look, "new PIN");
  if (!view.people.empty() && state.leaving.empty()) draw_signer(view.sign, state.signer, look);
  const Names names = names_of(view.sign, state.signer);
  const bool may = !view.sign.busy && !state.new_name.empty() && !state.new_pin.empty() &&
                   (view.people.empty() || !names.pin.empty());
  if (main_button(look, "Admit", may)) {
    out.emplace_back(
        AdmitPerson{state.new_name, roles[static_cast<std::size_t>(state.new_role)], state.new_pin, names});
    state.new_name.clear();
    state.new_pin.clear();
  }
  came_of_it(view.sign, look);
}

void draw_settings(const DeskView& view, PanelState& state, const Look& look, Intents& out) {
  const SettingsView& settings = view.settings;
  title(look, "Settings");
  heading(look, "The shop");
  quiet(look, "tank files: " + settings.folder);
  quiet(look, "log: " + settings.log);
  ImGui::SetNextItemWidth(look.px(420));
  ImGui::InputTextWithHint("##folder", "another folder of tank files", &state.folder);
  ImGui::SameLine();
  if (button(look, "Open this folder", !state.folder.empty())) out.emplace_back(OpenFolder{state.folder});
  ImGui::SameLine();
  if (button(look, "Open the demonstration shop")) out.emplace_back(OpenDemonstration{});
  heading(look, "Units that are shown");
  for (std::size_t i = 0; i < settings.units.size(); ++i) {
    if (i % 2 == 1) ImGui::SameLine(look.px(320));
    const SettingsView::Choice& unit = settings.units[i];
    SetUnit chosen{static_cast<int>(i), unit.chosen};
    if (choose(unit.what.c_str(), unit.all, chosen.chosen, look)) out.emplace_back(chosen);
  }
  quiet(
      look,
      "Any unit may be typed. A bare number has the unit its field is headed with. What cannot be told in the "
      "chosen unit is shown in g/L. Sheets are printed in these units; the log keeps g/L, kg, L and °C.");
  heading(look, "Look");
  for (const auto& [words, scale] :
       {std::pair{"100 %", 1.0F}, {"125 %", 1.25F}, {"150 %", 1.5F}, {"200 %", 2.0F}}) {
    if (scale > 1) ImGui::SameLine();
    const float now = settings.scale > 0 ? settings.scale : look.scale;
    if (ImGui::RadioButton(words, std::abs(now - scale) < 0.01F))
      out.emplace_back(SetLook{scale, settings.dark});
  }
  bool dark = settings.dark;
  if (ImGui::Checkbox("dark page", &dark)) out.emplace_back(SetLook{settings.scale, dark});
  heading(look, "Printed sheets");
  if (ImGui::RadioButton("A4", !settings.letter)) out.emplace_back(SetPaper{false});
  ImGui::SameLine();
  if (ImGui::RadioButton("Letter", settings.letter)) out.emplace_back(SetPaper{true});
  std::string command = settings.print_command;
  ImGui::SetNextItemWidth(look.px(260));
  if (ImGui::InputTextWithHint("print command", "lp", &command)) out.emplace_back(SetPrintCommand{command});
  note_place(look, "print command");
  quiet(look, "Run as it stands, without a shell; {file} is the sheet, else it comes last.");
  heading(look, "Shifts");
  quiet(look, view.hand_over.shifts_set ? "Set: " + view.shift.shift : "None are set.");
  static const std::vector<std::string> patterns{"3x8", "2x12"};
  choose("##pattern", patterns, state.pattern, look);
  ImGui::SameLine();
  ImGui::SetNextItemWidth(look.px(200));
  ImGui::InputTextWithHint("##zone", "time zone, Europe/Berlin", &state.zone);
  note_place(look, "zone");
  draw_signer(view.sign, state.signer, look);
  const bool may = !view.sign.busy && !state.zone.empty();
  if (main_button(look, "Set the shifts", may))
    out.emplace_back(SetShifts{patterns[static_cast<std::size_t>(state.pattern)], state.zone,
                               names_of(view.sign, state.signer)});
  came_of_it(view.sign, look);
}

void draw_first_start(const DeskView& view, PanelState& state, const Look& look, Intents& out) {
  ImGui::Dummy({0, look.px(40)});
  ImGui::PushFont(look.fonts.large);
  ImGui::TextUnformatted("Bathwright");
  ImGui::PopFont();
  said(look, look.palette.ink,
       "From the readings of a tank to an addition sheet that is safe on the way; what builds up, "
       "and how much to bleed; a log that nobody can change.");
  ImGui::Dummy({0, look.px(12)});
  if (main_button(look, "Open the demonstration shop", true)) out.emplace_back(OpenDemonstration{});
  quiet(look, "An invented shop of 28 tanks with a log of its own. Nothing in it can do harm.");
  ImGui::Dummy({0, look.px(12)});
  ImGui::SetNextItemWidth(look.px(420));
  ImGui::InputTextWithHint("##folder", "the folder of your tank files", &state.folder);
  ImGui::SameLine();
  if (button(look, "Open this folder", !state.folder.empty())) out.emplace_back(OpenFolder{state.folder});
  if (!view.fault.empty()) standing(look, static_cast<int>(charts::State::stop), view.fault);
  ImGui::Dummy({0, look.px(12)});
  quiet(
      look,
      "The figures here help a trained person decide. Safety data sheets, local codes and licensed practice come "
      "first, always.");
}

}  // namespace bathwright::desktop
