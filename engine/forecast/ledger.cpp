#include "ledger.hpp"

#include <algorithm>
#include <cmath>

namespace bathwright::forecast {
namespace {

/// kg of each quantity in amounts, of its formula.
std::vector<double> kg_of(const Prepared& p, const std::vector<double>& component_mol, double times = 1) {
  std::vector<double> kg;
  for (const bath::Quantity& q : p.chemistry.type().quantities)
    kg.push_back(times * p.chemistry.quantity_mol(q, component_mol) * q.formula.molar_mass().v / 1000);
  return kg;
}

bool anything(const std::vector<double>& kg) {
  return std::ranges::any_of(kg, [](double one) { return one != 0; });
}

/// Cheapest price of a kg of metal among what the shelf brings.
double price_of_metal(const Prepared& p, const bath::Quantity& metal, double metal_kg_per_mol) {
  double cheapest = 0;
  for (const bath::ShelfItem& item : p.tank.shelf) {
    const auto brings = p.chemistry.brings(item.stock);
    if (!brings) continue;
    const double mol_per_kg = p.chemistry.quantity_mol(metal, brings->component_mol);
    if (!(mol_per_kg > 0)) continue;
    const double price = item.price_per_kg() / (mol_per_kg * metal_kg_per_mol);
    if (cheapest == 0 || price < cheapest) cheapest = price;
  }
  return cheapest;
}

}  // namespace

Ledger ledger_of(const Prepared& p, const Path& path) {
  const Moved& moved = path.moved();
  Ledger ledger;
  const auto flow = [&](std::string name, const std::vector<double>& mol, double sign) {
    auto kg = kg_of(p, mol, sign);
    if (anything(kg)) ledger.flows.push_back({std::move(name), std::move(kg)});
  };
  for (std::size_t u = 0; u < moved.by_use.size(); ++u) flow(p.compiled.uses[u].use->id, moved.by_use[u], 1);
  flow("carbon dioxide", moved.carbon_dioxide, 1);
  flow("drag-in", moved.drag_in, 1);
  flow("water", moved.water, 1);
  for (std::size_t f = 0; f < moved.feed_kg.size(); ++f) {
    const Compiled::Feed& feed = p.compiled.feeds[f];
    std::vector<double> mol = feed.per_kg.component_mol;
    for (double& one : mol) one *= moved.feed_kg[f];
    flow(feed.rule->stock, mol, 1);
    const double kg = moved.feed_kg[f], cost = kg * feed.price_per_kg;
    const auto same = std::ranges::find(ledger.chemicals, feed.rule->stock, &Ledger::Chemical::stock);
    if (same == ledger.chemicals.end())
      ledger.chemicals.push_back({feed.rule->stock, kg, cost});
    else
      same->kg += kg, same->cost += cost;
  }
  if (moved.water_cost > 0)
    ledger.chemicals.push_back({"water", moved.water_cost / p.compiled.water_price_per_L, moved.water_cost});
  flow("drag-out", moved.dragged, -1);
  flow("rinse returned", moved.returned, 1);
  flow("bleed", moved.bled, -1);
  flow("decants", moved.decanted, -1);
  flow("freeze-out", moved.frozen, -1);
  for (const Prepared::Metal& metal : p.metals) {
    const bath::Quantity& q = p.chemistry.type().quantities[metal.quantity];
    const double kg_per_mol = bath::metal_of(q).v / 1000;
    Ledger::Metal lost;
    lost.quantity = q.id;
    for (const matter::Atom& atom : q.formula.atoms())
      if (const auto element = matter::Formula::parse(atom.element);
          element && element->molar_mass().v == bath::metal_of(q).v)
        lost.element = atom.element;
    const auto mol = [&](const std::vector<double>& amounts) { return p.chemistry.quantity_mol(q, amounts); };
    lost.dragged_kg = (mol(moved.dragged) - mol(moved.returned)) * kg_per_mol;
    lost.bled_kg = (mol(moved.bled) + mol(moved.decanted)) * kg_per_mol;
    lost.deposited_kg = path.deposited_mol(q) * kg_per_mol;
    lost.cost = (lost.dragged_kg + lost.bled_kg) * price_of_metal(p, q, kg_per_mol);
    ledger.metals.push_back(std::move(lost));
  }
  return ledger;
}

Rinsed rinsed_of(const Prepared& p, const Path& path) {
  Rinsed rinsed;
  const Moved& moved = path.moved();
  const double days = p.policy.horizon_days;
  for (std::size_t s = 0; s < p.vessels.stages.size(); ++s) {
    const Vessels::Stage& stage = p.vessels.stages[s];
    const Rinse& rinse = p.policy.rinses[stage.rinse];
    Rinsed::Stage seen;
    seen.name = rinse.name.empty() ? "rinse " + std::to_string(stage.rinse + 1) : rinse.name;
    if (rinse.stages > 1) {
      std::size_t number = 1;
      while (number <= s && p.vessels.stages[s - number].rinse == stage.rinse) ++number;
      seen.name += ", stage " + std::to_string(number);
    }
    seen.g_per_L = kg_of(p, path.rinses_mol()[s], 1000 / stage.volume_L);
    rinsed.stages.push_back(std::move(seen));
  }
  rinsed.returned_L_per_day = moved.returned_L / days;
  rinsed.waste_L_per_day = moved.rinse_waste_L / days;
  rinsed.kg_per_day = kg_of(p, moved.treated, 1 / days);
  rinsed.carried_kg_per_day = kg_of(p, moved.carried, 1 / days);
  for (const double kg : rinsed.kg_per_day)
    rinsed.g_per_L.push_back(rinsed.waste_L_per_day > 0 ? 1000 * kg / rinsed.waste_L_per_day : 0);
  return rinsed;
}

Summary Forecast::summary(const Run& run, const std::vector<LimitMet>& met) const {
  const Prepared& p = *prepared_;
  const double days = std::max(1, run.days.back().day);
  Summary s;
  s.cost = run.days.back().cost / days;
  s.waste_L = run.days.back().waste_L / days;
  s.waste_cost = s.waste_L * p.policy.waste_price_per_L;
  s.top_up_L = run.days.back().top_up_L / days;
  for (const Ledger::Metal& metal : run.ledger.metals) {
    s.metal_lost_kg += (metal.dragged_kg + metal.bled_kg) / days;
    s.metal_lost_cost += metal.cost / days;
  }
  for (const LimitMet& limit : met)
    if (limit.day) s.met.push_back(limit);
  std::ranges::sort(s.met, {}, [](const LimitMet& limit) { return *limit.day; });
  s.holds = s.met.empty();
  return s;
}

}  // namespace bathwright::forecast
