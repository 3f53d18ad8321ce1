// What the panels show: values already worded and formatted, made anew when the model changes. A panel
// computes no chemistry, opens no file and takes no lock.
#pragma once

#include <bathwright/charts/chart.hpp>
#include <bathwright/charts/signs.hpp>
#include <string>
#include <vector>

namespace bathwright::desktop {

struct TankOnLine {
  std::string name;  ///< "N-07"
  std::string kind;  ///< "Watts nickel"
  charts::VesselSign vessel;
  charts::State state = charts::State::in_window;
  std::string word;  ///< "in window", "add this shift", "stop: ..."; "not analysed"
};

struct LineView {
  std::string shop;
  std::vector<TankOnLine> tanks;
  int selected = -1;
};

/// One burette, as it is typed.
struct ReadingRow {
  std::string quantity;              ///< "Ni²⁺"
  std::vector<std::string> methods;  ///< ids to choose from; the last one means "already a concentration"
  int method = 0;
  std::string sample, titrant, burette, value;  ///< as typed; `value` of a concentration
  bool is_value = false;
  std::string result;  ///< "70.7 ± 0.46 g/L"; empty until it can be worked out
  std::string fault;   ///< what is wrong with this row and how to mend it
};

struct ReadingsView {
  std::string volume, temperature, pH;  ///< as typed
  std::vector<ReadingRow> rows;
  std::vector<std::string> faults;    ///< of the whole
  std::vector<std::string> suspects;  ///< what does not fit
  bool can_undo = false, can_redo = false, working = false;
};

struct ComponentRow {
  std::string name, unit;  ///< "nickel Ni²⁺", "g/L"
  charts::StripSign strip;
  std::string found, aim, predicted;
  charts::State state = charts::State::in_window;
  std::string word;  ///< "in window", "add this shift", "above the window"
};

struct StateView {
  std::string from;  ///< where the figures come from
  std::vector<ComponentRow> rows;
};

struct AdditionRow {
  std::string chemical, unit;
  double amount = 0, largest = 1;  ///< in `unit`; `largest` ends the drag
  std::string cost;
};

struct StepRow {
  std::string number, what, how, then, wait;
  bool refused = false;
  std::vector<std::string> stops, watch;  ///< why a step stops; what to look at
  int checks = 0;
};

struct AdditionsView {
  std::vector<std::string> plans;  ///< "least cost, 391 EUR, 97 %"
  int plan = 0;
  bool edited = false;
  std::vector<AdditionRow> additions;
  std::vector<StepRow> steps;
  std::vector<std::string> refused, unmet, cautions;
  std::string chance, verdict;  ///< "ready: a second person approves" or why not
  bool ready = false, working = false;
};

struct SignView {
  std::string by, last_logged;  ///< "slip 118 is open"
  std::vector<std::string> people;
  bool can_log = false, needs_pin = false;
  std::string fault;
};

struct IonRow {
  std::string name, molality, activity, gamma;
  double share = 0;  ///< of the largest, 0 to 1
};

struct SolidRow {
  std::string name, working, idle;  ///< "62 kg", "-9 kg"
  double working_share = 0, idle_share = 0;
  bool forms = false;
};

struct ChemistryView {
  std::string working_at, idle_at;                           ///< "55 °C"
  std::vector<std::pair<std::string, std::string>> figures;  ///< pH, ionic strength, water activity, density
  std::vector<IonRow> ions;
  std::vector<SolidRow> solids;
  std::vector<charts::Chart> path;  ///< along the planned additions
  std::vector<std::string> doubts;
};

struct LogRow {
  std::string seq, at, kind, by, words;
};

struct ShiftView {
  std::string shift, clock;
  double elapsed = 0;  ///< of the shift, 0 to 1; below 0: no shifts are set
  std::vector<LogRow> entries;
  std::vector<std::string> due, open;
};

struct StatusView {
  std::string renderer, log, doing;
};

struct DeskView {
  LineView line;
  std::string tank_title, tank_sub;
  std::string empty;  ///< what to do where there is nothing yet
  ReadingsView readings;
  StateView state;
  AdditionsView additions;
  SignView sign;
  ChemistryView chemistry;
  ShiftView shift;
  StatusView status;
};

}  // namespace bathwright::desktop
