// The document of a hand-over, which is also what the log keeps of it.
#pragma once

#include <bathwright/hand_over/hand_over.hpp>

#include "documents.hpp"

namespace bathwright::work {

[[nodiscard]] Json hand_over_document(const hand_over::HandOver& told);

}  // namespace bathwright::work
