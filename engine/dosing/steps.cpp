#include "steps.hpp"

#include <algorithm>
#include <bathwright/bath/at_aims.hpp>
#include <bathwright/matter/water.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>
#include <map>
#include <optional>

#include "dissolving.hpp"
#include "dosing_point.hpp"
#include "heat.hpp"
#include "order.hpp"
#include "step_checks.hpp"

namespace bathwright::dosing {
namespace {

using bath::AdditionRule;
using bath::Chemistry;
using bath::Tank;
using bath::TankState;
using speciation::Equilibrium;
using units::significant;

/// Part of a trim of the pH that goes in before its place, so that the pH stays where it may be on the way.
struct Early {
  std::string trim;    ///< stock id
  std::string before;  ///< stock id of what would take the pH too far
  double share = 0;
};

/// One chemical on its way into the tank.
struct Going {
  Portioned what;
  Place place;
  [[nodiscard]] const matter::StockChemical& stock() const { return what.item->stock; }
  [[nodiscard]] bool is_water() const { return place.role == Role::water; }
};

void add_to(std::vector<Addition>& additions, Addition more) {
  const auto same = std::ranges::find(additions, more.chemical, &Addition::chemical);
  if (same == additions.end()) {
    additions.push_back(std::move(more));
    return;
  }
  same->kg += more.kg;
  same->amount += more.amount;
  same->cost += more.cost;
}

/// The step that the pH on the way stops; nothing where none does.
const Step* stopped_by_pH(const Steps& steps) {
  for (const Step& step : steps.steps)
    for (const Check& check : step.checks)
      if (!check.ok && check.stops && check.name == pH_on_the_way) return &step;
  return nullptr;
}

/// Whole portions that keep each within its largest single rise, pH step and warming.
int portions_of(const Tank& tank, const AdditionRule* rule, const Portioned& one, double volume_L,
                double pH_step, double warms_C) {
  constexpr double rounding = 1e-9;  // an addition of exactly the rule's size is one portion
  const auto at_most = [&](double whole, double largest) {
    return largest > 0 ? static_cast<int>(std::ceil(std::abs(whole) / largest - rounding)) : 1;
  };
  const double rise = one.kg * one.item->stock.assay * 1000 / volume_L;
  const double largest_rise =
      one.item->largest_rise_g_per_L.value_or(rule ? rule->largest_rise_g_per_L : bath::not_given);
  const int least = rule && rule->half_then_analyse ? 2 : 1;
  const int needed =
      std::max({least, at_most(rise, largest_rise), at_most(pH_step, rule ? rule->largest_pH_step : 0),
                at_most(std::max(0.0, warms_C), tank.dosing.largest_warming_C)});
  return needed % least == 0 ? needed : needed + 1;  // a half is a whole number of portions
}

/// The water of the fill, of which the steps take what they need to dissolve in.
class Fill {
 public:
  explicit Fill(double kg) : left_kg_(kg) {}

  /// Gives a step its liquid; returns the kg of water that goes into the tank with it.
  double dissolve(const DissolvingNeed& need, Step& step, double tank_L) {
    if (!need.apart) return 0;
    step.dissolve_at_C = need.at_C;
    const double water_kg = need.water_L_per_kg.value_or(0) * step.kg * water_kg_per_L();
    if (need.water_L_per_kg && water_kg <= left_kg_) {
      left_kg_ -= water_kg;
      step.dissolve_in_L = *need.water_L_per_kg * step.kg;
      step.dissolve_in = "water";
      step.checks.push_back(dissolves(need, step, true));
      return water_kg;
    }
    if (need.bath_L_per_kg) {
      constexpr double most_drawn_off = 0.2;
      step.dissolve_in_L = *need.bath_L_per_kg * step.kg;
      step.dissolve_in = "bath drawn off";
      step.checks.push_back(dissolves(need, step, *step.dissolve_in_L <= most_drawn_off * tank_L));
      return 0;
    }
    step.checks.push_back(
        {"dissolving apart", false, false,
         "the bath takes no more of it and the fill is too small to dissolve it in: hang it in a "
         "bag in the flow, or dissolve it in hot water and let as much evaporate first"});
    return 0;
  }

