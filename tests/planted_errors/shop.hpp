// A simulated shop: a tank that works shift after shift, its log and its readings, with errors planted in
// them.
#pragma once

#include <bathwright/analysis/analysis.hpp>
#include <bathwright/bath/tank.hpp>
#include <string>
#include <vector>

namespace planted_errors {

/// What a shop is and how its lab titrates.
struct Shop {
  std::string tank_file;  ///< under baths/
  struct Bench {
    std::string quantity, method;
    double sample_mL, titrant_mol_per_L;
  };
  std::vector<Bench> titrations;
  std::string work;  ///< use of the bath type; empty: none is logged
  double Ah = 0;     ///< a shift
  double pH = 0;
};
[[nodiscard]] const std::vector<Shop>& shops();

enum class Error {
  none,
  twice_the_sample,  ///< of one titration, or half of it
  swapped_burettes,
  not_logged,  ///< an addition in the tank that the log has not
  not_made,    ///< an addition of the log that is not in the tank
  made_twice,
  other_hydrate,
  wrong_level
};
[[nodiscard]] std::string_view name(Error error);

/// An error of a size: an addition that raises what it brings by so much of it, a level wrong by so much.
struct Planted {
  Error error = Error::none;
  double size = 0;
};

struct Count {
  Planted planted;
  int shifts = 0;  ///< in which it could be planted
  int flagged = 0, named_first = 0, clear = 0, clear_and_wrong = 0;
};

/// Every shift is carried out as it should be, which the next starts from, and once more for each of
/// `planted`, with the same errors of measurement; the same seed gives the same counts.
[[nodiscard]] std::vector<Count> simulate(const Shop& shop, const std::vector<Planted>& planted, int shifts,
                                          unsigned seed);

}  // namespace planted_errors
