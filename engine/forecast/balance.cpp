#include "balance.hpp"

#include <algorithm>
#include <bathwright/bath/at_aims.hpp>
#include <bathwright/bath/interlock.hpp>
#include <bathwright/matter/formula.hpp>
#include <cmath>

namespace bathwright::forecast {
namespace {

using bath::Chemistry;
using bath::CountedIn;

constexpr double electrons_mol_per_Ah = 3600 / 96485.33212;  // CODATA 2018
constexpr double litres_per_kg_of_water = 1;                 // of what evaporates and fills up

Problem unknown(std::string what, std::string expected) {
  return {Fault::bad_input, "policy", std::move(what), std::move(expected), ""};
}

double or_zero(double u) { return std::isnan(u) ? 0 : u; }

int count_of(const matter::Formula& formula, std::string_view element) {
  double count = 0;
  for (const matter::Atom& atom : formula.atoms())
    if (atom.element == element) count += atom.count;
  return static_cast<int>(std::lround(count));
}

/// Atoms of the metal in a quantity's formula: of its heaviest element, as bath::metal_of has it.
int metal_atoms(const matter::Formula& formula) {
  double heaviest = 0;
  int count = 1;
  for (const matter::Atom& atom : formula.atoms()) {
    const auto element = matter::Formula::parse(atom.element);
    if (!element || element->molar_mass().v <= heaviest) continue;
    heaviest = element->molar_mass().v;
    count = count_of(formula, atom.element);
  }
  return count;
}

class Compiler {
 public:
  Compiler(const bath::Tank& tank, const Chemistry& chemistry, const Policy& policy)
      : tank_(tank), chemistry_(chemistry), policy_(policy) {}

  Result<Compiled> run() {
    const std::size_t n = chemistry_.components().size();
    for (std::size_t i = 0; i < n; ++i)
      out_.charge.push_back(chemistry_.working().system().species()[i].charge);
    out_.water = levels(policy_.water_g_per_L, "water");
    for (const WaterSeason& season : policy_.seasons) out_.seasons.push_back(levels(season.g_per_L, "water"));
    if (!policy_.seasons.empty() && !policy_.calendar.starts)
      problems_.push_back(unknown("has seasons of water, and no date of its first day", "calendar.starts"));
    out_.drag_in = levels(policy_.drag_in_g_per_L, "drag_in");
    if (const bath::ShelfItem* water = tank_.on_shelf("water"))
      out_.water_price_per_L = water->price_per_kg();
    compile_carbon_dioxide();
    for (const OwnRates& own : policy_.own_rates) use(own.use);
    for (const bath::Use& use : chemistry_.type().uses) compile_use(use);
    for (const Work& work : policy_.work)
      if (const auto at = use(work.use)) {
        out_.work.push_back(*at);
        out_.by_state |= out_.uses[*at].by_state;
      }
    for (const std::size_t u : out_.always) out_.by_state |= out_.uses[u].by_state;
    out_.by_shift = out_.by_state;
    for (const Replenishment& rule : policy_.replenishment) compile_feed(rule);
    for (const FreezeOut& rule : policy_.freeze_outs) compile_freeze(rule);
    for (const OwnLimit& limit : policy_.limits) quantity(limit.quantity, "limit");
    if (!problems_.empty()) return problems_;
    if (policy_.work.empty() && !chemistry_.type().uses.empty())
      out_.notes.push_back("the policy states no work: only what goes by the clock is counted");
    return std::move(out_);
  }

 private:
  std::string uses() const {
    std::string all;
    for (const bath::Use& use : chemistry_.type().uses) all += (all.empty() ? "one of " : ", ") + use.id;
    return all.empty() ? "a bath type that states what work does to it" : all;
  }

  const bath::Quantity* quantity(const std::string& id, const char* where) {
    const bath::Quantity* found = chemistry_.type().quantity(id);
    if (!found)
      problems_.push_back(
          unknown(std::string(where) + ": '" + id + "' is no quantity of " + chemistry_.type().name, ""));
    return found;
  }

