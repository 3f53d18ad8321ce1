// The doubts of data/analysis/book_terms.csv.
#pragma once

#include <string_view>

namespace bathwright::book {

/// A row's value in its unit. Asserts that there is one.
[[nodiscard]] double doubt(std::string_view id);

}  // namespace bathwright::book
