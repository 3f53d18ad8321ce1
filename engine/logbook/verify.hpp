// The walk along the hash chain.
#pragma once

#include "bathwright/logbook/logbook.hpp"
#include "database.hpp"

namespace bathwright::logbook {

[[nodiscard]] Verification verify_chain(const Database& database, const std::vector<Anchor>& anchors);

}  // namespace bathwright::logbook
