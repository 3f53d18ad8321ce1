#include <algorithm>
#include <bathwright/bath/interlock.hpp>
#include <bathwright/matter/reactive_kind.hpp>
#include <bathwright/units/show.hpp>
#include <cctype>

namespace bathwright::bath {
namespace {

using matter::Incompatibility;
using matter::StockChemical;

constexpr double least_molality = 1e-4;
constexpr double strong_acid_fraction =
    0.5;  // common practice: water spits in acid of more than half its mass

bool is_own(const BathType& type, const StockChemical& stock) { return type.addition_rule(stock) != nullptr; }

bool is_any(const StockChemical& stock, const std::vector<std::string>& kinds) {
  return std::ranges::any_of(
      kinds, [&](const std::string& kind) { return matter::is_of_kind(stock.formula, kind); });
}

bool lists(const StockChemical& stock, const Incompatibility& pair) {
  return std::ranges::find(stock.incompatible_with, pair.id) != stock.incompatible_with.end();
}

bool has_sides(const Incompatibility& pair) { return !pair.kinds_a.empty() && !pair.kinds_b.empty(); }

bool on_side_a(const StockChemical& stock, const Incompatibility& pair) {
  return is_any(stock, pair.kinds_a);
}
bool on_side_b(const StockChemical& stock, const Incompatibility& pair) {
  return is_any(stock, pair.kinds_b);
}

/// Whether a chemical is of the side of a pair that the bath's own chemicals are of, and of no other: acid in
/// an acid bath, where what the pair keeps out is the sulfide.
bool on_own_side(const BathType& type, const StockChemical& stock, const Incompatibility& pair) {
  const bool a = on_side_a(stock, pair), b = on_side_b(stock, pair);
  if (!has_sides(pair) || a == b) return false;
  bool own_a = false, own_b = false;
  for (const AdditionRule& rule : type.additions)
    if (const StockChemical* own = matter::StockCatalogue::built_in().find(rule.supply)) {
      own_a |= on_side_a(*own, pair);
      own_b |= on_side_b(*own, pair);
    }
  return a ? own_a && !own_b : own_b && !own_a;
}

Level level_of(const Incompatibility& pair) {
  return pair.severity == "stop" ? Level::stop : pair.severity == "warn" ? Level::warn : Level::notice;
}

bool bath_holds_cyanide(const BathType& type) {
  return std::ranges::any_of(
      type.components, [](const Component& component) { return matter::holds_cyanide(component.species); });
}

/// One rule of a bath type's list against a chemical. Acid and cyanide are told apart by what they hold:
/// whatever brings cyanide stays out of a bath without, every acid out of a bath with it.
bool keeps_out(const BathType& type, const Incompatible& rule, const StockChemical& stock) {
  if (rule.with == stock.id) return true;
  const Incompatibility* pair = matter::StockCatalogue::built_in().incompatibility(rule.with);
  if (pair && pair->id == "acid_cyanide") {
    const bool of_it = lists(stock, *pair) || is_any(stock, pair->kinds_a) || is_any(stock, pair->kinds_b);
    return of_it && matter::holds_cyanide(stock.formula) != bath_holds_cyanide(type);
  }
  return pair && lists(stock, *pair) && !is_own(type, stock) && !on_own_side(type, stock, *pair);
}

std::optional<Interlock> by_bath_type(const BathType& type, const StockChemical& stock) {
  const Incompatible* found = nullptr;
  for (const Incompatible& rule : type.incompatibilities)
    if (keeps_out(type, rule, stock) && (!found || rule.level > found->level)) found = &rule;
  if (!found) return std::nullopt;
  return Interlock{found->with, found->why, found->level};
}

/// What a pair does to a chemical in a tank.
std::optional<Interlock> by_pair(const BathType& type, const Held& held, const StockChemical& stock,
                                 const Incompatibility& pair) {
  if (!has_sides(pair) || level_of(pair) == Level::notice || (is_own(type, stock) && !pair.always))
    return std::nullopt;
  const auto meets = [&](const std::vector<std::string>& kinds) -> const Held::Kind* {
    for (const std::string& kind : kinds)
      if (const Held::Kind* one = held.find(kind)) return one;
    return nullptr;
  };
  const Held::Kind* in_tank = on_side_a(stock, pair) ? meets(pair.kinds_b) : nullptr;
  if (!in_tank && on_side_b(stock, pair)) in_tank = meets(pair.kinds_a);
  if (!in_tank) return std::nullopt;
  return Interlock{pair.id,
                   "the tank holds " + matter::kind_name(in_tank->id) + " (" + in_tank->from +
                       "): " + pair.result + ". " + pair.practice,
                   level_of(pair)};
}

bool speaks_of_hydrofluoric_acid(const std::string& text) {
  std::string lower = text;
  std::ranges::transform(lower, lower.begin(), [](unsigned char c) { return std::tolower(c); });
  return lower.find("hydrofluoric") != std::string::npos ||
         lower.find("hydrogen fluoride") != std::string::npos;
}

bool has_caution_of_hydrofluoric_acid(const BathType& type, const StockChemical& stock) {
  return std::ranges::any_of(stock.cautions, speaks_of_hydrofluoric_acid) ||
         std::ranges::any_of(
             type.cautions, [](const Caution& caution) { return speaks_of_hydrofluoric_acid(caution.text); });
}

}  // namespace

const Held::Kind* Held::find(std::string_view id) const {
  const auto found = std::ranges::find(kinds, id, &Kind::id);
  return found == kinds.end() ? nullptr : &*found;
}

Held held_by(const Chemistry& chemistry, const TankState& state, double pH) {
  const std::vector<std::string>& components = chemistry.components();
  Held held;
  const auto amount = [&](const char* name) {
    const auto at = std::ranges::find(components, name);
    return at == components.end() ? 0.0
                                  : state.component_mol[static_cast<std::size_t>(at - components.begin())];
  };
  for (const matter::ReactiveKind& kind : matter::reactive_kinds())
    for (std::size_t i = 1; i < components.size(); ++i) {
      if (state.component_mol[i] < least_molality * state.water_kg) continue;
      const bool acid_of_it =
          pH < kind.below_pH && std::ranges::find(kind.in_acid, components[i]) != kind.in_acid.end();
      if (!kind.is(components[i]) && !acid_of_it) continue;
      held.kinds.push_back({kind.id, components[i]});
      break;
    }
  constexpr double neutral = 7;
  if (pH < neutral && !held.find("acid")) held.kinds.push_back({"acid", "pH " + units::significant(pH, 2)});
  constexpr double sulfuric_kg_per_mol = 0.09808;
  const double mass_kg = chemistry.volume_L(state) * chemistry.density(state).v;
  held.sulfuric_acid_fraction =
      sulfuric_kg_per_mol * std::min(amount("SO4^2-"), std::max(0.0, state.component_mol[0] / 2)) / mass_kg;
  return held;
}

std::optional<Interlock> interlock(const BathType& type, const Held& held, const StockChemical& stock) {
  std::optional<Interlock> gravest = by_bath_type(type, stock);
  const auto add = [&](std::optional<Interlock> one) {
    if (one && (!gravest || one->level > gravest->level)) gravest = std::move(one);
  };
  if (matter::is_of_kind(stock.formula, "cyanide") && !bath_holds_cyanide(type))
    add(Interlock{"acid_cyanide",
                  "cyanide belongs into no bath but those that are made with it: " + type.name +
                      " has none, and nothing in it keeps hydrogen cyanide from leaving."});
  for (const Incompatibility& pair : matter::StockCatalogue::built_in().incompatibilities())
    add(by_pair(type, held, stock, pair));
  if (matter::is_of_kind(stock.formula, "hydrofluoric-acid") &&
      !has_caution_of_hydrofluoric_acid(type, stock))
    add(Interlock{
        "hydrofluoric acid without its cautions",
        "neither the bath type nor the catalogue says how it is handled, and it goes through skin and kills."});
  if (stock.formula == "H2O" && held.sulfuric_acid_fraction > strong_acid_fraction)
    add(Interlock{"water into strong acid",
                  "the tank is " + units::significant(100 * held.sulfuric_acid_fraction, 2) +
                      " % sulfuric acid: water boils and spits where it meets it. Acid goes "
                      "into water, in another tank."});
  return gravest;
}

std::optional<Interlock> interlock_between(const BathType& type, const StockChemical& one,
                                           const StockChemical& other) {
  for (const Incompatibility& pair : matter::StockCatalogue::built_in().incompatibilities()) {
    if (!has_sides(pair) || level_of(pair) != Level::stop) continue;
    const bool meet =
        (on_side_a(one, pair) && on_side_b(other, pair)) || (on_side_b(one, pair) && on_side_a(other, pair));
    if (!meet) continue;
    const bool both_own = is_own(type, one) && is_own(type, other) && !pair.always;
    return Interlock{pair.id, pair.result + ". " + pair.practice, both_own ? Level::warn : Level::stop};
  }
  return std::nullopt;
}

}  // namespace bathwright::bath
