// What must never go into a bath, whoever asks for it. Not for: what would merely be unwise (cautions).
#pragma once

#include <bathwright/bath/bath_type.hpp>
#include <bathwright/matter/stock.hpp>

namespace bathwright::bath {

/// The rule that keeps a chemical out of a bath of this type, or that warns of it; nullptr where there is
/// none. A stop comes before a warning. A rule names the chemical, or a kind of incompatibility the chemical
/// is of; of a kind, the chemicals of the bath itself (those it has a rule of addition for) are free, since
/// they stand on its side of it. Acid and cyanide are told apart by what they hold: whatever brings cyanide
/// stays out of a bath without, every acid out of a bath with it.
[[nodiscard]] const Incompatible* forbidding_rule(const BathType& type, const matter::StockChemical& stock);

}  // namespace bathwright::bath