  /// Position of a use; nothing, with a problem, where there is none of the name.
  std::optional<std::size_t> use(const std::string& id) {
    const auto& all = chemistry_.type().uses;
    const auto at = std::ranges::find(all, id, &bath::Use::id);
    if (at != all.end()) return static_cast<std::size_t>(at - all.begin());
    problems_.push_back(unknown("'" + id + "' is no use of " + chemistry_.type().name, uses()));
    return std::nullopt;
  }

  Amounts nothing() const { return {std::vector<double>(out_.charge.size(), 0), 0}; }

  /// Closes the charge with one component: H^+ where water is split, else what is found by charge.
  void neutralise(Amounts& amounts, std::size_t with) const {
    double charge = 0;
    for (std::size_t i = 0; i < amounts.component_mol.size(); ++i)
      charge += out_.charge[i] * amounts.component_mol[i];
    amounts.component_mol[with] -= charge / out_.charge[with];
  }

  void take(Amounts& into, const matter::Formula& formula, double mol, const std::string& where) {
    const auto part = chemistry_.brings_per_mol(formula);
    if (part)
      add(into, *part, mol);
    else
      problems_.push_back(unknown(where + ": " + text(part.problems()), ""));
  }

  /// g/L of quantities as amounts per litre. Top-up water is neutral: what its ions leave is made up by the
  /// component found by charge.
  Amounts levels(const std::map<std::string, double>& g_per_L, const char* where) {
    Amounts all = nothing();
    for (const auto& [id, grams] : g_per_L)
      if (const bath::Quantity* q = quantity(id, where))
        take(all, q->formula, grams / q->formula.molar_mass().v, where);
    neutralise(all, chemistry_.found_by_charge());
    return all;
  }

  /// CO2 + H2O = CO3^2- + 2 H^+, g of CO2.
  void compile_carbon_dioxide() {
    out_.carbon_dioxide = nothing();
    if (!policy_.carbon_dioxide) return;
    out_.carbon_dioxide_g_per_h = policy_.carbon_dioxide->g_per_h.value;
    if (policy_.carbon_dioxide->per_m2) {
      if (!tank_.surface)
        problems_.push_back(unknown("carbon_dioxide: " + tank_.name + " states no surface",
                                    "vessel.surface in the tank file, or an uptake per hour"));
      else
        out_.carbon_dioxide_g_per_h *= tank_.surface->v / 100;
    }
    const auto carbonate = chemistry_.working().system().component("CO3^2-");
    if (!carbonate) {
      problems_.push_back(
          unknown("carbon_dioxide: " + chemistry_.type().name + " keeps no account of carbonate",
                  "a bath type with CO3^2- among its components"));
      return;
    }
    const double mol = 1 / matter::Formula::parse("CO2")->molar_mass().v;
    out_.carbon_dioxide.component_mol[*carbonate] = mol;
    out_.carbon_dioxide.component_mol[0] = 2 * mol;
    out_.carbon_dioxide.water_kg = -mol * activity::water_kg_per_mol;
  }

  void compile_effect(CompiledUse& compiled, const bath::Quantity& q, double g_per_unit) {
    constexpr std::size_t proton = 0;
    Amounts per_g = nothing();
    take(per_g, q.formula, 1 / q.formula.molar_mass().v, compiled.use->id);
    neutralise(per_g, proton);
    add(compiled.effects, per_g, g_per_unit);
    compiled.effect_per_g.push_back(std::move(per_g));
    compiled.g_per_unit.push_back(g_per_unit);
  }

