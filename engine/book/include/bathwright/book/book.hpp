// A tank carried from its last analysis through what was done to it since: amounts, and where each doubt
// about them comes from. Read next: entries.hpp, how log entries are read; from_log.hpp, the book of a tank
// out of its log. Not for the future of a tank: forecast.
#pragma once

#include <bathwright/analysis/carried.hpp>
#include <bathwright/bath/chemistry.hpp>
#include <variant>

namespace bathwright::book {

/// The tank as an analysis left it.
struct Start {
  bath::TankState state;
  std::vector<double> covariance;       ///< of the component amounts, mol^2, row after row
  std::map<std::string, double> found;  ///< g/L that it found itself, by quantity
  std::string what;                     ///< "analysis of entry 12"
  std::optional<std::int64_t> entry;
};

struct Addition {
  std::string chemical;  ///< of the tank's shelf
  double kg = 0;
};
struct Dumped {
  double L = 0;
};
struct StoodAt {
  double L = 0;
};
struct Worked {
  std::string use;  ///< of the bath type
  double units = 0;
};

/// One thing done to a tank, or seen of it.
struct Movement {
  std::variant<Addition, Dumped, StoodAt, Worked> of;
  std::string what;                   ///< "14 kg boric-acid"
  std::optional<std::int64_t> entry;  ///< of the log
};

/// The tank after `movements`, in this order, and `hours` of work and rest since the start.
///   additions   what the chemical brings (Chemistry::brings, with the assay on the tank's shelf)
///   dumps       a share of everything; what fills the tank up again is water
///   levels      set the water, not the amounts
///   work        the effects, deposition and anodes of the bath type's use
///   time        a use counted by the hour; drag-out; for every use that nobody logged, a doubt
/// Each leaves a term of doubt, by the rows of data/analysis/book_terms.csv. Additions, levels and work that
/// cannot be counted are named in `not_counted`.
[[nodiscard]] analysis::Carried carry(const Start& start, const std::vector<Movement>& movements,
                                      double hours, const bath::Tank& tank, const bath::Chemistry& chemistry);

}  // namespace bathwright::book
