// What happened to one tank, as its log tells it: values only. Reading them from a log is log_history.hpp's
// work. Read next: learn.hpp.
#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <vector>

namespace bathwright::learning {

/// When and where in the log. Hours since the start of the history; entry 0: none.
struct Moment {
  double at_h = 0;
  std::int64_t entry = 0;
};

/// One level as it was found, g/L of the quantity; one standard uncertainty, 0: not stated.
struct Level {
  std::string quantity;
  double g_per_L = 0, u_g_per_L = 0;
};

struct Analysed {
  Moment when;
  std::vector<Level> levels;       ///< found, not carried over from the book
  std::optional<double> volume_L;  ///< as the level was read; nothing: at the mark
};

struct Added {
  Moment when;
  std::string stock;  ///< id of a shelf item of the tank
  double kg = 0;
};

/// Units of one of the bath type's uses since the last such entry (since the start).
struct Worked {
  Moment when;
  std::string use;
  double units = 0;
};

/// Surface that went through the tank since the last such entry (since the start).
struct Treated {
  Moment when;
  double area_m2 = 0;
};

/// Top-up water by its meter.
struct Watered {
  Moment when;
  double litres = 0;
};

/// Thrown away at once.
struct Dumped {
  Moment when;
  double litres = 0;
};

/// Each list in the order of time. A list that is empty was not logged: work, area and water then go as the
/// policy says.
struct History {
  int first_weekday = 0;  ///< of the day in which hour 0 lies; Monday is 0
  double first_hour = 0;  ///< of that day, 0 to 24
  std::vector<Analysed> analyses;
  std::vector<Added> added;
  std::vector<Worked> worked;
  std::vector<Treated> treated;
  std::vector<Watered> watered;
  std::vector<Dumped> dumped;
};

}  // namespace bathwright::learning
