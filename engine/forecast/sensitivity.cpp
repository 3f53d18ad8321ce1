#include <algorithm>
#include <cmath>

#include "block.hpp"
#include "inputs.hpp"
#include "limits.hpp"

namespace bathwright::forecast {

Result<std::vector<Sensitivity>> Forecast::sensitivity(const bath::TankState& start,
                                                       double u_level_rel) const {
  const Prepared& p = *prepared_;
  const std::vector<Input> inputs = uncertain_inputs(p, u_level_rel);
  std::vector<Draw> draws = {as_it_stands(p)};  // then lower and higher of each input
  for (const Input& input : inputs)
    for (const double sign : {-1.0, 1.0}) {
      draws.push_back(draws.front());
      input.in(draws.back()) = std::exp(sign * input.u_rel);  // lognormal, as the samples
    }
  std::vector<std::vector<Day>> days(draws.size());
  Block block(p, start, draws);
  block.run(p.policy.horizon_days, [&](std::size_t path, Day day) { days[path].push_back(std::move(day)); });
  if (days.front().empty()) return block.path(0).why_ended();
  std::vector<Sensitivity> all;
  for (const Limit& limit : limits_of(p)) {
    if (!day_met(limit, days.front())) continue;
    Sensitivity of_limit{limit.name, {}};
    for (std::size_t i = 0; i < inputs.size(); ++i) {
      Influence one{inputs[i].name, inputs[i].u_rel, day_met(limit, days[1 + 2 * i]),
                    day_met(limit, days[2 + 2 * i]), 0};
      const double horizon = p.policy.horizon_days;
      one.days = std::abs(one.day_higher.value_or(horizon) - one.day_lower.value_or(horizon)) / 2;
      constexpr double least_days = 0.05;
      if (one.days >= least_days) of_limit.influences.push_back(std::move(one));
    }
    std::ranges::stable_sort(of_limit.influences, std::greater{}, &Influence::days);
    all.push_back(std::move(of_limit));
  }
  return all;
}

}  // namespace bathwright::forecast
