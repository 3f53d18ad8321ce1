// The panels. Each is a function: what to show and a little state of its own in, what the person asks for
// out.
#pragma once

#include <optional>
#include <utility>

#include "intent.hpp"
#include "look.hpp"
#include "view.hpp"

namespace bathwright::desktop {

using Intents = std::vector<Intent>;

/// What is being typed, until the field is left.
struct Typing {
  int row = -2;
  Field field = Field::volume;
  std::string text;
};

/// Who works, as typed; PINs stay until they are cleared or the window is closed.
struct SignerState {
  int by = 0, second = -1;
  std::string name, pin, second_pin;
};

/// What F6 leads through.
enum class Part : std::uint8_t { pages, line, page, chemistry };

inline constexpr std::pair<PageName, const char*> pages[] = {
    {PageName::shift, "The shift"}, {PageName::forecast, "Forecast"},   {PageName::trends, "Trends"},
    {PageName::log, "Log"},         {PageName::hand_over, "Hand over"}, {PageName::bath_types, "Bath types"},
    {PageName::people, "People"},   {PageName::settings, "Settings"}};

struct PanelState {
  Typing typing;
  SignerState signer;
  std::string filter, folder, reason, new_name, new_pin, zone, file;
  int new_role = 0, pattern = 0, add = 0;
  std::int64_t slip = 0;  ///< `slip`: the one that was open when last drawn
  Part part = Part::pages;
  bool go_to_part = false, key_list = false;
  unsigned not_drawn = 0;  ///< ImGui's id of what has the focus and was not drawn in the last picture
  std::optional<PageName> awaited;  ///< asked for with the keys: the focus goes there once it is drawn
  std::string agreed_plugin, withdrawn_plugin;  ///< SHA-256 of what is being decided
  std::string leaving;                          ///< who is to be retired
  std::string in_sight;                         ///< the page and the tank that were drawn last
};

/// Those who sign, as chosen in the sign panel.
[[nodiscard]] Names names_of(const SignView& view, const SignerState& state);
/// Fields for who signs and the PINs; nothing where the log has no people but the name.
void draw_signer(const SignView& view, SignerState& state, const Look& look);

/// A chart with the values under the pointer, or at the line that Shift and the arrows move; Enter copies its
/// data.
void draw_plot(const charts::Chart& chart, float width_at_100, float height_at_100, const Look& look);

// The shift's page.
void draw_line(const LineView& view, const Look& look, Intents& out);
void draw_readings(const ReadingsView& view, PanelState& state, const Look& look, Intents& out);
void draw_state(const StateView& view, const Look& look);
void draw_additions(const AdditionsView& view, PanelState& state, const Look& look, Intents& out);
void draw_slip(const SlipView& view, const SignView& sign, const PrintedView& printed, PanelState& state,
               const Look& look, Intents& out);
void draw_sign(const SignView& view, const AdditionsView& additions, PanelState& state, const Look& look,
               Intents& out);
void draw_chemistry(const ChemistryView& view, const SourceView& source, PanelState& state, const Look& look,
                    Intents& out);
void draw_shift(const ShiftView& view, const Look& look, Intents& out);

// The other pages.
void draw_forecast(const ForecastView& view, const PrintedView& printed, const std::string& tank,
                   PanelState& state, const Look& look, Intents& out);
void draw_trends(const TrendsView& view, const std::string& tank, PanelState& state, const Look& look,
                 Intents& out);
void draw_log(const LogView& view, PanelState& state, const Look& look, Intents& out);
void draw_hand_over(const HandOverView& view, const SignView& sign, const PrintedView& printed,
                    PanelState& state, const Look& look, Intents& out);
void draw_bath_types(const BathTypesView& view, PanelState& state, const Look& look, Intents& out);
void draw_people(const DeskView& view, PanelState& state, const Look& look, Intents& out);
void draw_settings(const DeskView& view, PanelState& state, const Look& look, Intents& out);
void draw_first_start(const DeskView& view, PanelState& state, const Look& look, Intents& out);

// Without a mouse.
void keys(const DeskView& view, PanelState& state, Intents& out);
void draw_key_list(PanelState& state, const Look& look);
/// The thing of this part that had the focus is not drawn any more.
[[nodiscard]] bool focus_lost(PanelState& state);
/// Around the last item, where the focus would not be seen.
void ring(const Look& look);
/// A button where there is a printed sheet; the sheet itself in the place of a page.
void draw_show_printed(const PrintedView& view, const Look& look, Intents& out);
void draw_printed(const PrintedView& view, const Look& look, Intents& out);

/// The whole window.
void draw_desk(const DeskView& view, PanelState& state, const Look& look, Intents& out);

}  // namespace bathwright::desktop
