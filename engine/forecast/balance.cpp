#include "balance.hpp"

#include <algorithm>
#include <bathwright/matter/formula.hpp>
#include <cmath>

namespace bathwright::forecast {
namespace {

using bath::Chemistry;
using bath::CountedIn;

Problem unknown(std::string what, std::string expected) {
  return {Fault::bad_input, "policy", std::move(what), std::move(expected), ""};
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
    out_.drag_in = levels(policy_.drag_in_g_per_L, "drag_in");
    for (const bath::Use& use : chemistry_.type().uses) compile_use(use);
    for (const Work& work : policy_.work)
      if (const auto at = use(work.use)) out_.work.push_back(*at);
    for (const Replenishment& rule : policy_.replenishment) compile_feed(rule);
    for (const FreezeOut& rule : policy_.freeze_outs) compile_freeze(rule);
    for (const OwnLimit& limit : policy_.limits) quantity(limit.quantity, "limit");
    if (!problems_.empty()) return problems_;
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

  void compile_use(const bath::Use& use) {
    constexpr std::size_t proton = 0;
    CompiledUse compiled{&use, nothing(), nothing(), 0};
    for (const auto& effect : use.effects) {
      const bath::Quantity& q = *chemistry_.type().quantity(effect.quantity);
      take(compiled.effects, q.formula, effect.g_per_unit / q.formula.molar_mass().v, use.id);
    }
    neutralise(compiled.effects, proton);
    if (!use.deposits.empty()) {
      const bath::Quantity& metal = *chemistry_.type().quantity(use.deposits);
      take(compiled.metal, metal.formula, 1, use.id);
      neutralise(compiled.metal, proton);
      if (use.counted_in == CountedIn::ampere_hour)
        compiled.mol_per_unit = bath::metal_mol_per_Ah(use);
      else if (use.counted_in == CountedIn::gram_deposited)
        compiled.mol_per_unit = 1 / bath::metal_of(metal).v;
    }
    if (use.counted_in == CountedIn::hour || use.counted_in == CountedIn::m2_surface_hour)
      out_.always.push_back(out_.uses.size());
    out_.uses.push_back(std::move(compiled));
  }

  void compile_feed(const Replenishment& rule) {
    const bath::ShelfItem* item = tank_.on_shelf(rule.stock);
    if (!item) {
      problems_.push_back(
          unknown("'" + rule.stock + "' is not on the shelf of " + tank_.name, "a shelf item"));
      return;
    }
    const auto brings = chemistry_.brings(item->stock);
    if (!brings) {
      for (const Problem& problem : brings.problems()) problems_.push_back(problem);
      return;
    }
    Compiled::Feed feed;
    feed.rule = &rule;
    feed.per_kg = *brings;
    feed.price_per_kg = item->price_per_kg();
    if (rule.by == Replenishment::By::use) {
      feed.use = use(rule.use).value_or(0);
    } else if (rule.by == Replenishment::By::analysis) {
      const bath::Aim* aim = tank_.aim(rule.quantity);
      if (!aim)
        problems_.push_back(unknown("'" + rule.quantity + "' is no aim of " + tank_.name, "one of its aims"));
      else
        feed.aim = aim->aim;
      if (rule.quantity != "pH") feed.quantity = quantity(rule.quantity, "replenish");
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

}  // namespace

void add(Amounts& to, const Amounts& more, double times) {
  for (std::size_t i = 0; i < more.component_mol.size(); ++i)
    to.component_mol[i] += times * more.component_mol[i];
  to.water_kg += times * more.water_kg;
}

double deposited_mol(const CompiledUse& use, double efficiency_factor) {
  if (use.mol_per_unit == 0) return 0;
  if (use.use->counted_in != CountedIn::ampere_hour) return use.mol_per_unit;
  return use.mol_per_unit * std::clamp(use.use->cathode_efficiency * efficiency_factor, 0.0, 1.0);
}

Amounts per_unit(const CompiledUse& use, double effects_factor, double efficiency_factor) {
  Amounts all{std::vector<double>(use.effects.component_mol.size(), 0), 0};
  add(all, use.effects, effects_factor);
  if (use.mol_per_unit > 0) {
    const double given_back =
        use.use->counted_in == CountedIn::ampere_hour ? use.mol_per_unit * use.use->anode_efficiency : 0;
    add(all, use.metal, given_back - deposited_mol(use, efficiency_factor));
  }
  return all;
}

Result<Compiled> compile(const bath::Tank& tank, const Chemistry& chemistry, const Policy& policy) {
  return Compiler(tank, chemistry, policy).run();
}

Rates rates(const bath::Tank& tank, const Compiled& c, const Policy& policy, const Draw& draw, bool works) {
  Rates r;
  r.in_per_h.component_mol.assign(c.charge.size(), 0);
  const double hours = policy.calendar.hours_per_shift;
  const double surface_m2 = tank.surface ? tank.surface->v / 100 : 0;
  std::vector<double> units_per_h(c.uses.size(), 0);
  if (works)
    for (std::size_t w = 0; w < c.work.size(); ++w)
      units_per_h[c.work[w]] += policy.work[w].per_shift.value * factor(draw.work, w) / hours;
  for (const std::size_t u : c.always)
    units_per_h[u] += c.uses[u].use->counted_in == CountedIn::hour ? 1 : surface_m2;
  for (std::size_t u = 0; u < c.uses.size(); ++u) {
    if (units_per_h[u] == 0) continue;
    add(r.in_per_h, per_unit(c.uses[u], factor(draw.effects, u), factor(draw.efficiency, u)), units_per_h[u]);
    r.deposited_mol += units_per_h[u] * deposited_mol(c.uses[u], factor(draw.efficiency, u));
  }
  const double area = works ? policy.area_m2_per_shift.value * draw.area / hours : 0;
  r.drag_out_L = area * policy.drag_out_L_per_m2.value * draw.drag_out;
  const double drag_in_L = area * policy.drag_in_L_per_m2.value * draw.drag_in;
  r.bleed_L = policy.bleed_L_per_day / 24;
  r.loss_per_h = (r.drag_out_L + r.bleed_L) / tank.working_volume.v;
  const double evaporation_L =
      works ? policy.evaporation_L_per_h.value * draw.evaporation : policy.idle_evaporation_L_per_h;
  r.top_up_L = std::max(0.0, evaporation_L + r.drag_out_L + r.bleed_L - drag_in_L);
  add(r.in_per_h, c.drag_in, drag_in_L);
  add(r.in_per_h, c.water, r.top_up_L * draw.water);
  for (const Compiled::Feed& feed : c.feeds) {
    if (feed.rule->by == Replenishment::By::analysis) continue;
    const double units = feed.rule->by == Replenishment::By::hour ? 1 : units_per_h[feed.use];
    add(r.in_per_h, feed.per_kg, feed.rule->kg_per_unit * units);
    r.cost += feed.rule->kg_per_unit * units * feed.price_per_kg;
  }
  return r;
}

Outcome fill(bath::TankState& state, double volume_L, const Chemistry& chemistry) {
  constexpr int most_steps = 60;
  for (int step = 0; step < most_steps; ++step) {
    const double gap = volume_L - chemistry.volume_L(state);
    state.water_kg += gap;
    if (!(state.water_kg > 0))
      return Problem{Fault::out_of_range, "", "the salts leave no room for water in the tank", "",
                     "Bleed more, or add less."};
    if (std::abs(gap) < 1e-11 * volume_L) break;
  }
  return Done{};
}

Outcome advance(bath::TankState& state, const Rates& r, double hours, double volume_L,
                const Chemistry& chemistry, Moved& moved) {
  const double kt = r.loss_per_h * hours;
  const double kept = std::exp(-kt);
  const double weight = kt > 1e-9 ? -std::expm1(-kt) / r.loss_per_h : hours * (1 - kt / 2);
  for (std::size_t i = 0; i < state.component_mol.size(); ++i) {
    const double before = state.component_mol[i];
    state.component_mol[i] = before * kept + r.in_per_h.component_mol[i] * weight;
    moved.in_mol[i] += r.in_per_h.component_mol[i] * hours;
    moved.out_mol[i] += before + r.in_per_h.component_mol[i] * hours - state.component_mol[i];
  }
  return fill(state, volume_L, chemistry);
}

}  // namespace bathwright::forecast
