// The hand-over on a page: what the shift that comes must know first.
#pragma once

#include <bathwright/hand_over/hand_over.hpp>
#include <bathwright/sheets/page.hpp>
#include <bathwright/sheets/shown_units.hpp>

namespace bathwright::sheets {

/// `by` hands over; the name is printed beside the line for the signature of who takes over. Levels that are
/// out of their window are in g/L where the unit needs more than their formula.
[[nodiscard]] Page hand_over_page(const hand_over::HandOver& told, const shifts::Calendar& calendar,
                                  const std::string& by, const Units& units = {});

}  // namespace bathwright::sheets
