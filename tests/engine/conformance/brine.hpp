// A small bath type for the checks: nickel chloride in water.
#pragma once

#include <bathwright/bath/bath_type.hpp>

inline bathwright::bath::BathType nickel_chloride_bath() {
  using namespace bathwright;
  bath::BathType type;
  type.id = "brine";
  type.name = "Brine";
  type.max_C = 70;
  type.sources = {{"a-book", "An author, A book, 1976", "facts"}};
  type.components = {
      {"H^+", bath::FoundBy::pH}, {"Ni^2+", bath::FoundBy::analysis}, {"Cl^-", bath::FoundBy::charge}};
  type.quantities = {{"Ni^2+", "nickel", *matter::Formula::parse("Ni^2+"), {{"Ni^2+", 1}}},
                     {"Cl^-", "chloride", *matter::Formula::parse("Cl^-"), {{"Cl^-", 1}}}};
  type.solids = {{"NiCl2.6H2O", "green crystals"}};
  type.indicators = {
      {"double-nickel", "double", "a test", "g/L",
       [](const bath::IndicatorView& view) -> Result<double> { return 2 * view.quantity_g_per_L[0]; }},
      {"never", "never", "a test", "", [](const bath::IndicatorView&) -> Result<double> {
         return Problem{Fault::bad_input, "never", "something it needs is not known", "", ""};
       }}};
  bath::Use plating;
  plating.id = "plating";
  plating.deposits = "Ni^2+";
  plating.electrons = 2;
  plating.cathode_efficiency = 0.5;
  bath::Use drag_out;
  drag_out.id = "drag-out";
  drag_out.counted_in = bath::CountedIn::m2_of_work;
  type.uses = {plating, drag_out};
  return type;
}
