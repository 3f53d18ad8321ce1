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

#include "kept_shop.hpp"
#include "path.hpp"
#include "work/tank_state.hpp"

namespace bathwright::desktop {

struct CheckedList {
  OwnList list;
  std::optional<dosing::AdditionSheet> sheet;  ///< nothing where it could not be checked
  Problems problems;                           ///< why not
};

struct Question {
  work::Session session;
  std::filesystem::path tank_file;
  std::filesystem::path readings_file;  ///< empty: nothing typed
  std::optional<OwnList> own;           ///< nothing: the plan as it is
  std::string plan;                     ///< kind of the chosen one; the first where there is none of it
  std::int64_t log_state = 0;  ///< the last entry of the log: what follows from it is worked out anew
};

struct Worked {
  std::filesystem::path tank_file, readings_file;
  std::string readings;  ///< what stood in that file
  std::shared_ptr<const work::Shop> shop;
  std::optional<work::Analysed> analysed;  ///< where readings were typed
  std::optional<sheets::StateRead> read;
  std::optional<bath::TankView> now;
  std::optional<dosing::AdditionSheet> sheet;  ///< the planner's
  std::optional<CheckedList> own;              ///< the person's list: an older one while it is dragged
  Path path;                                   ///< along what is asked for, checked or not yet
  Problems problems;                           ///< what kept the rest from being worked out
  /// Whether what is checked is this list; of no list, the plan as it is.
  [[nodiscard]] bool is_checked(const std::optional<OwnList>& list) const {
    return list ? own && own->list == *list : !own;
  }
};

/// Where the plan of this kind stands; 0 where none is.
[[nodiscard]] std::size_t index_of_plan(const dosing::AdditionSheet& sheet, const std::string& kind);

/// Remembers what does not change from question to question: the opened shop and the plans for one set of
/// readings.
class TankWork {
 public:
  /// Of plans gives the plans first, then with how sure they are.
  void answer(const Question& question, const std::stop_token& stop, const std::function<void(Worked)>& give);

 private:
  [[nodiscard]] Worked worked_out(const Question& question,
                                  const std::shared_ptr<const work::Shop>& shop) const;
  [[nodiscard]] static CheckedList checked(const OwnList& list, const Worked& worked);

  KeptShop kept_;
  std::string planned_for_;  ///< the readings the last plans were made for
  std::optional<Worked> planned_;
  bool sampled_ = false;
};

}  // namespace bathwright::desktop
