#include <imgui.h>
// after imgui.h, which it needs
#include <imgui_stdlib.h>

#include <tuple>

#include "panels.hpp"

namespace bathwright::desktop {
namespace {

class ReadingsPanel {
 public:
  ReadingsPanel(const ReadingsView& view, PanelState& state, const Look& look, Intents& out)
      : view_(view), typing_(state.typing), look_(look), out_(out) {}

  void draw() {
    sample();
    if (ImGui::BeginTable("burettes", 6, ImGuiTableFlags_SizingStretchProp | ImGuiTableFlags_BordersInnerH)) {
      for (const auto& [name, weight] : {std::pair{"what", 0.8F},
                                         {"method", 1.9F},
                                         {"sample, mL", 1.1F},
                                         {"titrant, mol/L", 1.3F},
                                         {"burette, mL", 1.1F},
                                         {"is", 1.6F}})
        ImGui::TableSetupColumn(name, 0, weight);
      ImGui::PushFont(look_.fonts.caption);
      ImGui::TableHeadersRow();
      ImGui::PopFont();
      for (std::size_t i = 0; i < view_.rows.size(); ++i) row(static_cast<int>(i), view_.rows[i]);
      ImGui::EndTable();
    }
    for (const ReadingRow& reading : view_.rows)
      if (!reading.fault.empty())
        standing(look_, static_cast<int>(charts::State::stop), reading.quantity + ": " + reading.fault);
    for (const std::string& fault : view_.faults) said(look_, look_.palette.stop, fault);
    for (const std::string& suspect : view_.suspects) {
      standing(look_, static_cast<int>(charts::State::stop), suspect);
    }
    if (view_.working) quiet(look_, "working out ...");
  }

 private:
  /// A field whose text is the model's until it is typed in, and goes to the model with every letter.
  void field(const char* id, int row, Field which, const std::string& text, float width,
             const char* hint = "") {
    const bool mine = typing_.row == row && typing_.field == which;
    std::string shown = mine ? typing_.text : text;
    ImGui::SetNextItemWidth(width);
    ImGui::PushID(row);
    const bool changed = ImGui::InputTextWithHint(id, hint, &shown, ImGuiInputTextFlags_AutoSelectAll);
    if (ImGui::IsItemActive()) {
      typing_ = {row, which, shown};
    } else if (mine) {
      typing_ = {};
    }
    note_place(look_, std::string(id + 2) +
                          (row < 0 ? "" : " " + view_.rows[static_cast<std::size_t>(row)].quantity));
    ImGui::PopID();
    if (changed) out_.emplace_back(TypeReading{row, which, shown});
  }

  void sample() {
    const float wide = look_.px(72);
    for (const auto& [label, id, which, text] :
         {std::tuple{"volume, " + view_.units.volume, "##volume", Field::volume, &view_.volume},
          std::tuple{view_.units.temperature, "##temperature", Field::temperature, &view_.temperature},
          std::tuple{std::string("pH"), "##pH", Field::pH, &view_.pH}}) {
      ImGui::AlignTextToFramePadding();
      ImGui::TextUnformatted(label.c_str());
      ImGui::SameLine();
      field(id, -1, which, *text, which == Field::volume ? look_.px(110) : wide,
            which == Field::volume ? "or 3 cm low" : "");
      ImGui::SameLine(0, look_.px(16));
    }
    ImGui::NewLine();
    if (button(look_, "Undo", view_.can_undo)) out_.emplace_back(UndoTyping{});
    ImGui::SameLine();
    if (button(look_, "Redo", view_.can_redo)) out_.emplace_back(RedoTyping{});
    ImGui::SameLine(0, look_.px(16));
    if (button(look_, "New sample")) out_.emplace_back(NewSample{});
    if (ImGui::IsItemHovered()) ImGui::SetTooltip("puts these readings away; Undo brings them back");
    // Always a line, so that nothing moves under the pointer with the first letter.
    ImGui::SameLine(0, look_.px(16));
    quiet(look_, view_.sampled.empty() ? "nothing typed yet" : "sample of " + view_.sampled);
  }

  void row(int index, const ReadingRow& reading) {
    ImGui::TableNextRow();
    ImGui::TableNextColumn();
    ImGui::AlignTextToFramePadding();
    ImGui::TextUnformatted(reading.quantity.c_str());
    ImGui::TableNextColumn();
    ImGui::PushID(index);
    ImGui::SetNextItemWidth(-1);
    if (ImGui::BeginCombo("##method",
                          reading.methods.empty()
                              ? ""
                              : reading.methods[static_cast<std::size_t>(reading.method)].c_str())) {
      for (std::size_t m = 0; m < reading.methods.size(); ++m)
        if (ImGui::Selectable(reading.methods[m].c_str(), static_cast<int>(m) == reading.method))
          out_.emplace_back(ChooseMethod{index, static_cast<int>(m)});
      ImGui::EndCombo();
    } else if (ImGui::IsItemHovered() && !reading.methods.empty()) {
      ImGui::SetTooltip("%s", reading.methods[static_cast<std::size_t>(reading.method)].c_str());
    }
    ImGui::PopID();
    if (reading.is_value) {
      ImGui::TableNextColumn();
      field("##value", index, Field::value, reading.value, -1);
      ImGui::TableNextColumn();
      quiet(look_, reading.value_unit);
      ImGui::TableNextColumn();
    } else {
      ImGui::TableNextColumn();
      field("##sample", index, Field::sample, reading.sample, -1);
      ImGui::TableNextColumn();
      field("##titrant", index, Field::titrant, reading.titrant, -1);
      ImGui::TableNextColumn();
      field("##burette", index, Field::burette, reading.burette, -1);
    }
    ImGui::TableNextColumn();
    ImGui::AlignTextToFramePadding();
    if (!reading.fault.empty())
      standing(look_, static_cast<int>(charts::State::stop), "see below");
    else if (reading.result.empty())
      quiet(look_, "not read yet");
    else
      said(look_, look_.palette.accent, reading.result);
  }

  const ReadingsView& view_;
  Typing& typing_;
  const Look& look_;
  Intents& out_;
};

}  // namespace

void draw_readings(const ReadingsView& view, PanelState& state, const Look& look, Intents& out) {
  heading(look, "Readings");
  ReadingsPanel(view, state, look, out).draw();
}

}  // namespace bathwright::desktop
