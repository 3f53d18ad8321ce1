#include "order.hpp"

#include <algorithm>
#include <array>
#include <bathwright/matter/reactive_kind.hpp>

namespace bathwright::dosing {
namespace {

using bath::AdditionRule;
using bath::BathType;
using matter::StockChemical;

constexpr double alkaline_pH = 10;

bool is(const StockChemical& stock, const char* kind) { return matter::is_of_kind(stock.formula, kind); }

bool brings_metal(const StockChemical& stock) {
  static constexpr std::array metals{"Ni", "Cu", "Zn", "Co", "Fe", "Cr", "Sn",
                                     "Ag", "Au", "Cd", "Pb", "Al", "Mn"};
  const auto formula = matter::Formula::parse(stock.formula);
  return formula && std::ranges::any_of(metals, [&](const char* one) { return formula->count(one) > 0; });
}

bool is_complexant(const StockChemical& stock) {
  if (is(stock, "cyanide") || stock.formula.find("P2O7") != std::string::npos) return true;
  const auto formula = matter::Formula::parse(stock.formula);
  const bool of_carbon = formula && formula->count("C") > 0 && formula->count("O") + formula->count("N") > 1;
  return of_carbon && is(stock, "organic");
}

bool is_buffer(const StockChemical& stock) {
  return stock.formula == "H3BO3" || stock.formula.starts_with("NaC2H3O2") ||
         stock.formula.starts_with("CH3COO");
}

bool orders_caustic_first(const BathType& type) {
  return std::ranges::any_of(type.additions, [](const AdditionRule& rule) {
    const StockChemical* stock = matter::StockCatalogue::built_in().find(rule.supply);
    return stock && is(*stock, "strong-base") && rule.order <= 1;
  });
}

/// Metals whose hydroxide dissolves in caustic and falls out again where it is thinned.
bool holds_amphoteric_metal(const BathType& type) {
  return std::ranges::any_of(type.components, [](const bath::Component& component) {
    return component.species == "Zn^2+" || component.species == "Sn^4+";
  });
}

/// Whether something that goes in keeps the metal dissolved: a complexant, or caustic.
bool holds_its_metal(const BathType& type) {
  return orders_caustic_first(type) || std::ranges::any_of(type.additions, [](const AdditionRule& rule) {
           const StockChemical* own = matter::StockCatalogue::built_in().find(rule.supply);
           return own && is_complexant(*own) && !brings_metal(*own);
         });
}

/// Whether the bath type has a metal go in before this.
bool after_a_metal(const BathType& type, const AdditionRule& rule) {
  return std::ranges::any_of(type.additions, [&](const AdditionRule& other) {
    const StockChemical* own = matter::StockCatalogue::built_in().find(other.supply);
    return own && other.order < rule.order && brings_metal(*own);
  });
}

std::string why(const BathType& type, Role role, const StockChemical& stock) {
  switch (role) {
    case Role::water:
      return "the fill, so that what follows has room and is thinned";
    case Role::alkali:
      return "before the metal: the bath stays alkaline, and the metal has what holds it";
    case Role::acid:
      return "the acid of the bath, before any metal: it falls out where acid is short";
    case Role::strength:
      return "strength first: the sulfate is worked out at the new strength";
    case Role::complexant:
      return "before the metal, which it must hold in solution";
    case Role::buffer:
      return "the buffer, before anything that moves the pH";
    case Role::metal:
      return holds_its_metal(type) ? "after what holds the metal in solution"
                                   : "the metal, before the pH trim";
    case Role::salt:
      return stock.formula == "BaCO3" ? "after the strength: it takes out the sulfate that is too much then"
                                      : "a salt, after what it could salt out";
    case Role::reducer:
      return "the reducer, after the metal has spread";
    case Role::pH_trim:
      return "the pH trim, when everything else that moves the pH is in";
    case Role::brightener:
      return "last of all: by ampere-hours and the test cell, not by titration";
  }
  return "";
}

/// What a chemical the bath type does not order has as its order: after all that it orders of the same or an
/// earlier role.
double order_by_role(const BathType& type, double pH, Role role) {
  double after = 0;
  for (const AdditionRule& rule : type.additions)
    if (const StockChemical* own = matter::StockCatalogue::built_in().find(rule.supply))
      if (role_of(type, pH, *own) <= role) after = std::max(after, static_cast<double>(rule.order));
  return after + 0.5;
}

}  // namespace

Role role_of(const BathType& type, double pH, const StockChemical& stock) {
  const AdditionRule* rule = type.addition_rule(stock);
  const bool trims = type.acid_by_pH() || (rule && rule->largest_pH_step > 0);
  if (stock.formula == "H2O") return Role::water;
  if (is(stock, "chromium-6")) return Role::strength;
  if (is_buffer(stock)) return Role::buffer;
  if (is(stock, "strong-base")) return trims || pH < alkaline_pH ? Role::pH_trim : Role::alkali;
  if (is(stock, "reducer") && !brings_metal(stock)) return Role::reducer;
  if (rule && rule->largest_pH_step > 0 && !brings_metal(stock) && !is_complexant(stock))
    return Role::pH_trim;
  if (brings_metal(stock)) {
    const bool is_trim = rule && rule->largest_pH_step > 0 && is(stock, "carbonate");
    return is_trim ? Role::pH_trim : Role::metal;
  }
  if (is_complexant(stock))
    return rule ? Role::complexant : is(stock, "acid") ? Role::pH_trim : Role::complexant;
  if (is(stock, "organic")) return Role::brightener;
  if (is(stock, "acid")) return trims || pH > alkaline_pH ? Role::pH_trim : Role::acid;
  if (is(stock, "ammonia")) return stock.formula == "NH3" ? Role::pH_trim : Role::salt;
  return Role::salt;
}

Place place_of(const BathType& type, const bath::Held& held, double pH, const StockChemical& stock) {
  Place place;
  place.role = role_of(type, pH, stock);
  place.why = why(type, place.role, stock);
  const AdditionRule* rule = type.addition_rule(stock);
  if (place.role == Role::water) {
    place.key = -1;
    if (pH > alkaline_pH && orders_caustic_first(type) && holds_amphoteric_metal(type)) {
      place.key = 1.25;
      place.why = "after the caustic: water alone would throw the metal out as hydroxide";
    }
    return place;
  }
  place.key = rule ? rule->order : order_by_role(type, pH, place.role);
  if (!rule) place.why += "; the bath type does not order it";
  const bool before_metal =
      place.role == Role::complexant || place.role == Role::alkali || place.role == Role::acid;
  if (rule && before_metal && after_a_metal(type, *rule))
    place.why = "after the metal, as the bath type orders it";
  if (stock.formula == "H2SO4" && held.find("chromium-6"))
    place.why = "after the strength: only the sulfate still missing then";
  return place;
}

bool goes_before(const Place& a, const Place& b) { return a.key != b.key ? a.key < b.key : a.role < b.role; }

}  // namespace bathwright::dosing
