// What the log says a tank holds before today's readings, with where every doubt about it comes from. Filled
// by the book (book/book.hpp), weighed against the lab by evaluate (analysis.hpp).
#pragma once

#include <cstdint>
#include <map>
#include <optional>
#include <string>
#include <vector>

namespace bathwright::analysis {

/// Something logged, or known to go on, that leaves a doubt about the amounts: one standard uncertainty of
/// it.
struct BookTerm {
  std::string what;                   ///< "14 kg boric acid (entry 5)", "drag-out"
  std::optional<std::int64_t> entry;  ///< the log entry it stands in
  std::vector<double> component_mol;  ///< in the order of Chemistry::components
  double volume_L = 0;
};

/// An addition the log has, as it was counted.
struct LoggedAddition {
  std::string what;  ///< "14 kg boric acid"
  std::int64_t entry = 0;
  std::string chemical;  ///< stock chemical id
  double kg = 0;
  std::vector<double> component_mol;  ///< that it brought, in the order of Chemistry::components
  double volume_L = 0;                ///< by which it raised the tank
};

/// A tank as the log has it now: what the last analysis left, carried through what was logged since.
struct Carried {
  std::vector<double> component_mol;  ///< in the order of Chemistry::components
  double volume_L = 0;
  std::vector<BookTerm> terms;  ///< independent of one another
  std::vector<LoggedAddition> additions;
  std::vector<std::string> counted;          ///< each entry that was counted, in words
  std::vector<std::string> not_counted;      ///< each that could not be, and why
  std::map<std::string, double> found_last;  ///< g/L that the last analysis found itself, by quantity
};

}  // namespace bathwright::analysis
