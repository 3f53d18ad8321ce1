// What a person asks for with the mouse or the keys. Panels hand these out; the model decides.
#pragma once

#include <string>
#include <variant>

namespace bathwright::desktop {

struct OpenTank {
  int tank;
};
enum class Field { volume, temperature, pH, method, sample, titrant, burette, value };
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
struct ChoosePlan {
  int plan;
};
struct DragAmount {
  int addition;
  double amount;
};
struct BackToPlan {};
struct LogAnalysis {};
struct IssueSlip {
  std::string by, pin;
};
struct LogStepDone {
  int step;
};

using Intent = std::variant<OpenTank, TypeReading, ChooseMethod, UndoTyping, RedoTyping, ChoosePlan,
                            DragAmount, BackToPlan, LogAnalysis, IssueSlip, LogStepDone>;

}  // namespace bathwright::desktop
