#include <algorithm>
#include <bathwright/units/show.hpp>
#include <cmath>

#include "limits.hpp"

namespace bathwright::forecast {
namespace {

using units::significant;

std::string at(units::Celsius t) { return " at " + significant(t.v, 3) + " degC"; }

}  // namespace

std::vector<Limit> limits_of(const Prepared& p) {
  const bath::BathType& type = p.chemistry.type();
  std::vector<Limit> limits;
  for (std::size_t q = 0; q < type.quantities.size(); ++q) {
    const bath::Quantity& quantity = type.quantities[q];
    const bath::Aim* aim = p.tank.aim(quantity.id);
    const auto window = std::ranges::find(type.windows, quantity.id, &bath::Window::subject);
    const auto own = std::ranges::find(p.policy.limits, quantity.id, &OwnLimit::quantity);
    const bool put_back = std::ranges::any_of(
        p.policy.replenishment, [&](const Replenishment& r) { return r.quantity == quantity.id; });
    double low = bath::not_given, high = bath::not_given;
    if (aim)
      low = aim->low, high = aim->high;
    else if (window != type.windows.end())
      low = window->low, high = window->high;
    if (own != p.policy.limits.end()) high = own->high_g_per_L;
    const auto add = [&](double value, bool above) {
      if (std::isnan(value)) return;
      limits.push_back({quantity.label + (above ? " above " : " below ") + significant(value) + " g/L",
                        put_back ? Cause::window : Cause::by_product, q, value, above, false});
    };
    add(low, false);
    add(high, true);
  }
  for (std::size_t s = 0; s < p.watched.size(); ++s) {
    const auto& solid = p.chemistry.working().system().solids()[p.watched[s]];
    if (solid.slow) continue;
    limits.push_back(
        {solid.name + at(p.chemistry.working_temperature()), Cause::solid_at_work, s, 0, false, true});
    limits.push_back(
        {solid.name + at(p.chemistry.idle_temperature()), Cause::solid_at_rest, s, 0, false, true});
  }
  return limits;
}

double value_of(const Limit& limit, const Day& day) {
  if (!limit.is_solid) return day.quantity_g_per_L[limit.index];
  return limit.cause == Cause::solid_at_work ? day.working_log10[limit.index] : day.idle_log10[limit.index];
}

std::optional<double> day_met(const Limit& limit, const std::vector<Day>& days) {
  double before = bath::not_given;
  for (const Day& day : days) {
    const double over = (value_of(limit, day) - limit.value) * (limit.above ? 1 : -1);  // positive is met
    // A level held at its limit is at it, not over it.
    const double rounding = 1e-9 * std::abs(limit.value);
    if (over > rounding) {
      if (day.day == 0 || std::isnan(before)) return day.day;
      return day.day - over / (over - before);
    }
    before = over;
  }
  return std::nullopt;
}

LimitMet as_met(const Prepared& p, const Limit& limit, std::optional<double> day) {
  const std::string quantity = limit.is_solid ? "" : p.chemistry.type().quantities[limit.index].id;
  return {limit.name, limit.cause, quantity, limit.value, limit.above, day, day, day, day, day ? 1.0 : 0.0};
}

std::vector<LimitMet> Forecast::limits(const Run& run) const {
  std::vector<LimitMet> met;
  for (const Limit& limit : limits_of(*prepared_))
    met.push_back(as_met(*prepared_, limit, day_met(limit, run.days)));
  return met;
}

}  // namespace bathwright::forecast
