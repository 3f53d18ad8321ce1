#include <algorithm>
#include <cmath>
#include <functional>
#include <numeric>

#include "block.hpp"

namespace bathwright::forecast {
namespace {

constexpr int days_a_week = 7;

/// Whole weeks after which the calendar and what comes every so many days or shifts begin again, days.
int round_of(const Policy& policy) {
  int round = days_a_week;
  const auto fit = [&](int every) {
    constexpr int longest = 364;
    if (const int both = std::lcm(round, every); both <= longest) round = both;
  };
  for (const Decant& decant : policy.decants)
    if (decant.on_day == 0) fit(decant.every_days);
  for (const FreezeOut& freeze : policy.freeze_outs) fit(freeze.every_days);
  for (const Replenishment& rule : policy.replenishment) {
    fit(rule.every_days);
    if (rule.every_shifts == 0) continue;
    const int shifts = round / days_a_week * policy.calendar.days_per_week * policy.calendar.shifts_per_day;
    fit(round * (rule.every_shifts / std::gcd(shifts, rule.every_shifts)));
  }
  for (const Rinse& rinse : policy.rinses)
    if (rinse.dump_every_days > 0) fit(rinse.dump_every_days);
  return round;
}

/// Where each amount would end if what a round moves it by kept shrinking at the pace of the last two
/// (Aitken); an amount that does not shrink so stays.
std::vector<double> ahead(const std::vector<double>& a, const std::vector<double>& b,
                          const std::vector<double>& c) {
  std::vector<double> end = c;
  for (std::size_t i = 0; i < c.size(); ++i) {
    const double before = b[i] - a[i], now = c[i] - b[i];
    if (std::abs(now) <= 1e-13 * std::abs(c[i]) || before == 0) continue;
    const double pace = now / before;
    if (pace > 0 && pace < 1) end[i] += now * pace / (1 - pace);
    if (c[i] >= 0) end[i] = std::max(0.0, end[i]);
  }
  return end;
}

using Levels = std::optional<std::vector<double>>;

/// Litres that drag-out, bleed and freezing out took by now: what sets how fast a tank settles.
double lost_L(const Prepared& p, const Day& day) {
  double litres = day.drag_out_L + day.waste_L;
  for (const FreezeOut& freeze : p.policy.freeze_outs)
    litres += static_cast<double>(day.day / freeze.every_days) * freeze.litres;
  return litres;
}

/// A policy that goes on for ever, without what does not come again and again; its bleed and its load can be
/// changed.
class Endless {
 public:
  static Result<Endless> of(const Prepared& p, const bath::TankState& start) {
    Policy policy = p.policy;
    policy.calendar.closed.clear();
    policy.seasons.clear();
    std::erase_if(policy.decants, [](const Decant& decant) { return decant.on_day > 0; });
    auto prepared = prepare(p.tank, p.chemistry, policy);
    if (!prepared) return prepared.problems();
    return Endless(*std::move(prepared), start);
  }

  void bleed_more(double L_per_day) { p_->policy.bleed_L_per_day = stated_.bleed_L_per_day + L_per_day; }
  void load(double times) {
    for (std::size_t w = 0; w < stated_.work.size(); ++w)
      p_->policy.work[w].per_shift.value = times * stated_.work[w].per_shift.value;
    p_->policy.area_m2_per_shift.value = times * stated_.area_m2_per_shift.value;
  }

  /// As Forecast::steady_state.
  [[nodiscard]] Result<Levels> levels() const;

  /// Where one quantity settles, g/L; unbounded where it does not, or where so little leaves that the salts
  /// crowd out the water.
  [[nodiscard]] double level(std::size_t quantity) const {
    const auto all = levels();
    return all && *all ? (**all)[quantity] : HUGE_VAL;
  }

 private:
  Endless(std::shared_ptr<Prepared> p, const bath::TankState& start)
      : p_(std::move(p)), stated_(p_->policy), start_(start) {}

