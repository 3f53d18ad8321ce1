#include <algorithm>
#include <bathwright/bath/bath_type.hpp>

namespace bathwright::bath {
namespace {

constexpr double faraday_C_per_mol = 96485.33212;  // CODATA 2018, exact by definition of e and N_A
constexpr double seconds_per_hour = 3600;

}  // namespace

const Quantity* BathType::quantity(std::string_view wanted) const {
  const auto found =
      std::find_if(quantities.begin(), quantities.end(), [&](const Quantity& q) { return q.id == wanted; });
  return found == quantities.end() ? nullptr : &*found;
}

const AdditionRule* BathType::addition_rule(const matter::StockChemical& stock) const {
  const auto same = std::ranges::find(additions, stock.id, &AdditionRule::supply);
  if (same != additions.end()) return &*same;
  if (!stock.liquid) return nullptr;
  const auto other_strength = std::ranges::find_if(additions, [&](const AdditionRule& rule) {
    const auto* ordered = matter::StockCatalogue::built_in().find(rule.supply);
    return ordered && ordered->liquid && ordered->formula == stock.formula;
  });
  return other_strength == additions.end() ? nullptr : &*other_strength;
}

bool BathType::acid_by_pH() const {
  return std::any_of(components.begin(), components.end(),
                     [](const Component& c) { return c.found_by == FoundBy::pH; });
}

double metal_mol_per_Ah(const Use& use) { return seconds_per_hour / (use.electrons * faraday_C_per_mol); }

units::GramsPerMole metal_of(const Quantity& deposited) {
  units::GramsPerMole heaviest{};
  for (const matter::Atom& atom : deposited.formula.atoms())
    if (const auto element = matter::Formula::parse(atom.element))
      heaviest = std::max(heaviest, element->molar_mass());
  return heaviest;
}

}  // namespace bathwright::bath