  [[nodiscard]] double left_kg() const { return left_kg_; }

 private:
  static double water_kg_per_L() { return matter::water_density(units::Celsius{20}).v; }
  static Check dissolves(const DissolvingNeed& need, const Step& step, bool ok) {
    std::string detail = significant(*step.dissolve_in_L, 3) + " L of " + step.dissolve_in + ", " + need.from;
    if (!ok) detail += "; more than a fifth of the tank: in smaller lots, or in a bag in the flow";
    return {"dissolving apart", ok, false, std::move(detail)};
  }
  double left_kg_;
};

/// Walks through a plan: state, equilibrium and checks after each portion.
class Walk {
 public:
  Walk(const Tank& tank, const Chemistry& chemistry, TankState state)
      : tank_(tank), chemistry_(chemistry), type_(chemistry.type()), state_(std::move(state)) {}

  Result<Steps> run(std::vector<Portioned> amounts, Sequence sequence,
                    const std::optional<Early>& early = {}) {
    auto now = chemistry_.speciate(state_);
    if (!now) return now.problems();
    now_ = *std::move(now);
    auto start = chemistry_.quick_view(state_);
    if (!start) return start.problems();
    start_ = *std::move(start);
    limits_ = solid_limits(tank_, chemistry_, start_);
    gases_.emplace(chemistry_, now_, at_aims());
    held_ = bath::held_by(chemistry_, state_, now_.pH());

    std::vector<Going> going;
    for (const Portioned& one : amounts)
      going.push_back({one, place_of(type_, held_, now_.pH(), one.item->stock)});
    if (early) bring_forward(going, *early);
    refuse_what_must_not_meet(going);
    if (sequence == Sequence::by_rule) std::ranges::stable_sort(going, goes_before, &Going::place);
    if (Outcome planned = plan_liquids(going); !planned) return planned.problems();
    for (std::size_t i = 0; i < going.size(); ++i)
      if (Outcome added = add(going, i); !added) return added.problems();
    number_portions();
    spread_over_shifts();
    if (!result_.steps.empty()) {
      Step& last = result_.steps.back();
      check_idle_end(chemistry_, limits_, last.checks, last.predicted);
    }
    result_.final_state = std::move(state_);
    return std::move(result_);
  }

 private:
  std::optional<Equilibrium> at_aims() const {
    const auto state = bath::state_at_aims(tank_, chemistry_);
    if (!state) return std::nullopt;
    auto solved = chemistry_.speciate(*state);
    if (!solved) return std::nullopt;
    return *std::move(solved);
  }

  static void bring_forward(std::vector<Going>& going, const Early& early) {
    const auto at = [&](const std::string& id) {
      return std::ranges::find(going, id, [](const Going& one) { return one.stock().id; });
    };
    Going first = *at(early.trim);
    at(early.trim)->what.kg *= 1 - early.share;
    first.what.kg *= early.share;
    constexpr double just_before = 1e-3;
    first.place.key = at(early.before)->place.key - just_before;
    first.place.why = "some of the pH trim first: " + at(early.before)->stock().name +
                      " alone would take the pH out of its limits";
    going.push_back(std::move(first));
  }

  /// Of a chemical that goes in at two places too.
  void number_portions() {
    std::map<std::string, int> of;
    for (const Step& step : result_.steps) ++of[step.chemical];
    std::map<std::string, int> so_far;
    for (Step& step : result_.steps) {
      step.portion = ++so_far[step.chemical];
      step.portions = of[step.chemical];
    }
  }

  void spread_over_shifts() {
    constexpr double shift_h = 8;
    double hours = 0;
    for (Step& step : result_.steps) {
      step.shift = static_cast<int>(hours / shift_h);
      hours += step.wait_h;
    }
  }

