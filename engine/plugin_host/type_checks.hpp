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

/// Substances that kill have a caution of level stop.
void check_safety(const bath::BathType& type, Report& report);

}  // namespace bathwright::plugin_host
