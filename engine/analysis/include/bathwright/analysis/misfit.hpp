// How well readings and book fit together, and what would explain it where they do not.
#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace bathwright::analysis {

/// How far one thing stands from what everything else says of it, in standard uncertainties of that
/// difference: w = b' S^-1 d / sqrt(b' S^-1 b), d the readings less the prediction, S their covariance, b
/// what a shift of this one thing does to the readings. Normal with mean 0 and variance 1 where nothing is
/// wrong.
struct Residual {
  std::string what;
  std::optional<std::int64_t> entry;  ///< of what the log has; nothing: a reading of today
  double studentised = 0;
};

/// What kind of thing may be wrong.
enum class Mistake : std::uint8_t {
  sample_size,  ///< twice or half of what was written down
  reading,      ///< any other error of a level found
  other_share,  ///< the free stated for the total, or the other way round
  swapped,      ///< two burette readings
  volume,       ///< level, sample or a dump: all levels alike
  not_made,     ///< an addition logged but not in the tank
  made_twice,
  other_amount,   ///< of an addition
  other_hydrate,  ///< in the bag
  not_logged      ///< an addition in the tank but not in the log
};
[[nodiscard]] std::string_view name(Mistake mistake);

/// One thing that may be wrong, and how much better readings and book fit together without it.
struct Explanation {
  Mistake mistake = Mistake::reading;
  std::string culprit;  ///< what is looked at again: "Ni^2+", "volume", "entry 5"
  std::string words;    ///< "the sample of Cl^- was half of what was written down (5 mL for 10 mL)"
  std::string try_this;
  std::optional<std::int64_t> entry;  ///< of the log
  double chi_square_drop = 0;         ///< how much of chi-square it takes away
  double log_evidence =
      0;  ///< ln of its likelihood over that of "nothing is wrong", what size it has paid for
};

struct Misfit {
  double chi_square = 0;
  int degrees_of_freedom = 0;       ///< 0: each reading is needed, there is nothing to test
  double probability = 1;           ///< of a chi-square at least as large where nothing is wrong
  bool alarm = false;               ///< readings and book do not fit together
  bool one_is_clear = false;        ///< the first explanation is clearly better than its rivals and than none
  std::vector<Residual> residuals;  ///< of every reading, then of every term of the book
  std::vector<Explanation> explanations;  ///< the best first; none without an alarm
};

}  // namespace bathwright::analysis
