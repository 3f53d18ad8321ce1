// What a run moved, in the words of a book: kg of each quantity by where it came from and went to.
#pragma once

#include "path.hpp"

namespace bathwright::forecast {

[[nodiscard]] Ledger ledger_of(const Prepared& prepared, const Path& path);
[[nodiscard]] Rinsed rinsed_of(const Prepared& prepared, const Path& path);

}  // namespace bathwright::forecast
