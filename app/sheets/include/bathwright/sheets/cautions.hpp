// Cautions on a page: what they all defer to is said once.
#pragma once

#include <bathwright/sheets/text.hpp>

namespace bathwright::sheets {

/// Stands at the head of every page with cautions.
inline constexpr std::string_view deferral =
    "The supplier's safety data sheet, local codes and licensed practice decide; this page does not replace "
    "them.";

/// Appends a section of them, each without its own words of deferral; nothing where there is none.
void cautions(Lines& lines, const std::vector<std::string>& all);

}  // namespace bathwright::sheets
