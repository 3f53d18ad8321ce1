// What a person asks for with the mouse or the keys. Panels hand these out; the model decides.
#pragma once

#include <cstdint>
#include <string>
#include <variant>
#include <vector>

namespace bathwright::desktop {

enum class PageName : std::uint8_t { shift, forecast, trends, log, hand_over, bath_types, people, settings };

struct GoTo {
  PageName page;
};
struct OpenTank {
  int tank;
};

// The readings.
enum class Field : std::uint8_t { volume, temperature, pH, method, sample, titrant, burette, value };
struct TypeReading {
  int row;  ///< -1: the whole sample
  Field field;
  std::string text;
};
struct ChooseMethod {
  int row, method;
};
struct UndoTyping {};
struct RedoTyping {};
struct NewSample {};

// The additions.
struct ChoosePlan {
  int plan;
};
struct DragAmount {
  int addition;
  double amount;
};
struct AddChemical {
  std::string chemical;  ///< id of a shelf item
};
struct BackToPlan {};

/// Who signs, and who signs second where that is asked for.
struct Names {
  std::string by, pin, second, second_pin;
};
struct LogAnalysis {
  Names names;
};
struct IssueSlip {
  Names names;
};
struct StepDone {
  int step;
  Names names;
};
struct ApproveSlip {
  Names names;
};
struct CloseSlip {
  bool cancelled;
  std::string reason;
  Names names;
};
struct HandOver {
  Names names;
};
struct SetShifts {
  std::string pattern, zone;
  Names names;
};
struct RetirePerson {
  std::string name;
  Names names;
};
struct AdmitPerson {
  std::string name, role, pin;
  Names names;
};

// The forecast.
struct ChoosePolicy {
  int policy;
};
struct MoveLever {
  int lever;
  double value;
};
struct StopSampling {};

// What may run.
struct ExaminePlugin {
  std::string file;  ///< empty: what was looked at is left
};
struct AllowPlugin {
  std::string sha256;  ///< of the plugin that was looked at
};
struct WithdrawPlugin {
  std::string sha256;
};

// Anything else.
struct FilterLog {
  std::string text;
};
struct ShowEntry {
  std::int64_t seq;
};
struct AskSource {
  std::string species;
};
enum class Charts : std::uint8_t { forecast, trends, path };
struct SaveCharts {
  Charts charts;
  std::string file;
};
struct PrintForecast {};
struct ShowPrinted {};  ///< the sheet that was printed last, and the files of those before
struct ClosePrinted {};
/// A file of what was printed, on paper.
struct PrintSheet {
  std::string file;
};
struct SetPrintCommand {
  std::string command;
};
struct SetPaper {
  bool letter;  ///< else A4
};
struct OpenFolder {
  std::string folder;
};
struct OpenDemonstration {};
struct SetLook {
  float scale;
  bool dark;
};
struct SetUnit {
  int which, chosen;  ///< in the order of the settings page
};

using Intent =
    std::variant<GoTo, OpenTank, TypeReading, ChooseMethod, UndoTyping, RedoTyping, NewSample, ChoosePlan,
                 DragAmount, AddChemical, BackToPlan, LogAnalysis, IssueSlip, StepDone, ApproveSlip,
                 CloseSlip, HandOver, SetShifts, AdmitPerson, RetirePerson, ExaminePlugin, AllowPlugin,
                 WithdrawPlugin, ChoosePolicy, MoveLever, StopSampling, FilterLog, ShowEntry, AskSource,
                 SaveCharts, PrintForecast, ShowPrinted, ClosePrinted, PrintSheet, SetPrintCommand, SetPaper,
                 OpenFolder, OpenDemonstration, SetLook, SetUnit>;

}  // namespace bathwright::desktop
