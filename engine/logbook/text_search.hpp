// A text to look for, as SQLite is asked for it.
#pragma once

#include <string>
#include <string_view>

namespace bathwright::logbook {

/// `text` as a LIKE pattern that finds it anywhere, its own wildcards taken literally (escaped by '!').
[[nodiscard]] std::string anywhere(std::string_view text);

/// `text` as a question to the trigram index: all runs of three characters must be in an entry. Empty where
/// the text is shorter than that. The index keeps no order, so what it finds still has to be compared.
[[nodiscard]] std::string trigrams_of(std::string_view text);

}  // namespace bathwright::logbook