  void refuse_what_must_not_meet(std::vector<Going>& going) {
    std::vector<std::string> out;
    for (std::size_t i = 0; i < going.size(); ++i)
      for (std::size_t j = i + 1; j < going.size(); ++j) {
        const auto found = bath::interlock_between(type_, going[i].stock(), going[j].stock());
        if (!found) continue;
        const std::string pair = going[i].stock().name + " and " + going[j].stock().name;
        if (found->level == bath::Level::stop) {
          result_.refused.push_back(
              {pair + " must not be in one plan: " + found->why, "interlock: " + found->rule});
          out.push_back(going[i].stock().id);
          out.push_back(going[j].stock().id);
        } else {
          result_.keep_apart.push_back(
              pair + " never meet outside the tank, not in a can, a side tank or on one trolley: " +
              found->why + ".");
        }
      }
    std::erase_if(going, [&](const Going& one) { return std::ranges::count(out, one.stock().id) > 0; });
  }

  /// What each chemical is dissolved in, and how much of the fill is left as the fill.
  Outcome plan_liquids(const std::vector<Going>& going) {
    double fill_kg = 0;
    for (const Going& one : going)
      if (one.is_water()) {
        fill_kg += one.what.kg;
        water_per_kg_ = one.what.brings->water_kg;
      }
    Fill trial(fill_kg);
    for (const Going& one : going) {
      needs_.push_back(dissolving_need(chemistry_, state_, one.stock(), *one.what.brings,
                                       type_.addition_rule(one.stock()), one.place.role));
      Step whole;
      whole.kg = one.what.kg;
      takes_kg_.push_back(trial.dissolve(needs_.back(), whole, start_.volume_L));
      if (takes_kg_.back() == 0) needs_.back().water_L_per_kg.reset();
    }
    fill_share_ = fill_kg > 0 ? trial.left_kg() / fill_kg : 0;
    return Done{};
  }

  Outcome add(const std::vector<Going>& going, std::size_t index) {
    const Going& one = going[index];
    if (const auto lock = bath::interlock(type_, held_, one.stock());
        lock && lock->level == bath::Level::stop) {
      result_.refused.push_back(
          {one.stock().id + " must not go into this tank: " + lock->why, "interlock: " + lock->rule});
      return Done{};
    }
    add_to(result_.additions, addition_of(*one.what.item, one.what.kg));
    const double kg = one.is_water() ? fill_share_ * one.what.kg : one.what.kg;
    if (kg <= 0) return Done{};
    const AdditionRule* rule = type_.addition_rule(one.stock());
    TankState whole = Chemistry::after(state_, *one.what.brings, kg);
    whole.water_kg += takes_kg_[index] * water_per_kg_;
    const auto after = chemistry_.speciate(whole);
    if (!after) return after.problems();
    const double warms_C = warming_C(one.stock(), kg, state_);
    const int portions = one.is_water() ? 1
                                        : portions_of(tank_, rule, one.what, chemistry_.volume_L(whole),
                                                      after->pH() - now_.pH(), warms_C);
    for (int portion = 1; portion <= portions; ++portion)
      if (Outcome done = carry(going, index, kg, portion, portions); !done) return done;
    held_ = bath::held_by(chemistry_, state_, now_.pH());
    return Done{};
  }

