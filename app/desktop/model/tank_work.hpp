// What is worked out for the open tank, away from the picture: readings to state, state to plans, an edited
// plan to its checks. Everything here is a value or constant, so that it may pass between threads.
#pragma once

#include <bathwright/analysis/analysis.hpp>
#include <bathwright/dosing/check_plan.hpp>
#include <bathwright/sheets/tank_sheet.hpp>
#include <filesystem>
#include <memory>
#include <stop_token>

#include "shop.hpp"
#include "tank_state.hpp"

namespace bathwright::desktop {

/// One point along the planned additions.
struct PathPoint {
  double kg = 0;  ///< of everything added so far
  bath::TankView view;
};

struct Question {
  command::Context context;
  std::filesystem::path tank_file;
  std::filesystem::path readings_file;  ///< empty: nothing typed
  /// Amounts of the plan as a person changed them, in the order of its additions; empty: as planned.
  std::vector<std::pair<std::string, double>> edited;  ///< stock id, kg
  int plan = 0;
};

struct Worked {
  std::shared_ptr<const command::Shop> shop;
  std::optional<command::Analysed> analysed;  ///< where readings were typed
  std::optional<sheets::StateRead> read;
  std::optional<bath::TankView> now;
  std::optional<dosing::AdditionSheet> sheet;  ///< the planner's
  std::optional<dosing::AdditionSheet> own;    ///< the edited plan, checked
  std::vector<PathPoint> path;                 ///< along the plan that is shown
  Problems problems;                           ///< what kept the rest from being worked out
};

/// Remembers what does not change from question to question: the opened shop and the plans for one set of
/// readings.
class TankWork {
 public:
  Worked answer(const Question& question, const std::stop_token& stop);

 private:
  Result<std::shared_ptr<const command::Shop>> opened(const Question& question);

  std::filesystem::path shop_file_;
  std::filesystem::file_time_type shop_time_{};
  std::shared_ptr<const command::Shop> shop_;
  std::string planned_for_;  ///< the readings the last plans were made for
  std::optional<Worked> planned_;
};

}  // namespace bathwright::desktop
