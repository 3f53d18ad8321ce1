// What the panels show: values already worded and formatted, made anew when the model changes. A panel
// computes no chemistry, opens no file and takes no lock.
#pragma once

#include <bathwright/charts/chart.hpp>
#include <bathwright/charts/signs.hpp>
#include <bathwright/sheets/picture.hpp>
#include <memory>
#include <optional>
#include <string>
#include <vector>

#include "intent.hpp"

namespace bathwright::desktop {

struct TankOnLine {
  std::string name;  ///< "N-07"
  std::string kind;  ///< "Watts nickel"
  charts::VesselSign vessel;
  charts::State state = charts::State::in_window;
  std::string word;  ///< "in window", "add this shift", "stop: ..."; "not analysed"
};

/// A tank file that cannot be read as it stands.
struct UnreadTank {
  std::string file, why;  ///< "n-07.toml"; every problem with its line and its mend
};

struct LineView {
  std::string shop, folder;
  std::vector<UnreadTank> unread;
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
  std::string value_unit;  ///< of a bare `value`
  std::string result;      ///< "70.7 ± 0.46 g/L"; empty until it can be worked out
  std::string fault;       ///< what is wrong with this row and how to mend it
};

/// What a bare number means, for the heads of the fields.
struct HeadWords {
  std::string volume, temperature;
};

struct ReadingsView {
  HeadWords units;
  std::string sampled;                  ///< "2026-03-02 05:40"; empty: nothing typed yet
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
  bool checked = true;  ///< else the steps are still those of other amounts
  std::vector<AdditionRow> additions;
  std::vector<StepRow> steps;
  std::vector<std::pair<std::string, std::string>> shelf;  ///< id and name of what may be added besides
  std::vector<std::string> refused, unmet, conflicts, cautions;
  std::string chance, verdict;  ///< "ready: a second person approves" or why not
  bool ready = false, working = false;
};

/// A slip that is out: what of it is in the tank.
struct SlipView {
  std::int64_t number = 0;  ///< 0: none is open
  std::string issued, approved;
  struct Row {
    int step = 0;
    std::string what, how, wait, done;  ///< `done`: "entry 12, 05:52"; empty: not yet
  };
  std::vector<Row> steps;
  bool all_done = false, approved_by_second = false;
};

struct SignView {
  std::string by;           ///< who works, where the log has no people
  std::string log;          ///< where it is logged
  std::string fault, said;  ///< what came of the last signature
  std::vector<std::string> people;
  bool can_log = false, busy = false, analysis_logged = false;
};

/// A figure of the tank as it is, and at the end of the planned additions; `then` is empty where there are
/// none.
struct FigureRow {
  std::string name, now, then;
};

struct IonRow {
  std::string id;                                     ///< "Ni^2+", to ask for its sources
  std::string name, molality, activity, then, gamma;  ///< `then`: the activity after the additions
  double share = 0;                                   ///< of the largest, 0 to 1
};

struct SolidRow {
  std::string id, name, working, idle;  ///< "62 kg", "-9 kg"
  /// Of saturation, 1 at the limit; after the additions nothing where there are none.
  double working_share = 0, idle_share = 0;
  std::optional<double> working_then, idle_then;
  bool forms = false;
};

struct ChemistryView {
  std::string working_at, idle_at;  ///< "55 °C"
  std::vector<FigureRow> figures;   ///< pH, ionic strength, water activity, density
  std::vector<IonRow> ions;
  std::vector<SolidRow> solids;
  std::vector<charts::Chart> path;  ///< along the planned additions
  std::vector<std::string> doubts;
};

struct LogRow {
  std::int64_t number = 0;
  std::string seq, at, kind, tank, by, words;
  double place = -1;  ///< in the shift, 0 to 1; -1: not of this shift
};

struct ShiftView {
  std::string shift, clock;
  double elapsed = -1;          ///< of the shift, 0 to 1; below 0: no shifts are set
  std::vector<LogRow> entries;  ///< of the shift, newest first
  std::vector<std::string> due, open;
};

struct LogView {
  std::vector<LogRow> rows;  ///< newest first
  bool more_below = false;   ///< the log has older ones that are not shown
  std::string filter, file;
  std::int64_t shown = 0;
  std::vector<std::string> shown_text;
  std::vector<std::string> faults;
};

struct HandOverView {
  std::vector<std::string> text;
  bool shifts_set = false;
};

struct LeverView {
  std::string name, words;  ///< "drag-out", "1.2 times"
  double value = 0, low = 0, high = 1;
};

struct LimitRow {
  std::string name, when, span, why;
  charts::State state = charts::State::in_window;
};

struct ForecastView {
  std::vector<std::string> policies;
  int policy = 0;
  std::string from, empty;
  std::vector<LeverView> levers;
  std::vector<LimitRow> limits;
  std::vector<std::pair<std::string, std::string>> figures;  ///< cost, waste, water a day; bleed that holds
  std::vector<charts::Chart> charts;
  std::vector<std::string> notes, faults;
  bool working = false, may_print = false;
  double progress = 0;
};

struct TrendsView {
  std::string empty;
  std::vector<charts::Chart> charts;
  std::vector<std::string> findings, notes;
};

struct BathTypeRow {
  std::string id, version, state, file, sha256, why;
  charts::State mark = charts::State::in_window;
  bool may_be_allowed = false, may_be_withdrawn = false;  ///< by the person at the window
};

/// A plugin that was looked at, to be allowed or left.
struct ExaminedView {
  std::string sha256, what_it_means;
  std::vector<std::pair<std::string, std::string>> facts;
  std::vector<std::string> faults;  ///< any: it cannot be allowed
};

struct BathTypesView {
  std::vector<BathTypeRow> rows;
  std::optional<ExaminedView> examined;
  bool working = false;
};

struct PersonRow {
  std::string name, role, signs;
  bool active = true;
};

struct SettingsView {
  std::string folder, log, print_command;
  struct Choice {
    std::string what;
    std::vector<std::string> all;
    int chosen = 0;
  };
  std::vector<Choice> units;
  float scale = 1;
  bool dark = false, letter = false;
};

/// What was printed: the last sheet as it is on paper, and the files of all.
struct PrintedView {
  std::string folder, file;        ///< of the sheet that is seen; empty: none since the window was opened
  std::vector<std::string> files;  ///< of the folder, newest first
  bool open = false, printing = false;
  std::string command, said, fault;
  std::vector<std::shared_ptr<const sheets::Picture>> sheets;
};

struct SourceView {
  std::string species;
  std::vector<std::string> text;
};

struct StatusView {
  std::string renderer, log, doing, said;  ///< `said`: what came of the last thing asked
};

struct DeskView {
  PageName page = PageName::shift;
  bool first_start = false;  ///< no shop is open
  std::string fault;         ///< of what was asked last
  LineView line;
  std::string tank_title, tank_sub;
  ReadingsView readings;
  StateView state;
  AdditionsView additions;
  SlipView slip;
  SignView sign;
  ChemistryView chemistry;
  ShiftView shift;
  LogView log;
  HandOverView hand_over;
  ForecastView forecast;
  TrendsView trends;
  BathTypesView bath_types;
  std::vector<PersonRow> people;
  SettingsView settings;
  PrintedView printed;
  SourceView source;
  StatusView status;
};

}  // namespace bathwright::desktop
