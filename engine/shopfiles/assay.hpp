// How pure a lot is, as its label says it. Private to shopfiles.
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/matter/formula.hpp>
#include <string_view>

namespace bathwright::shopfiles {

/// kg of `substance` per kg of product, above 0 up to 1, from one of
///   "99 %", "96 % w/w", "0.99"   the share of the substance itself
///   "22.2 %w/w Ni"               the share w of an element, n atoms of which are in a formula unit:
///                                w * M(substance) / (n * M(element))
/// Fails on anything else, on an element the substance does not hold, and on more of it than the pure
/// substance holds.
Result<double> read_assay(std::string_view text, const matter::Formula& substance, std::string_view where);

}  // namespace bathwright::shopfiles
