// What stands against an answer, in few words: on a sheet that somebody signs.
#pragma once

#include <bathwright/sheets/text.hpp>

namespace bathwright::sheets {

/// A doubt of the model without where its figures come from: "Ni^2+ - Cl^-: analogy, weakly tested (25 C row
/// of ...)" as "Ni²⁺ - Cl⁻: analogy, weakly tested".
[[nodiscard]] std::string in_few_words(std::string_view doubt);

/// Appends a section of them, and where the full words are; nothing where there is no doubt.
void doubts(Lines& lines, const std::vector<std::string>& all);

}  // namespace bathwright::sheets
