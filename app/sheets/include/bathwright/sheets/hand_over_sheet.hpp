// The hand-over on a page: what the shift that comes must know first.
#pragma once

#include <bathwright/hand_over/hand_over.hpp>
#include <bathwright/sheets/page.hpp>

namespace bathwright::sheets {

/// `by` hands over; the name is printed beside the line for the signature of who takes over.
[[nodiscard]] Page hand_over_page(const hand_over::HandOver& told, const shifts::Calendar& calendar,
                                  const std::string& by);

}  // namespace bathwright::sheets
