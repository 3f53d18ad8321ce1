// What a log entry says was done to a tank. Bodies are JSON; what a person wrote as a note is read where it
// can be read in one way only.
#pragma once

#include <bathwright/book/book.hpp>
#include <bathwright/logbook/entry.hpp>

namespace bathwright::book {

/// The movement an entry of these kinds tells; with what it cannot be counted, as a sentence.
///   addition      {"chemical": "boric-acid", "amount": 14, "unit": "kg"}, {.., "amount": "14 kg"}, or a note
///   that has
///                 one quantity and one chemical of the tank's shelf: "step 1, 14 kg boric acid"
///   level         {"volume_L": 2340}, {"volume": "2340 L"}, {"level_below_mark": "3 cm"}, or a note: "2340
///   L", "3 cm
///                 below the mark"
///   dump          {"volume_L": 200}, {"volume": "200 L"}, or a note: "200 L"
///   ampere-hours  {"Ah": 1250}, {"use": "deposition", "amount": 1250}, or a note: "1250 Ah"
/// `body` is that of the entry, or of the correction that took its place.
[[nodiscard]] Result<Movement> movement_of(logbook::EntryKind kind, const std::string& body,
                                           const bath::Tank& tank, const bath::BathType& type);

}  // namespace bathwright::book
