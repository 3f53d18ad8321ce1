#include <algorithm>
#include <bathwright/bath/interlock.hpp>

namespace bathwright::bath {
namespace {

constexpr std::string_view acid_cyanide = "acid_cyanide";

/// CN as a group of its own: NaCN, Au(CN)2^-, Fe(CN)6; not the CN of an amine or of thiocyanate.
bool holds_cyanide(const std::string& formula) {
  const std::size_t at = formula.find("CN");
  if (at == std::string::npos || formula.find("SCN") != std::string::npos) return false;
  const std::size_t end = at + 2;
  return end == formula.size() || formula[end] == '^' || formula[end] == ')' || formula[end] == '.';
}

bool bath_holds_cyanide(const BathType& type) {
  return std::ranges::any_of(type.components,
                             [](const Component& component) { return holds_cyanide(component.species); });
}

bool keeps_out(const BathType& type, const Incompatible& rule, const matter::StockChemical& stock) {
  if (rule.with == stock.id) return true;
  if (std::ranges::find(stock.incompatible_with, rule.with) == stock.incompatible_with.end()) return false;
  if (rule.with == acid_cyanide) return holds_cyanide(stock.formula) != bath_holds_cyanide(type);
  return std::ranges::find(type.additions, stock.id, &AdditionRule::supply) == type.additions.end();
}

}  // namespace

const Incompatible* forbidding_rule(const BathType& type, const matter::StockChemical& stock) {
  const Incompatible* found = nullptr;
  for (const Incompatible& rule : type.incompatibilities)
    if (keeps_out(type, rule, stock) && (!found || rule.level > found->level)) found = &rule;
  return found;
}

}  // namespace bathwright::bath
