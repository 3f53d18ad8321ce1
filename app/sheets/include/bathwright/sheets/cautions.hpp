// Cautions on a page: what they all defer to is said once.
#pragma once

#include <bathwright/sheets/page.hpp>

namespace bathwright::sheets {

/// Stands at the head of every page with cautions.
inline constexpr std::string_view deferral =
    "The supplier's safety data sheet, local codes and licensed practice decide; this page does not replace "
    "them.";

/// Each without its own words of deferral.
[[nodiscard]] Section cautions(const std::vector<std::string>& all);

}  // namespace bathwright::sheets