  void compile_use(const bath::Use& use) {
    CompiledUse compiled;
    compiled.use = &use;
    compiled.effects = nothing();
    compiled.by_state = static_cast<bool>(use.rate);
    compiled.effects_u_rel = or_zero(use.effects_u_rel);
    compiled.cathode = {use.cathode_efficiency,
                        or_zero(use.u_cathode_efficiency) / std::max(use.cathode_efficiency, 1e-9)};
    compiled.anode = {use.anode_efficiency,
                      or_zero(use.u_anode_efficiency) / std::max(use.anode_efficiency, 1e-9)};
    compiled.by_current = use.counted_in == CountedIn::ampere_hour;
    const auto own = std::ranges::find(policy_.own_rates, use.id, &OwnRates::use);
    const bool shops = own != policy_.own_rates.end();
    if (shops && own->effects) {
      compiled.by_state = false;
      for (const auto& [id, grams] : *own->effects)
        if (const bath::Quantity* q = quantity(id, "effects")) compile_effect(compiled, *q, grams);
    } else {
      for (const auto& effect : use.effects)
        compile_effect(compiled, *chemistry_.type().quantity(effect.quantity), effect.g_per_unit);
    }
    if (shops) {
      if (own->effects_u_rel) compiled.effects_u_rel = *own->effects_u_rel;
      if (own->cathode_efficiency) compiled.cathode = *own->cathode_efficiency;
      if (own->anode_efficiency) compiled.anode = *own->anode_efficiency;
    }
    compiled.metal = nothing();
    if (!use.deposits.empty()) compile_deposit(compiled);
    const bool by_clock = use.counted_in == CountedIn::hour || use.counted_in == CountedIn::m2_surface_hour;
    if (by_clock && !(policy_.carbon_dioxide && brings_carbonate(compiled))) clock_use(use);
    out_.uses.push_back(std::move(compiled));
  }

  /// What the tank holds at its aims; where they make no state, the bath type's own rules are left.
  bath::Held held_at_aims() const {
    const auto state = bath::state_at_aims(tank_, chemistry_);
    if (!state) return {};
    const auto solved = chemistry_.speciate(*state);
    return solved ? bath::held_by(chemistry_, *state, solved->pH()) : bath::Held{};
  }

  void clock_use(const bath::Use& use) {
    out_.always.push_back(out_.uses.size());
    if (use.counted_in == CountedIn::m2_surface_hour && !tank_.surface)
      out_.notes.push_back(tank_.name + " states no surface: '" + use.id + "' (" + use.label +
                           ") is not counted");
  }

  void compile_deposit(CompiledUse& compiled) {
    constexpr std::size_t proton = 0;
    const bath::Use& use = *compiled.use;
    const bath::Quantity& metal = *chemistry_.type().quantity(use.deposits);
    const int atoms = metal_atoms(metal.formula);
    take(compiled.metal, metal.formula, 1.0 / atoms, use.id);
    neutralise(compiled.metal, proton);
    compiled.deposit_water =
        count_of(metal.formula, "O") * activity::water_kg_per_mol / static_cast<double>(atoms);
    if (compiled.by_current) {
      compiled.mol_per_unit = bath::metal_mol_per_Ah(use);
      compiled.oxygen_water = electrons_mol_per_Ah / 2 * activity::water_kg_per_mol;  // H2O -> 2 H^+ + 1/2 O2
    } else if (use.counted_in == CountedIn::gram_deposited) {
      compiled.mol_per_unit = 1 / bath::metal_of(metal).v;
    }
  }

  bool brings_carbonate(const CompiledUse& compiled) const {
    const auto carbonate = chemistry_.working().system().component("CO3^2-");
    if (!carbonate) return false;
    for (std::size_t e = 0; e < compiled.g_per_unit.size(); ++e)
      if (compiled.g_per_unit[e] * compiled.effect_per_g[e].component_mol[*carbonate] > 0) return true;
    return false;
  }

  /// What a kg of a shelf item brings. Peroxide is spent on the metal it oxidises and leaves as water, with
  /// the acid that the metal takes: H2O2 + 2 H^+ + 2 e = 2 H2O.
  Result<Amounts> brings(const matter::StockChemical& stock) const {
    const auto formula = matter::Formula::parse(stock.formula, stock.id);
    if (!formula || formula->text() != "H2O2") return chemistry_.brings(stock);
    Amounts water = nothing();
    water.water_kg = stock.water_kg_per_kg() + 2 * stock.mol_per_kg() * activity::water_kg_per_mol;
    return water;
  }

