#include <algorithm>
#include <bathwright/activity/model.hpp>
#include <bathwright/bath/interlock.hpp>
#include <bathwright/dosing/plan.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>
#include <numeric>

#include "linear_programme.hpp"
#include "steps.hpp"

namespace bathwright::dosing {
namespace {

using bath::Aim;
using bath::Chemistry;
using bath::Quantity;
using bath::ShelfItem;
using bath::Tank;
using bath::TankState;

constexpr double met_relative = 1e-6;  // an aim within this of its value is met
constexpr double met_pH = 0.01;        // what a pH meter shows; less would need milligrams of acid

/// A shelf chemical as a column of the planner: what a kg of it does.
struct Supply {
  const ShelfItem* item;
  bath::Brings brings;
  double price_per_kg;
  bool only_source = false;  ///< of something the tank aims at
};

TankState mixed(TankState state, const std::vector<Supply>& supplies, std::span<const double> kg) {
  for (std::size_t c = 0; c < supplies.size(); ++c)
    state = Chemistry::after(std::move(state), supplies[c].brings, kg[c]);
  return state;
}

/// mol of H^+ (net of alkali) the tank must hold for its pH to be the aim, and the change of that per pH
/// unit.
struct AcidDemand {
  double mol, per_pH;
};

Result<AcidDemand> acid_demand(const Chemistry& chemistry, const TankState& state, double pH) {
  const auto held_at = [&](double at) -> Result<double> {
    speciation::Task task = bath::task_of(state);
    task.pH = speciation::HeldPh{at, chemistry.counter_ion()};
    const auto answer = chemistry.working().solve(task);
    if (!answer) return answer.problems();
    return state.component_mol[0] + answer->held_ph_mol;
  };
  constexpr double step = 0.05;
  const auto at_aim = held_at(pH), lower = held_at(pH - step), upper = held_at(pH + step);
  for (const auto* one : {&at_aim, &lower, &upper})
    if (!*one) return one->problems();
  return AcidDemand{*at_aim, std::max((*lower - *upper) / (2 * step), 1e-12)};
}

/// The linear programme at one linearisation: columns are kg of each supply, then a shortfall and an excess
/// for each aim (the last aim is the volume).
class Planner {
 public:
  Planner(const Tank& tank, const Chemistry& chemistry, const TankState& now, std::vector<Supply> supplies)
      : tank_(tank), chemistry_(chemistry), now_(now), supplies_(std::move(supplies)) {
    target_volume_L_ = tank.working_volume.v;
    kg_.assign(supplies_.size(), 0);
  }

  Outcome run() {
    constexpr int most_rounds = 25;
    for (int round = 0; round < most_rounds; ++round) {
      const TankState guess = mixed(now_, supplies_, kg_);
      auto next = linearised(guess);
      if (!next) return next.problems();
      double moved = 0, size = 1e-6;
      for (std::size_t c = 0; c < kg_.size(); ++c) {
        moved = std::max(moved, std::abs((*next)[c] - kg_[c]));
        size = std::max(size, (*next)[c]);
      }
      kg_ = *std::move(next);
      if (moved <= 1e-9 * size) return Done{};
    }
    return Problem{Fault::not_converged, tank_.name, "the additions did not settle", "",
                   "Check the aims and the shelf."};
  }

  [[nodiscard]] const std::vector<double>& kg() const { return kg_; }
  [[nodiscard]] const std::vector<Supply>& supplies() const { return supplies_; }

