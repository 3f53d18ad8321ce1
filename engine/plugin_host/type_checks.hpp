// What must hold between the tables of a bath type, whoever provides it.
#pragma once

#include <bathwright/bath/bath_type.hpp>

#include "report.hpp"

namespace bathwright::plugin_host {

/// Ids are unique, everything referred to exists, windows are ordered.
void check_references(const bath::BathType& type, Report& report);

/// Components and watched solids are those of the tables of equilibria, own reactions balance, and each total
/// has its way of being found.
void check_chemistry(const bath::BathType& type, Report& report);

/// A bath that holds cyanide, chromium(VI), fluoride, formaldehyde, hydrazine or a strong oxidiser, by the
/// formulae of its components, quantities and supplies, says so in a caution of level stop, and an alkaline
/// cyanide bath forbids acid.
void check_safety(const bath::BathType& type, Report& report);

}  // namespace bathwright::plugin_host