  void compile_feed(const Replenishment& rule) {
    const bath::ShelfItem* item = tank_.on_shelf(rule.stock);
    if (!item) {
      std::string shelf;
      for (const bath::ShelfItem& one : tank_.shelf)
        shelf += (shelf.empty() ? "one of " : ", ") + one.stock.id;
      problems_.push_back(unknown("'" + rule.stock + "' is not on the shelf of " + tank_.name,
                                  shelf.empty() ? "a shelf in the tank file" : shelf));
      return;
    }
    const auto lock = bath::interlock(chemistry_.type(), held_at_aims(), item->stock);
    if (lock && lock->level == bath::Level::stop) {
      problems_.push_back({Fault::refused, "replenishment with " + rule.stock,
                           "must not go into this bath (" + lock->rule + "): " + lock->why, "",
                           "There is no way round this."});
      return;
    }
    const auto brought = brings(item->stock);
    if (!brought) {
      for (const Problem& problem : brought.problems()) problems_.push_back(problem);
      return;
    }
    Compiled::Feed feed;
    feed.rule = &rule;
    feed.per_kg = *brought;
    feed.price_per_kg = item->price_per_kg();
    feed.kg_per_unit = rule.kg_per_unit;
    if (rule.L_per_unit > 0) {
      if (!item->stock.liquid)
        problems_.push_back(unknown("'" + rule.stock + "' is a solid and is put in by volume", "a mass"));
      feed.kg_per_unit = rule.L_per_unit * item->stock.kg_per_L;
    }
    if (rule.by == Replenishment::By::use) {
      feed.use = use(rule.use).value_or(0);
    } else if (rule.by == Replenishment::By::analysis) {
      const bath::Aim* aim = tank_.aim(rule.quantity);
      if (rule.to)
        feed.aim = *rule.to;
      else if (aim)
        feed.aim = aim->aim;
      else
        problems_.push_back(unknown("'" + rule.quantity + "' is no aim of " + tank_.name,
                                    "one of its aims, or a level of the rule's own"));
      if (rule.quantity != "pH") feed.quantity = quantity(rule.quantity, "replenish");
      out_.by_shift |= rule.every_shifts > 0;
    }
    out_.feeds.push_back(std::move(feed));
  }

  void compile_freeze(const FreezeOut& rule) {
    Compiled::Freeze freeze{&rule, quantity(rule.quantity, "freeze_out"), nothing()};
    const auto crystals = matter::Formula::parse(rule.crystals, "freeze_out");
    if (!crystals) {
      for (const Problem& problem : crystals.problems()) problems_.push_back(problem);
      return;
    }
    take(freeze.per_mol, *crystals, 1, "freeze_out");
    if (freeze.quantity && !(chemistry_.quantity_mol(*freeze.quantity, freeze.per_mol.component_mol) > 0))
      problems_.push_back(
          unknown("freeze_out: crystals of " + rule.crystals + " take no " + rule.quantity + " with them",
                  "crystals of that quantity"));
    out_.freezes.push_back(std::move(freeze));
  }