  std::shared_ptr<Prepared> p_;
  Policy stated_;
  bath::TankState start_;
};

Result<Levels> Endless::levels() const {
  const Prepared& p = *p_;
  Block block(p, start_, {Draw{}});
  const int round = round_of(p.policy);
  int day = 0;
  const auto pass = [&](int days) -> Outcome {
    block.pass(day, days);
    day += days;
    if (block.path(0).ended()) return block.path(0).why_ended();
    return Done{};
  };
  const auto pass_round = [&] { return pass(round); };
  constexpr int first_rounds = 3;  // what is brought to its aim is there, what runs over does so
  for (int r = 0; r < first_rounds; ++r)
    if (Outcome passed = pass_round(); !passed) return passed.problems();
  const Day before = block.path(0).seen(day);
  if (Outcome passed = pass_round(); !passed) return passed.problems();
  const Day after = block.path(0).seen(day);
  const double lost = (lost_L(p, after) - lost_L(p, before)) / p.tank.working_volume.v;
  constexpr double longest_days = 200'000, time_constants = 25;
  if (!(lost / round * longest_days > time_constants)) return Levels{};

  constexpr int most_jumps = 100;
  constexpr double settled = 1e-10;  // of an amount, as far as it still has to go
  bool rests = false;
  for (int jump = 0; jump < most_jumps && !rests; ++jump) {
    const auto a = block.path(0).amounts();
    if (Outcome passed = pass_round(); !passed) return passed.problems();
    const auto b = block.path(0).amounts();
    if (Outcome passed = pass_round(); !passed) return passed.problems();
    const auto c = block.path(0).amounts();
    rests = true;
    for (std::size_t i = 0; i < c.size(); ++i)
      rests &= std::abs(c[i] - b[i]) <= settled * -std::expm1(-lost) * std::abs(c[i]);
    if (rests) break;
    if (Outcome placed = block.place(ahead(a, b, c)); !placed) return placed.problems();
    if (Outcome passed = pass_round(); !passed) return passed.problems();
  }
  if (!rests)  // the long way
    for (int r = 0; r < static_cast<int>(time_constants / lost) + 1; ++r)
      if (Outcome passed = pass_round(); !passed) return passed.problems();

  const auto& quantities = p.chemistry.type().quantities;
  std::vector<double> levels(quantities.size(), 0);
  for (int i = 0; i < round; ++i) {
    if (Outcome passed = pass(1); !passed) return passed.problems();
    const auto& state = block.path(0).state();
    for (std::size_t q = 0; q < quantities.size(); ++q)
      levels[q] += p.chemistry.quantity_g_per_L(quantities[q], state) / round;
  }
  return Levels(std::move(levels));
}

Result<std::size_t> position(const Prepared& p, const std::string& quantity) {
  const auto& all = p.chemistry.type().quantities;
  const auto at = std::ranges::find(all, quantity, &bath::Quantity::id);
  if (at == all.end())
    return Problem{Fault::bad_input, quantity, "is no quantity of " + p.chemistry.type().name, "", ""};
  return static_cast<std::size_t>(at - all.begin());
}

struct Point {
  double x, spare;
};

/// Where a rising function is 0 between a point below it and one not below: false position; an end that stays
/// twice is halved (Illinois). `met` is near enough to 0; nothing where the function jumps over it.
std::optional<double> crossing(const std::function<double(double)>& spare, Point below, Point above,
                               double met) {
  constexpr int most_runs = 60;
  int stayed = 0;  // above 0: the upper end, times in a row
  for (int run = 0; run < most_runs; ++run) {
    const double x = (below.x * above.spare - above.x * below.spare) / (above.spare - below.spare);
    const double now = spare(x);
    if (std::abs(now) < met) return x;
    if (now < 0) {
      below = {x, now};
      stayed = std::max(stayed, 0) + 1;
      if (stayed > 1) above.spare /= 2;
    } else {
      above = {x, now};
      stayed = std::min(stayed, 0) - 1;
      if (stayed < -1) below.spare /= 2;
    }
  }
  return std::nullopt;
}

constexpr double step_times = 4;  // from one point tried to the next
constexpr double near_enough = 1e-6;

}  // namespace

Result<Levels> Forecast::steady_state(const bath::TankState& start) const {
  const auto endless = Endless::of(*prepared_, start);
  if (!endless) return endless.problems();
  return endless->levels();
}

// What settles is near p load/(D load + B): its inverse is nearly a straight line in the bleed B and in
// 1/load, and rises with both.

Result<std::optional<double>> Forecast::bleed_to_hold(const bath::TankState& start,
                                                      const std::string& quantity, double g_per_L) const {
  const Prepared& p = *prepared_;
  const auto which = position(p, quantity);
  if (!which) return which.problems();
  auto endless = Endless::of(p, start);
  if (!endless) return endless.problems();
  Endless tried = *std::move(endless);
  const auto spare = [&](double bleed) {
    tried.bleed_more(bleed);
    return std::min(1 / tried.level(*which), 1e3 / g_per_L) - 1 / g_per_L;
  };
  Point below{0, spare(0)};
  if (below.spare >= 0) return std::optional<double>{};
  const double tank_L = p.tank.working_volume.v;
  constexpr double first_share = 0.01, most_tanks = 100;
  Point above{first_share * tank_L, 0};
  for (; (above.spare = spare(above.x)) < 0; above.x *= step_times) {
    if (above.x > most_tanks * tank_L)
      return Problem{Fault::not_converged, quantity, "no bleed holds it", "",
                     "Something that grows with the bleed brings it: look at what fills the tank up."};
    below = above;
  }
  const auto bleed = crossing(spare, below, above, near_enough / g_per_L);
  if (bleed) return bleed;
  return Problem{Fault::not_converged, quantity, "the level jumps over it as the bleed grows", "",
                 "Something is added or taken only beyond a level: look at the policy's rules."};
}

Result<std::optional<double>> Forecast::largest_load(const bath::TankState& start,
                                                     const std::string& quantity, double g_per_L) const {
  const Prepared& p = *prepared_;
  const auto which = position(p, quantity);
  if (!which) return which.problems();
  auto endless = Endless::of(p, start);
  if (!endless) return endless.problems();
  Endless tried = *std::move(endless);
  const auto spare = [&](double inverse_load) {
    tried.load(1 / inverse_load);
    return std::min(1 / tried.level(*which), 1e3 / g_per_L) - 1 / g_per_L;
  };
  constexpr double most = 1e3;
  Point below{1, spare(1)}, above = below;
  while (below.spare >= 0) {
    if (below.x < 1 / most) return std::optional<double>{};
    above = below;
    below.x /= step_times;
    below.spare = spare(below.x);
  }
  while (above.spare < 0) {
    if (above.x > most) return std::optional(0.0);
    below = above;
    above.x *= step_times;
    above.spare = spare(above.x);
  }
  if (const auto inverse = crossing(spare, below, above, near_enough / g_per_L))
    return std::optional(1 / *inverse);
  return Problem{Fault::not_converged, quantity, "the level jumps over it as the load grows", "",
                 "Something is added or taken only beyond a level: look at the policy's rules."};
}

}  // namespace bathwright::forecast
