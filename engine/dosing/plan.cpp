#include <algorithm>
#include <bathwright/activity/model.hpp>
#include <bathwright/bath/interlock.hpp>
#include <bathwright/dosing/plan.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>

#include "most_certain.hpp"
#include "order.hpp"
#include "planner.hpp"
#include "precipitation.hpp"
#include "steps.hpp"

namespace bathwright::dosing {
namespace {

using bath::Aim;
using bath::Chemistry;
using bath::Quantity;
using bath::ShelfItem;
using bath::Tank;
using bath::TankState;
using units::significant;

double salt_mol_per_kg(const Chemistry& chemistry, const bath::Brings& brings) {
  double mol = 0;
  for (std::size_t i = 0; i < chemistry.components().size(); ++i)
    if (activity::charge_in_name(chemistry.components()[i]) != 0) mol += std::abs(brings.component_mol[i]);
  return mol;
}

/// Whether a chemical does anything the tank aims at. One that does not, barium carbonate say, would only be
/// taken for its volume.
bool serves_an_aim(const Tank& tank, const Chemistry& chemistry, const Supply& supply) {
  if (supply.is_water()) return true;
  return std::ranges::any_of(tank.aims, [&](const Aim& aim) {
    if (aim.quantity == "pH") return supply.brings.component_mol[0] != 0 || supply.base;
    const Quantity* quantity = chemistry.type().quantity(aim.quantity);
    return quantity && chemistry.quantity_mol(*quantity, supply.brings.component_mol) != 0;
  });
}

/// Whether a whole package of a solid fits: where it moves a level by more than its window is wide, no whole
/// number of them need end inside.
bool fits_by_the_bag(const Situation& s, const Supply& supply) {
  const ShelfItem& item = *supply.item;
  if (!item.package || item.stock.liquid || supply.trims()) return false;
  return std::ranges::all_of(s.tank.aims, [&](const Aim& aim) {
    const Quantity* quantity = s.chemistry.type().quantity(aim.quantity);
    if (!quantity) return true;
    const double mol = s.chemistry.quantity_mol(*quantity, supply.brings.component_mol) * *item.package;
    return std::abs(mol) * quantity->formula.molar_mass().v / s.target_L <= aim.high - aim.low;
  });
}

/// Marks each supply without which something aimed at could not be raised, and what nothing raises.
std::set<std::string> look_for_sources(const Tank& tank, const Chemistry& chemistry,
                                       std::vector<Supply>& supplies) {
  std::set<std::string> without_source;
  for (const Aim& aim : tank.aims) {
    const Quantity* quantity = chemistry.type().quantity(aim.quantity);
    if (!quantity) continue;
    std::vector<Supply*> raise;
    for (Supply& supply : supplies)
      if (chemistry.quantity_mol(*quantity, supply.brings.component_mol) > 1e-9) raise.push_back(&supply);
    if (raise.size() == 1) raise.front()->only_source = true;
    if (raise.empty()) without_source.insert(aim.quantity);
  }
  return without_source;
}

/// What may go in, and what is refused or warned of.
std::vector<Supply> supplies_of(const Tank& tank, const Chemistry& chemistry, const TankState& now,
                                AdditionSheet& sheet, std::vector<std::string>& warnings) {
  const bath::Held held = bath::held_by(chemistry, now, sheet.now.pH);
  std::vector<Supply> supplies;
  for (const ShelfItem& item : tank.shelf) {
    const auto rule = bath::interlock(chemistry.type(), held, item.stock);
    if (rule && rule->level == bath::Level::stop) {
      sheet.refused.push_back(
          {item.stock.id + " must not go into this bath: " + rule->why, "interlock: " + rule->rule});
      continue;
    }
    if (rule) warnings.push_back(item.stock.name + ": " + rule->why);
    auto brings = chemistry.brings(item.stock);
    if (!brings) {
      sheet.refused.push_back(
          {brings.problems().front().text(), "the bath type must know what a chemical brings"});
      continue;
    }
    const double salt = salt_mol_per_kg(chemistry, *brings);
    const bool base =
        brings->component_mol[0] == 0 && role_of(chemistry.type(), sheet.now.pH, item.stock) == Role::pH_trim;
    supplies.push_back({&item, *std::move(brings), item.price_per_kg(), salt, base});
  }
  return supplies;
}

/// What lies inside the noise of its analysis as the tank stands when it is filled, and how far off it may
/// stay: the rule of most shops is to act only beyond max(2 u, 2 % of the aim), or outside the window (from
/// memory); a pH is read to 0.05.
std::map<std::string, double> dead_band(const Situation& s) {
  std::map<std::string, double> bands;
  const bath::DosingHabits& habits = s.tank.dosing;
  if (!s.request.dead_band || !habits.dead_band) return bands;
  for (const Aim& aim : s.tank.aims) {
    double level = s.now_view.pH, band = habits.dead_band_pH;
    if (const Quantity* quantity = s.chemistry.type().quantity(aim.quantity)) {
      const double filled = s.now_view.volume_L / s.target_L;
      level = s.chemistry.quantity_g_per_L(*quantity, s.now) * filled;
      const auto u = s.request.uncertainty.find(aim.quantity);
      band = std::max(habits.dead_band_share * aim.aim,
                      u == s.request.uncertainty.end() ? 0 : 2 * u->second * filled);
    }
    if (std::abs(level - aim.aim) <= band && level >= aim.low && level <= aim.high)
      bands[aim.quantity] = band;
  }
  return bands;
}

/// Whether two sets of amounts are the same to anybody who weighs them out.
bool alike(const Situation& s, const Amounts& a, const Amounts& b) {
  constexpr double same = 0.02;
  const auto differs = [](double x, double y, double least) {
    return std::abs(x - y) > std::max(least, same * std::max(x, y));
  };
  if (differs(a.decant_L, b.decant_L, 0.005 * s.target_L)) return false;
  for (std::size_t c = 0; c < s.supplies.size(); ++c)
    if (!s.supplies[c].is_water() && differs(a.kg[c], b.kg[c], 2e-3)) return false;
  return true;
}

double cost_of(const Situation& s, const Amounts& amounts) {
  double cost = amounts.decant_L * s.tank.dosing.waste_price_per_L;
  for (std::size_t c = 0; c < s.supplies.size(); ++c) cost += amounts.kg[c] * s.supplies[c].price_per_kg;
  return cost;
}

/// What amounts cost where each that goes by the bag is rounded up to whole bags.
double cost_rounded_up(const Situation& s, const Amounts& amounts) {
  constexpr double rounding = 1.02;  // of the trims of the pH and the water, which follow
  Amounts up = amounts;
  for (std::size_t c = 0; c < s.supplies.size(); ++c)
    if (s.supplies[c].by_the_bag) {
      const double package = *s.supplies[c].item->package;
      up.kg[c] = package * std::ceil(up.kg[c] / package - 1e-6);
    }
  return rounding * cost_of(s, up);
}

/// The windows alone: what is inside stays where it is, what is not comes a tenth of the window inside.
std::vector<Aim> windows_as_aims(const Situation& s) {
  std::vector<Aim> aims = s.tank.aims;
  for (Aim& aim : aims) {
    const Quantity* quantity = s.chemistry.type().quantity(aim.quantity);
    const double today =
        quantity ? s.chemistry.quantity_g_per_L(*quantity, s.now) * s.now_view.volume_L / s.target_L
                 : s.now_view.pH;
    const double inside = 0.1 * (aim.high - aim.low);
    if (today < aim.aim) aim.aim = std::max(today, std::min(aim.aim, aim.low + inside));
  }
  return aims;
}

std::string money(const Situation& s, double cost) {
  return significant(cost, 3) + (s.tank.currency.empty() ? "" : " " + s.tank.currency);
}

std::string per_cent(double share) { return significant(std::round(100 * share), 3) + " %"; }

struct Candidate {
  Wish wish;
  Amounts amounts;
  Plan plan;
};

std::string whole_bags(const Situation& s, const Candidate& one) {
  std::string weighed;
  for (std::size_t c = 0; c < s.supplies.size(); ++c) {
    const Supply& supply = s.supplies[c];
    if (one.amounts.kg[c] > 0 && supply.item->package && !supply.item->stock.liquid && !supply.trims() &&
        !supply.by_the_bag)
      weighed += (weighed.empty() ? "" : ", ") + supply.item->stock.name;
  }
  if (weighed.empty()) return "whole bags, none left open; the pH is trimmed by weight";
  return "whole bags, but for the trim of the pH and " + weighed +
         ": a bag of it is more than its window is wide";
}

std::string reason_of(const Situation& s, const Candidate& one, const Candidate& first) {
  const double dearer = one.plan.cost - first.plan.cost;
  const std::string for_money =
      dearer >= 0 ? " for " + money(s, dearer) + " more" : " and costs " + money(s, -dearer) + " less";
  std::string text;
  if (one.wish.may_decant)
    text = "takes out " + significant(one.plan.decant_L, 3) + " L of bath first, for the waste treatment" +
           (one.plan.feasible && !first.plan.feasible ? "; then every window is met"
                                                      : "; then more comes to its aim");
  else if (one.wish.least == Wish::Least::salt)
    text = "brings " + significant(first.plan.salt_load_mol - one.plan.salt_load_mol, 2) +
           " mol less of salt" + for_money;
  else if (one.wish.whole_packages)
    text = whole_bags(s, one);
  else if (&one != &first)
    text = "the smallest addition: inside every window, not to the aims";
  else
    text = one.plan.unmet.empty() ? "the cheapest way to every aim"
                                  : "the nearest to the aims without taking bath out";
  return text;
}

/// How sure each plan is; where the best is no promise, what would make it one: a plan that is clearly more
/// certain, and what to analyse once more.
Outcome tell_chances(const Situation& s, std::vector<Plan>& plans) {
  if (!s.request.spread) return Done{};
  const Spread& spread = *s.request.spread;
  for (Plan& plan : plans) {
    auto chances = chance_of(s.tank, s.chemistry, s.now, plan, spread, s.request.sampling);
    if (!chances) return chances.problems();
    plan.chances = *std::move(chances);
  }
  Plan& best = plans.front();
  if (best.chances->in_every_window >= promised) return Done{};
  const auto looks = second_looks(s.tank, s.chemistry, s.now, best, spread, s.request.sampling);
  if (!looks) return looks.problems();
  if (!looks->empty()) best.second_look = looks->front();
  if (s.request.most_plans == 1) return Done{};
  auto certain = most_certain_plan(s, best, spread, s.request.sampling);
  if (!certain) return certain.problems();
  if (!*certain) return Done{};
  Plan surer = **certain;
  surer.reason = "more certain to end inside every window: " + per_cent(surer.chances->in_every_window) +
                 " instead of " + per_cent(best.chances->in_every_window);
  if (plans.size() == static_cast<std::size_t>(s.request.most_plans)) plans.pop_back();
  plans.insert(plans.begin() + 1, std::move(surer));
  return Done{};
}

}  // namespace

Result<AdditionSheet> plan_additions(const Tank& tank, const Chemistry& chemistry, const TankState& now,
                                     const Request& request) {
  AdditionSheet sheet;
  auto view = chemistry.view(now);
  if (!view) return view.problems();
  sheet.now = *std::move(view);
  for (const Aim& aim : tank.aims)
    if (aim.quantity != "pH" && !chemistry.type().quantity(aim.quantity))
      return Problem{Fault::bad_input, tank.file,
                     aim.quantity + " is not a quantity of " + chemistry.type().name, "", ""};
  std::vector<std::string> warnings;
  Situation s{tank,
              chemistry,
              now,
              request,
              sheet.now,
              supplies_of(tank, chemistry, now, sheet, warnings),
              solid_limits(tank, chemistry, sheet.now)};
  std::erase_if(s.supplies, [&](const Supply& one) { return !serves_an_aim(tank, chemistry, one); });
  s.without_source = look_for_sources(tank, chemistry, s.supplies);
  const bool fill = tank.dosing.fill == bath::DosingHabits::Fill::to_mark;
  s.target_L = fill ? tank.working_volume.v : sheet.now.volume_L;
  s.dead_band = dead_band(s);
  for (Supply& supply : s.supplies) supply.by_the_bag = fits_by_the_bag(s, supply);

  const Wish cheapest{.kind = "least cost", .aims = tank.aims, .whole_packages = tank.dosing.whole_packages};
  auto first = amounts_of_kind(s, cheapest);
  if (!first) return first.problems();
  std::vector<Candidate> candidates{{cheapest, *first, {}}};
  // Further kinds are offered where they can be had and differ from those before.
  const auto offer = [&](const char* kind, auto vary, auto worth_it) {
    if (request.most_plans == 1) return;
    Wish wish = cheapest;
    wish.kind = kind;
    vary(wish);
    auto amounts = amounts_of_kind(s, wish);
    if (!amounts || !worth_it(*amounts)) return;
    for (const Candidate& other : candidates)
      if (alike(s, *amounts, other.amounts)) return;
    candidates.push_back({std::move(wish), *std::move(amounts), {}});
  };
  constexpr double nearer = 1e-3;
  offer(
      "with decant", [&](Wish& wish) { wish.may_decant = true, wish.bring_down = request.bring_down; },
      [&](const Amounts& a) {
        if (request.bring_down) return a.decant_L > 0;
        // Much is thrown away only to come back into a window.
        constexpr double much = 0.2;  // of the tank
        return a.decant_L > 0 && a.missing < first->missing - nearer &&
               (!first->conflicts.empty() || a.decant_L < much * s.target_L);
      });
  offer(
      "least salt load", [](Wish& wish) { wish.least = Wish::Least::salt; },
      [&](const Amounts& a) { return a.penalty < first->penalty + nearer; });
  offer(
      "whole bags", [](Wish& wish) { wish.whole_packages = true; },
      [&](const Amounts& a) {
        bool a_bag = false;
        for (std::size_t c = 0; c < s.supplies.size(); ++c)
          a_bag = a_bag || (a.kg[c] > 0 && s.supplies[c].by_the_bag);
        return a_bag && a.conflicts.empty() && a.penalty < weight::off_aim &&
               cost_of(s, a) <= cost_rounded_up(s, *first);
      });
  offer(
      "smallest addition", [&](Wish& wish) { wish.aims = windows_as_aims(s); },
      [&](const Amounts& a) { return a.conflicts.empty() && cost_of(s, a) < 0.8 * cost_of(s, *first); });
  for (Candidate& one : candidates) {
    auto plan = plan_with(s, one.wish, one.amounts);
    if (!plan) return plan.problems();
    one.plan = *std::move(plan);
  }
  // A further kind that cannot be carried out helps nobody who has a plan that can.
  const bool some_feasible =
      std::ranges::any_of(candidates, [](const Candidate& one) { return one.plan.feasible; });
  for (std::size_t i = candidates.size(); i-- > 1;)
    if (some_feasible && !candidates[i].plan.feasible)
      candidates.erase(candidates.begin() + static_cast<std::ptrdiff_t>(i));
  for (Candidate& one : candidates) one.plan.reason = reason_of(s, one, candidates.front());
  std::ranges::stable_sort(
      candidates, [](const Candidate& a, const Candidate& b) { return a.plan.feasible && !b.plan.feasible; });
  if (candidates.size() > static_cast<std::size_t>(request.most_plans))
    candidates.resize(static_cast<std::size_t>(request.most_plans));
  for (Candidate& one : candidates) sheet.plans.push_back(std::move(one.plan));
  for (Plan& one : sheet.plans) one.removals = removals(tank, chemistry, one);
  sheet.cautions = cautions_for(tank, chemistry.type(), sheet.plans.front());
  sheet.cautions.insert(sheet.cautions.end(), warnings.begin(), warnings.end());
  if (Outcome told = tell_chances(s, sheet.plans); !told) return told.problems();
  return sheet;
}

}  // namespace bathwright::dosing