 private:
  Result<std::vector<double>> linearised(const TankState& guess) const {
    const std::size_t n = supplies_.size();
    const double volume = chemistry_.volume_L(guess);
    std::vector<double> litres_per_kg(n);
    for (std::size_t c = 0; c < n; ++c) {
      constexpr double kg = 0.01;
      litres_per_kg[c] =
          (chemistry_.volume_L(Chemistry::after(guess, supplies_[c].brings, kg)) - volume) / kg;
    }
    double volume_without = volume;  // of the linearisation at kg = 0
    for (std::size_t c = 0; c < n; ++c) volume_without -= litres_per_kg[c] * kg_[c];

    // Rows  sum_c a_c kg_c + shortfall - excess = b,  each scaled so that 1 means 100 % off (pH: one unit).
    LinearProgramme lp;
    std::vector<std::pair<std::vector<double>, double>> aims;
    for (const Aim& aim : tank_.aims) {
      std::vector<double> row(n, 0);
      if (aim.quantity == "pH") {
        const auto demand = acid_demand(chemistry_, guess, aim.aim);
        if (!demand) return demand.problems();
        for (std::size_t c = 0; c < n; ++c) row[c] = supplies_[c].brings.component_mol[0] / demand->per_pH;
        aims.emplace_back(std::move(row), (demand->mol - now_.component_mol[0]) / demand->per_pH);
        continue;
      }
      const Quantity& quantity = *chemistry_.type().quantity(aim.quantity);
      const double M = quantity.formula.molar_mass().v;
      const double scale = 1 / (std::max(aim.aim, 1e-9) * volume);
      for (std::size_t c = 0; c < n; ++c)
        row[c] = scale * (M * chemistry_.quantity_mol(quantity, supplies_[c].brings.component_mol) -
                          aim.aim * litres_per_kg[c]);
      aims.emplace_back(std::move(row), scale * (aim.aim * volume_without -
                                                 M * chemistry_.quantity_mol(quantity, now_.component_mol)));
    }
    std::vector<double> fill(n);
    for (std::size_t c = 0; c < n; ++c) fill[c] = litres_per_kg[c] / target_volume_L_;
    aims.emplace_back(fill, (target_volume_L_ - volume_without) / target_volume_L_);

    const std::size_t columns = n + 2 * aims.size();
    lp.upper.assign(columns, HUGE_VAL);
    for (std::size_t r = 0; r < aims.size(); ++r) {
      std::vector<double> row = aims[r].first;
      row.resize(columns, 0);
      row[n + 2 * r] = 1;
      row[n + 2 * r + 1] = -1;
      lp.add_row(std::move(row), aims[r].second, aims[r].second);
    }
    // What may stand in the tank at most.
    std::vector<double> brim = fill;
    brim.resize(columns, 0);
    const double room = (target_volume_L_ + tank_.freeboard.v - volume_without) / target_volume_L_;
    lp.add_row(std::move(brim), -HUGE_VAL, std::max(room, 0.0));

    // First come as near to the aims as the shelf allows; standing below the mark counts least, and what
    // rises above it by displacement only has to stay under the brim.
    constexpr double fill_weight = 1e-3;
    lp.objective.assign(columns, 0);
    std::fill(lp.objective.begin() + static_cast<std::ptrdiff_t>(n), lp.objective.end(), 1);
    lp.objective[columns - 2] = fill_weight;
    lp.objective[columns - 1] = 0;
    const auto nearest_to_aims = solve(lp);
    if (!nearest_to_aims) return nearest_to_aims.problems();
    // Then, no farther from them, the least cost; the tiny share of mass makes a free supply unique.
    const double deviation =
        std::inner_product(lp.objective.begin(), lp.objective.end(), nearest_to_aims->begin(), 0.0);
    lp.add_row(lp.objective, -HUGE_VAL, deviation * (1 + 1e-9) + 1e-12);
    std::fill(lp.objective.begin(), lp.objective.end(), 0);
    for (std::size_t c = 0; c < n; ++c) lp.objective[c] = supplies_[c].price_per_kg + 1e-6;
    auto cheapest = solve(lp);
    std::vector<double> kg = cheapest ? *std::move(cheapest) : *nearest_to_aims;
    kg.resize(n);
    return kg;
  }

  const Tank& tank_;
  const Chemistry& chemistry_;
  const TankState& now_;
  std::vector<Supply> supplies_;
  double target_volume_L_ = 0;
  std::vector<double> kg_;
};

double normal_below(double x) { return 0.5 * std::erfc(-x / std::sqrt(2.0)); }

std::optional<double> chance_in_window(const Tank& tank, const Chemistry& chemistry,
                                       const bath::TankView& now, const bath::TankView& end,
                                       const std::map<std::string, double>& uncertainty) {
  if (uncertainty.empty()) return std::nullopt;
  double chance = 1;
  const auto& quantities = chemistry.type().quantities;
  for (std::size_t q = 0; q < quantities.size(); ++q) {
    const Aim* aim = tank.aim(quantities[q].id);
    const auto u = uncertainty.find(quantities[q].id);
    if (!aim || u == uncertainty.end() || !(u->second > 0)) continue;
    const double sigma =
        u->second * now.volume_L / end.volume_L;  // amounts stay uncertain, additions are weighed
    const double level = end.quantity_g_per_L[q];
    chance *= normal_below((aim->high - level) / sigma) - normal_below((aim->low - level) / sigma);
  }
  return chance;
}

/// What does not end at its aim, and whether all of it ends inside its window at least.
struct Unmet {
  std::vector<std::string> words;
  bool inside = true;

