// Reads a reaction as the tables of constants write it: "3 H3BO3 = B3O3(OH)4^- + H^+ + 2 H2O".
#pragma once

#include <bathwright/base/result.hpp>
#include <string>
#include <string_view>
#include <vector>

namespace bathwright::speciation {

struct Term {
  double coefficient = 1;
  std::string name;  ///< as written: "Ni^2+", "NiSO4.7H2O(s)", "CO2(g)"
};

struct Reaction {
  std::vector<Term> left, right;
};

/// Parses "a A + b B = c C + d D": terms joined by " + ", an optional leading number followed by a space.
/// Fails with `where` on a missing or doubled "=", an empty side or term, a coefficient that is not positive.
Result<Reaction> parse_reaction(std::string_view text, std::string_view where);

}  // namespace bathwright::speciation
