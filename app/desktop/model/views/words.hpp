// Words that more than one view needs.
#pragma once

#include <string>

namespace bathwright::desktop {

/// A sentence with its formulae as people see them.
[[nodiscard]] std::string pretty_words(const std::string& sentence);

}  // namespace bathwright::desktop