  void add(const Aim& aim, double value, std::string what) {
    const double rounding = 1e-9 * std::abs(aim.aim);
    const bool in_window = value >= aim.low - rounding && value <= aim.high + rounding;
    inside = inside && in_window;
    words.push_back(std::move(what) + (in_window ? "; inside its window" : ""));
  }
};

Unmet unmet_aims(const Tank& tank, const Chemistry& chemistry, const bath::TankView& end) {
  Unmet unmet;
  const auto& quantities = chemistry.type().quantities;
  for (const Aim& aim : tank.aims) {
    if (aim.quantity == "pH") {
      if (std::abs(end.pH - aim.aim) > met_pH)
        unmet.add(aim, end.pH,
                  "pH ends at " + units::significant(end.pH, 3) + ", aim " + units::significant(aim.aim, 3));
      continue;
    }
    for (std::size_t q = 0; q < quantities.size(); ++q)
      if (quantities[q].id == aim.quantity &&
          std::abs(end.quantity_g_per_L[q] - aim.aim) > met_relative * aim.aim)
        unmet.add(aim, end.quantity_g_per_L[q],
                  quantities[q].label + " ends at " + units::significant(end.quantity_g_per_L[q], 4) +
                      " g/L, aim " + units::significant(aim.aim, 4) + " g/L" +
                      (end.quantity_g_per_L[q] > aim.aim ? "; only taking bath out brings it lower" : ""));
  }
  return unmet;
}

/// The least-cost plan from these supplies, portioned, checked and seen through to its end.
Result<Plan> make_plan(const Tank& tank, const Chemistry& chemistry, const TankState& now,
                       const bath::TankView& now_view, std::vector<Supply> supplies,
                       const std::map<std::string, double>& uncertainty) {
  Planner planner(tank, chemistry, now, std::move(supplies));
  if (Outcome settled = planner.run(); !settled) return settled.problems();
  Plan plan;
  plan.kind = "least cost";
  std::vector<Portioned> amounts;
  for (std::size_t c = 0; c < planner.supplies().size(); ++c) {
    const Supply& supply = planner.supplies()[c];
    const double kg = planner.kg()[c];
    // Less than a gram of a chemical, or than a twentieth of a percent of the tank in water, is nothing
    // anybody adds.
    const double nothing_kg = supply.item->stock.formula == "H2O" ? 5e-4 * tank.working_volume.v : 1e-3;
    if (kg <= nothing_kg) continue;
    amounts.push_back({supply.item, &supply.brings, kg});
    plan.cost += kg * supply.price_per_kg;
    for (std::size_t i = 0; i < chemistry.components().size(); ++i)
      if (activity::charge_in_name(chemistry.components()[i]) != 0)
        plan.salt_load_mol += kg * std::abs(supply.brings.component_mol[i]);
  }
  auto steps = make_steps(tank, chemistry, now, std::move(amounts));
  if (!steps) return steps.problems();
  plan.additions = steps->additions;
  plan.steps = steps->steps;
  plan.final_state = steps->final_state;
  auto end = chemistry.view(plan.final_state);
  if (!end) return end.problems();
  plan.final_view = *std::move(end);
  Unmet unmet = unmet_aims(tank, chemistry, plan.final_view);
  plan.unmet = std::move(unmet.words);
  plan.feasible = unmet.inside;
  for (const Step& step : plan.steps)
    for (const Check& check : step.checks) plan.feasible = plan.feasible && (check.ok || !check.stops);
  plan.probability_in_window = chance_in_window(tank, chemistry, now_view, plan.final_view, uncertainty);
  return plan;
}

// The only source of something aimed at, lactic acid say, is no trim of the pH.
bool is_acid(const Supply& supply) { return !supply.only_source && supply.brings.component_mol[0] > 0; }
bool is_alkali(const Supply& supply) { return !supply.only_source && supply.brings.component_mol[0] < 0; }

/// Marks each supply without which something aimed at could not be raised.
void mark_only_sources(const Tank& tank, const Chemistry& chemistry, std::vector<Supply>& supplies) {
  for (const Aim& aim : tank.aims) {
    const Quantity* quantity = chemistry.type().quantity(aim.quantity);
    if (!quantity) continue;
    std::vector<Supply*> raise;
    for (Supply& supply : supplies)
      if (chemistry.quantity_mol(*quantity, supply.brings.component_mol) > 1e-9) raise.push_back(&supply);
    if (raise.size() == 1) raise.front()->only_source = true;
  }
}

bool doses(const Plan& plan, const std::vector<Supply>& supplies, bool (*kind)(const Supply&)) {
  return std::any_of(plan.additions.begin(), plan.additions.end(), [&](const Addition& addition) {
    return std::any_of(supplies.begin(), supplies.end(), [&](const Supply& supply) {
      return supply.item->stock.id == addition.chemical && kind(supply);
    });
  });
}

/// Least cost, but never an acid and an alkali for one tank in one plan: cheap as the pair may be, they only
/// make salt and heat of each other. Of the plans without either kind, the one that leaves fewer aims unmet,
/// then the cheaper.
Result<Plan> least_cost_plan(const Tank& tank, const Chemistry& chemistry, const TankState& now,
                             const bath::TankView& now_view, const std::vector<Supply>& supplies,
                             const std::map<std::string, double>& uncertainty) {
  auto plan = make_plan(tank, chemistry, now, now_view, supplies, uncertainty);
  if (!plan || !doses(*plan, supplies, is_acid) || !doses(*plan, supplies, is_alkali)) return plan;
  const auto without = [&](bool (*kind)(const Supply&)) {
    std::vector<Supply> kept = supplies;
    std::erase_if(kept, kind);
    return make_plan(tank, chemistry, now, now_view, std::move(kept), uncertainty);
  };
  auto no_acid = without(is_acid), no_alkali = without(is_alkali);
  if (!no_acid) return no_alkali;
  if (!no_alkali) return no_acid;
  const bool acid_free = no_acid->unmet.size() != no_alkali->unmet.size()
                             ? no_acid->unmet.size() < no_alkali->unmet.size()
                             : no_acid->cost < no_alkali->cost;
  return acid_free ? no_acid : no_alkali;
}

}  // namespace

Result<AdditionSheet> plan_additions(const Tank& tank, const Chemistry& chemistry, const TankState& now,
                                     const Request& request) {
  AdditionSheet sheet;
  auto view = chemistry.view(now);
  if (!view) return view.problems();
  sheet.now = *std::move(view);

  std::vector<Supply> supplies;
  std::vector<std::string> warnings;
  for (const ShelfItem& item : tank.shelf) {
    const bath::Incompatible* rule = bath::forbidding_rule(chemistry.type(), item.stock);
    if (rule && rule->level == bath::Level::stop) {
      sheet.refused.push_back(
          {item.stock.id + " must not go into this bath: " + rule->why, "interlock: " + rule->with});
      continue;
    }
    if (rule) warnings.push_back(item.stock.name + ": " + rule->why);
    auto brings = chemistry.brings(item.stock);
    if (!brings)
      sheet.refused.push_back(
          {brings.problems().front().text(), "the bath type must know what a chemical brings"});
    else
      supplies.push_back({&item, *std::move(brings), item.price_per_kg()});
  }
  for (const Aim& aim : tank.aims)
    if (aim.quantity != "pH" && !chemistry.type().quantity(aim.quantity))
      return Problem{Fault::bad_input, tank.file,
                     aim.quantity + " is not a quantity of " + chemistry.type().name, "", ""};

  mark_only_sources(tank, chemistry, supplies);
  auto plan = least_cost_plan(tank, chemistry, now, sheet.now, supplies, request.uncertainty);
  if (!plan) return plan.problems();
  sheet.cautions = cautions_for(tank, chemistry.type(), *plan);
  sheet.cautions.insert(sheet.cautions.end(), warnings.begin(), warnings.end());
  sheet.plans.push_back(*std::move(plan));
  return sheet;
}

}  // namespace bathwright::dosing
