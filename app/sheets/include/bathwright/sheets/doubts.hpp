// What stands against an answer, in few words: on a sheet that somebody signs.
#pragma once

#include <bathwright/sheets/page.hpp>

namespace bathwright::sheets {

/// A doubt of the model without where its figures come from: "Ni^2+ - Cl^-: analogy, weakly tested (25 C row
/// of ...)" as "Ni²⁺ - Cl⁻: analogy, weakly tested".
[[nodiscard]] std::string in_few_words(std::string_view doubt);

/// What is doubted for one reason stands together; and where the full words are.
[[nodiscard]] Section doubts(const std::vector<std::string>& all);

}  // namespace bathwright::sheets
