// Where a slip stands with a second person. A tank that asks for a second signature (SecondSignature) on the
// kind slip_approved takes an addition against a slip only once somebody approved it; append refuses it
// before.
#pragma once

#include <bathwright/logbook/logbook.hpp>

namespace bathwright::logbook {

/// Who stands for a slip beside the one who wrote it: of a slip-approved that was not corrected, else its
/// witness; "" where nobody does.
[[nodiscard]] Result<std::string> approved_by(const Logbook& log, const Entry& slip);

/// Whether a tank asks for that approval.
[[nodiscard]] Result<bool> asks_approval(const Logbook& log, const std::string& tank);

}  // namespace bathwright::logbook
