// What is worked out for the open tank, away from the picture: readings to state, state to plans, an edited
// plan to its checks. Everything here is a value or constant, so that it may pass between threads.
#pragma once

#include <bathwright/analysis/analysis.hpp>
#include <bathwright/dosing/check_plan.hpp>
#include <bathwright/sheets/tank_sheet.hpp>
#include <filesystem>
#include <functional>
#include <memory>
#include <stop_token>

#include "work/shop.hpp"
#include "work/tank_state.hpp"

namespace bathwright::desktop {

/// One point along the planned additions.
struct PathPoint {
  double kg = 0;  ///< of everything added so far
  bath::TankView view;
};

struct Question {
  work::Session session;
  std::filesystem::path tank_file;
  std::filesystem::path readings_file;  ///< empty: nothing typed
  /// Amounts of the plan as a person changed them, in the order of its additions; empty: as planned.
  std::vector<std::pair<std::string, double>> edited;  ///< stock id, kg
  int plan = 0;
  std::int64_t log_state = 0;  ///< the last entry of the log: what follows from it is worked out anew
};

struct Worked {
  std::filesystem::path tank_file, readings_file;
  std::shared_ptr<const work::Shop> shop;
  std::optional<work::Analysed> analysed;  ///< where readings were typed
  std::optional<sheets::StateRead> read;
  std::optional<bath::TankView> now;
  std::optional<dosing::AdditionSheet> sheet;  ///< the planner's
  std::optional<dosing::AdditionSheet> own;    ///< the edited plan, checked
  std::vector<PathPoint> path;                 ///< along the plan that is shown
  Problems problems;                           ///< what kept the rest from being worked out
};

/// On the tank's shelf, else in the catalogue; nullptr where nobody knows it.
[[nodiscard]] const matter::StockChemical* stock_of(const bath::Tank& tank, const std::string& id);

/// Remembers what does not change from question to question: the opened shop and the plans for one set of
/// readings.
class TankWork {
 public:
  /// Gives the plans first, then with how sure they are.
  void answer(const Question& question, const std::stop_token& stop, const std::function<void(Worked)>& give);

 private:
  Result<std::shared_ptr<const work::Shop>> opened(const Question& question);
  [[nodiscard]] Worked worked_out(const Question& question,
                                  const std::shared_ptr<const work::Shop>& shop) const;

  std::filesystem::path shop_file_;
  std::filesystem::file_time_type shop_time_{};
  std::shared_ptr<const work::Shop> shop_;
  std::string planned_for_;  ///< the readings the last plans were made for
  std::optional<Worked> planned_;
  bool sampled_ = false;
};

}  // namespace bathwright::desktop