  const bath::Tank& tank_;
  const Chemistry& chemistry_;
  const Policy& policy_;
  Compiled out_;
  Problems problems_;
};

double factor(const std::vector<double>& factors, std::size_t at) {
  return at < factors.size() ? factors[at] : 1;
}

/// Metal out by way of the deposit and in by way of the anodes, less the water that inert anodes turn to
/// oxygen.
void add_metal(Amounts& to, const CompiledUse& use, double efficiency_factor, double anode_factor) {
  if (use.mol_per_unit == 0) return;
  const double anode = use.by_current ? use.anode.value * anode_factor : 0;
  const double out_mol = deposited_mol(use, efficiency_factor);
  add(to, use.metal, use.mol_per_unit * anode - out_mol);
  to.water_kg += use.deposit_water * out_mol - use.oxygen_water * std::max(0.0, 1 - anode);
}

}  // namespace

void add(Amounts& to, const Amounts& more, double times) {
  for (std::size_t i = 0; i < more.component_mol.size(); ++i)
    to.component_mol[i] += times * more.component_mol[i];
  to.water_kg += times * more.water_kg;
}

Amounts per_unit(const CompiledUse& use, double effects_factor, double efficiency_factor) {
  Amounts all{std::vector<double>(use.effects.component_mol.size(), 0), 0};
  add(all, use.effects, effects_factor);
  add_metal(all, use, efficiency_factor, 1);
  return all;
}

double deposited_mol(const CompiledUse& use, double efficiency_factor) {
  if (!use.by_current) return use.mol_per_unit;
  return use.mol_per_unit * std::clamp(use.cathode.value * efficiency_factor, 0.0, 1.0);
}

Result<Compiled> compile(const bath::Tank& tank, const Chemistry& chemistry, const Policy& policy) {
  return Compiler(tank, chemistry, policy).run();
}

Rates rates(const bath::Tank& tank, const Compiled& c, const Policy& policy, const Draw& draw, bool works,
            std::size_t water, const EffectsNow& effects) {
  Rates r;
  r.works = works;
  const Amounts nothing{std::vector<double>(c.charge.size(), 0), 0};
  r.in = r.with_fill = nothing;
  r.by_use.assign(c.uses.size(), nothing);
  r.deposited_mol.assign(c.uses.size(), 0);
  const double hours = policy.calendar.hours_per_shift;
  const double surface_m2 = tank.surface ? tank.surface->v / 100 : 0;
  std::vector<double> units(c.uses.size(), 0);
  if (works)
    for (std::size_t w = 0; w < c.work.size(); ++w)
      units[c.work[w]] += policy.work[w].per_shift.value * factor(draw.work, w) / hours;
  for (const std::size_t u : c.always)
    units[u] += c.uses[u].use->counted_in == CountedIn::hour ? 1 : surface_m2;
  for (std::size_t u = 0; u < c.uses.size(); ++u) {
    if (units[u] == 0) continue;
    const bool now = u < effects.size() && !effects[u].empty();
    Amounts per_unit = nothing;
    if (now)
      for (std::size_t e = 0; e < effects[u].size(); ++e)
        add(per_unit, c.uses[u].effect_per_g[e], effects[u][e] * factor(draw.effects, u));
    else
      add(per_unit, c.uses[u].effects, factor(draw.effects, u));
    add_metal(per_unit, c.uses[u], factor(draw.efficiency, u), factor(draw.anode, u));
    add(r.by_use[u], per_unit, units[u]);
    add(r.in, r.by_use[u], 1);
    r.deposited_mol[u] = units[u] * deposited_mol(c.uses[u], factor(draw.efficiency, u));
  }
  r.carbon_dioxide_g = c.carbon_dioxide_g_per_h * draw.carbon_dioxide;
  add(r.in, c.carbon_dioxide, r.carbon_dioxide_g);
  const double area = works ? policy.area_m2_per_shift.value * draw.area / hours : 0;
  r.drag_out_L = area * policy.drag_out_L_per_m2.value * draw.drag_out;
  r.drag_in_L = area * policy.drag_in_L_per_m2.value * draw.drag_in;
  r.bleed_L = policy.bleed_L_per_h(works);
  const double evaporation_L =
      works ? policy.evaporation_L_per_h.value * draw.evaporation : policy.idle_evaporation_L_per_h;
  add(r.in, c.drag_in, r.drag_in_L);
  r.in.water_kg += (r.drag_in_L - evaporation_L) / litres_per_kg_of_water;
  r.water = nothing;
  add(r.water, water == 0 ? c.water : c.seasons[water - 1], draw.water);
  r.cost_per_fill_L = c.water_price_per_L;
  r.feed_kg.assign(c.feeds.size(), 0);
  r.feed_kg_per_fill_L.assign(c.feeds.size(), 0);
  for (std::size_t f = 0; f < c.feeds.size(); ++f) {
    const Compiled::Feed& feed = c.feeds[f];
    if (feed.rule->by == Replenishment::By::fill) {
      r.feed_kg_per_fill_L[f] = feed.kg_per_unit;
      add(r.with_fill, feed.per_kg, feed.kg_per_unit);
      r.cost_per_fill_L += feed.kg_per_unit * feed.price_per_kg;
    } else if (feed.rule->by == Replenishment::By::use || feed.rule->by == Replenishment::By::hour) {
      r.feed_kg[f] = feed.kg_per_unit * (feed.rule->by == Replenishment::By::hour ? 1 : units[feed.use]);
      add(r.in, feed.per_kg, r.feed_kg[f]);
      r.cost += r.feed_kg[f] * feed.price_per_kg;
    }
  }
  return r;
}

}  // namespace bathwright::forecast