  Outcome carry(const std::vector<Going>& going, std::size_t index, double kg, int portion, int portions) {
    const Going& one = going[index];
    const AdditionRule* rule = type_.addition_rule(one.stock());
    Step step;
    step.number = static_cast<int>(result_.steps.size()) + 1;
    step.chemical = one.stock().id;
    step.name = one.stock().name;
    step.kg = kg / portions;
    step.unit = one.stock().liquid ? "L" : "kg";
    step.amount = one.stock().liquid ? step.kg / one.stock().kg_per_L : step.kg;
    step.portion = portion;
    step.portions = portions;
    step.why_here = one.place.why;
    if (rule) step.how = rule->how;
    if (rule) step.wait_h = rule->wait_h;
    step.analyse_after = rule && rule->half_then_analyse && portion == portions / 2;
    step.warms_C = warming_C(one.stock(), step.kg, state_);
    Fill fill(takes_kg_[index] / portions * (1 + 1e-12));
    const double water_kg = water_per_kg_ * fill.dissolve(needs_[index], step, chemistry_.volume_L(state_));

    TankState portion_state = state_;
    std::ranges::fill(portion_state.component_mol, 0);
    portion_state.water_kg = water_kg;
    portion_state = Chemistry::after(std::move(portion_state), *one.what.brings, step.kg);
    const TankState before = state_;
    state_ = Chemistry::after(std::move(state_), *one.what.brings, step.kg);
    state_.water_kg += water_kg;

    auto view = chemistry_.quick_view(state_);
    if (!view) return view.problems();
    step.predicted = *std::move(view);
    auto after = chemistry_.speciate(state_);
    if (!after) return after.problems();
    check_tank(tank_, chemistry_, start_, limits_, step.predicted, step.checks);
    check_warming(tank_, step.warms_C, step.checks);
    gases_->check_tank(*after, held_, step.checks);
    check_dosing_point(tank_, chemistry_, before, portion_state, now_, *after, one.stock(), *gases_,
                       step.checks);
    check_order(going, index, step);
    now_ = *std::move(after);
    result_.steps.push_back(std::move(step));
    return Done{};
  }

  /// Whether something that the rule has later went in earlier. Where the fill goes is nobody's rule.
  void check_order(const std::vector<Going>& going, std::size_t index, Step& step) const {
    for (std::size_t i = 0; i < index; ++i)
      if (!going[index].is_water() && !going[i].is_water() &&
          goes_before(going[index].place, going[i].place)) {
        const bool ordered = type_.addition_rule(going[i].stock()) &&
                             type_.addition_rule(going[index].stock()) &&
                             going[i].place.role != Role::pH_trim;  // some of it may be needed first
        step.checks.push_back({"order", false, ordered,
                               going[index].stock().name + " goes in before " + going[i].stock().name + ": " +
                                   going[index].place.why});
        return;
      }
  }

  const Tank& tank_;
  const Chemistry& chemistry_;
  const bath::BathType& type_;
  TankState state_;
  Equilibrium now_;
  bath::TankView start_;
  std::vector<SolidLimit> limits_;
  bath::Held held_;
  std::optional<GasRule> gases_;
  std::vector<DissolvingNeed> needs_;  ///< of each chemical, without water where the fill does not reach
  std::vector<double> takes_kg_;       ///< of the fill, by each
  double water_per_kg_ = 1;            ///< of the fill
  double fill_share_ = 1;              ///< of the fill that is left to fill with
  Steps result_;
};

}  // namespace

Addition addition_of(const bath::ShelfItem& item, double kg) {
  Addition addition;
  addition.chemical = item.stock.id;
  addition.name = item.stock.name;
  addition.kg = kg;
  addition.unit = item.stock.liquid ? "L" : "kg";
  addition.amount = item.stock.liquid ? kg / item.stock.kg_per_L : kg;
  addition.cost = item.price_per_kg() * kg;
  return addition;
}

Result<Steps> make_steps(const Tank& tank, const Chemistry& chemistry, TankState state,
                         std::vector<Portioned> amounts, Sequence sequence) {
  auto straight = Walk(tank, chemistry, state).run(amounts, sequence);
  if (!straight || sequence == Sequence::as_given) return straight;
  const Step* stopped = stopped_by_pH(*straight);
  if (!stopped) return straight;
  for (const Portioned& one : amounts) {
    const matter::StockChemical& trim = one.item->stock;
    if (trim.id == stopped->chemical ||
        role_of(chemistry.type(), stopped->predicted.pH, trim) != Role::pH_trim)
      continue;
    for (const double share : {0.5, 1.0}) {
      auto tried =
          Walk(tank, chemistry, state).run(amounts, sequence, Early{trim.id, stopped->chemical, share});
      if (tried && !stopped_by_pH(*tried)) return tried;
    }
  }
  return straight;
}

}  // namespace bathwright::dosing
