#include <algorithm>
#include <cmath>
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

}  // namespace

Result<std::optional<std::vector<double>>> Forecast::steady_state(const bath::TankState& start) const {
  using Levels = std::optional<std::vector<double>>;
  Policy always = prepared_->policy;  // without what does not come again and again
  always.calendar.closed.clear();
  always.seasons.clear();
  std::erase_if(always.decants, [](const Decant& decant) { return decant.on_day > 0; });
  const auto repeated = prepare(prepared_->tank, prepared_->chemistry, always);
  if (!repeated) return repeated.problems();
  const Prepared& p = *repeated->prepared_;
  Block block(p, start, {Draw{}});
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
  const Day before = block.path(0).seen(0);
  if (Outcome passed = pass_round(); !passed) return passed.problems();
  const Day after = block.path(0).seen(0);
  const double lost =
      (after.drag_out_L + after.waste_L - before.drag_out_L - before.waste_L) / p.tank.working_volume.v;
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

namespace {

/// Where a quantity settles under another policy, g/L; unbounded where it does not, or where so little leaves
/// that the salts crowd out the water.
Result<double> settles_at(const Prepared& p, const bath::TankState& start, const Policy& policy,
                          std::size_t quantity) {
  const auto other = Forecast::prepare(p.tank, p.chemistry, policy);
  if (!other) return other.problems();
  const auto levels = other->steady_state(start);
  if (!levels || !*levels) return HUGE_VAL;
  return (**levels)[quantity];
}

Result<std::size_t> position(const Prepared& p, const std::string& quantity) {
  const auto& all = p.chemistry.type().quantities;
  const auto at = std::ranges::find(all, quantity, &bath::Quantity::id);
  if (at == all.end())
    return Problem{Fault::bad_input, quantity, "is no quantity of " + p.chemistry.type().name, "", ""};
  return static_cast<std::size_t>(at - all.begin());
}

}  // namespace

Result<std::optional<double>> Forecast::bleed_to_hold(const bath::TankState& start,
                                                      const std::string& quantity, double g_per_L) const {
  const Prepared& p = *prepared_;
  const auto which = position(p, quantity);
  if (!which) return which.problems();
  const auto at_bleed = [&](double extra) {
    Policy policy = p.policy;
    policy.bleed_L_per_day += extra;
    return settles_at(p, start, policy, *which);
  };
  const auto without = at_bleed(0);
  if (!without) return without.problems();
  if (*without <= g_per_L) return std::optional<double>{};
  // What settles is near p/(D + B): its inverse is nearly a straight line in the bleed B, and secants on it
  // are there in a few runs.
  double low = 0, low_inverse = 1 / *without;
  double high = 0.01 * p.tank.working_volume.v;
  const double wanted = 1 / g_per_L;
  constexpr int most_runs = 30;
  for (int run = 0; run < most_runs; ++run) {
    const auto level = at_bleed(high);
    if (!level) return level.problems();
    const double high_inverse = 1 / *level;
    if (std::abs(high_inverse - wanted) < 1e-6 * wanted) return std::optional(high);
    const double slope = (high_inverse - low_inverse) / (high - low);
    const double next = slope > 0 ? std::max(high + (wanted - high_inverse) / slope, high / 4) : 2 * high;
    low = high, low_inverse = high_inverse;
    high = std::min(next, 16 * high);
  }
  return Problem{Fault::not_converged, quantity, "no bleed was found that holds it", "",
                 "Check the policy: something else may hold or drive this level."};
}

Result<std::optional<double>> Forecast::largest_load(const bath::TankState& start,
                                                     const std::string& quantity, double g_per_L) const {
  const Prepared& p = *prepared_;
  const auto which = position(p, quantity);
  if (!which) return which.problems();
  const auto at_load = [&](double times) {
    Policy policy = p.policy;
    for (Work& work : policy.work) work.per_shift.value *= times;
    policy.area_m2_per_shift.value *= times;
    return settles_at(p, start, policy, *which);
  };
  // How far the inverse level is above that wanted falls as the load rises: p/(D load + B) again.
  const auto spare = [&](double times) -> Result<double> {
    const auto level = at_load(times);
    if (!level) return level.problems();
    return 1 / *level - 1 / g_per_L;
  };
  constexpr double least_load = 1e-3, most_load = 1e3;
  double low = 1, high = 1;
  auto at_low = spare(low);
  if (!at_low) return at_low.problems();
  double low_spare = *at_low, high_spare = low_spare;
  while (low_spare < 0 && low > least_load) {
    high = low, high_spare = low_spare;
    low /= 4;
    const auto next = spare(low);
    if (!next) return next.problems();
    low_spare = *next;
  }
  if (low_spare < 0) return std::optional(0.0);
  while (high_spare >= 0 && high < most_load) {
    low = high, low_spare = high_spare;
    high *= 4;
    const auto next = spare(high);
    if (!next) return next.problems();
    high_spare = *next;
  }
  if (high_spare >= 0) return std::optional<double>{};
  // False position on the inverse of the load, in which the inverse level is nearly a straight line; the end
  // that stays is halved (Illinois).
  constexpr int most_runs = 40;
  double a = 1 / low, fa = low_spare, b = 1 / high, fb = high_spare;
  for (int run = 0; run < most_runs; ++run) {
    const double x = (a * fb - b * fa) / (fb - fa);
    const auto f = spare(1 / x);
    if (!f) return f.problems();
    if (std::abs(*f) * g_per_L < 1e-6) return std::optional(1 / x);
    if ((*f < 0) == (fb < 0))
      b = x, fb = *f, fa /= 2;
    else
      a = x, fa = *f, fb /= 2;
  }
  return Problem{Fault::not_converged, quantity, "no load was found that the bleed can carry", "",
                 "Check the policy: something else may hold or drive this level."};
}

}  // namespace bathwright::forecast
