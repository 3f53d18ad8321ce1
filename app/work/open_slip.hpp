// A slip that is open: its steps, which of them are in the tank, who stands for it; and the entries that
// carry it on.
#pragma once

#include "shift_log.hpp"

namespace bathwright::work {

struct SlipStep {
  int number = 0;
  bool takes_out = false;  ///< `amount` L of bath to the waste treatment
  std::string chemical, name, unit, how;
  double amount = 0, wait_h = 0;
  int portion = 1, portions = 1;
  std::optional<std::int64_t> done_as;  ///< the addition or dump that carried it out
  std::string done_at;                  ///< UTC, as the log has it
};

struct OpenSlip {
  std::int64_t seq = 0;
  std::string tank, by, at;
  std::string approved_by;  ///< empty: nobody yet
  std::vector<SlipStep> steps;
  std::vector<std::string> cautions;
};

/// The oldest open slip of a tank; nothing where there is none. Fails where the log cannot be read.
Result<std::optional<OpenSlip>> open_slip(const logbook::Logbook& log, const std::string& tank);

/// A step as carried out now. Fails (bad_input) on a step the slip does not have or that is in the tank
/// already.
Result<logbook::NewEntry> step_done(const OpenSlip& slip, int step);

/// A second person stands for it.
[[nodiscard]] logbook::NewEntry approval(const OpenSlip& slip);

/// It is carried out, or cancelled for a reason.
[[nodiscard]] logbook::NewEntry closing(const OpenSlip& slip, bool cancelled, const std::string& reason);

}  // namespace bathwright::work
