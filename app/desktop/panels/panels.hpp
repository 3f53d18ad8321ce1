// The panels of the shift's page. Each is a function: what to show and a little state of its own in, what the
// person asks for out.
#pragma once

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

struct PanelState {
  Typing typing;
  std::string pin;
  int signer = 0;
};

void draw_line(const LineView& view, const Look& look, Intents& out);
void draw_readings(const ReadingsView& view, PanelState& state, const Look& look, Intents& out);
void draw_state(const StateView& view, const Look& look);
void draw_additions(const AdditionsView& view, const Look& look, Intents& out);
void draw_sign(const SignView& view, const AdditionsView& additions, PanelState& state, const Look& look,
               Intents& out);
void draw_chemistry(const ChemistryView& view, const Look& look);
void draw_shift(const ShiftView& view, const Look& look);

/// The whole page, laid out in the window.
void draw_desk(const DeskView& view, PanelState& state, const Look& look, Intents& out);

}  // namespace bathwright::desktop
