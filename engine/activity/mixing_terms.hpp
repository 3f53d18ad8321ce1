// E-theta of all pairs of like-signed charges of a solution at once, fast enough for the inner loop of a
// solver.
#pragma once

#include <bathwright/activity/unsymmetrical_mixing.hpp>
#include <cstdint>
#include <span>
#include <vector>

namespace bathwright::activity {

/// J of unsymmetrical_mixing.hpp with its derivatives to t = ln x, by a table of quintics through J, dJ/dt
/// and d2J/dt2 of the series at every tenth of ln x. Within 1e-9 relative of the series; outside the table (x
/// below 3e-4 or above 3e3) the series itself.
struct LogJ {
  double value, first, second;
};
[[nodiscard]] LogJ j_of_log(double ln_x);

class MixingTerms {
 public:
  struct Pair {
    std::uint8_t i, j;  ///< positions in the list of charges, i < j
  };

  /// charges: different from each other, 0 allowed (it mixes with nothing).
  MixingTerms(std::span<const int> charges, double a_phi);

  [[nodiscard]] std::span<const Pair> pairs() const { return pairs_; }
  /// ionic_strength > 0, mol/kg -> term (one per pair).
  void evaluate(double ionic_strength, std::span<MixingTerm> term) const;

  /// The most pairs there can be.
  static constexpr std::size_t max_pairs = 128, max_products = 96;

 private:
  struct Products {
    std::uint8_t ij, ii, jj;  ///< positions in ln_factor_
    double zz;
  };
  std::vector<Pair> pairs_;
  std::vector<Products> products_;
  std::vector<double> ln_factor_;  ///< ln(6 z z' A), one for each different product z z'
};

}  // namespace bathwright::activity
