#include "forecast_work.hpp"

#include <bathwright/sheets/names.hpp>
#include <thread>

#include "work/bleeds_to_hold.hpp"

namespace bathwright::desktop {
namespace {

Levers levers_of(const forecast::Policy& policy) {
  return {policy.bleed_L_per_day, 1, 1, policy.horizon_days};
}

forecast::Policy moved(forecast::Policy policy, const Levers& levers) {
  policy.bleed_L_per_day = levers.bleed_L_per_day;
  policy.drag_out_L_per_m2.value *= levers.drag_out;
  policy.area_m2_per_shift.value *= levers.load;
  for (forecast::Work& work : policy.work) work.per_shift.value *= levers.load;
  policy.horizon_days = levers.horizon_days;
  return policy;
}

/// What of a policy is not as its file has it: " with bleed 120 L a day, drag-out 1.2 times".
std::string changes(const Levers& written, const Levers& levers, const sheets::Units& units) {
  std::string text;
  const auto add = [&](const std::string& words) { text += (text.empty() ? " with " : ", ") + words; };
  if (levers.bleed_L_per_day != written.bleed_L_per_day)
    add("bleed " + units.volume(levers.bleed_L_per_day, 3) + " a day");
  if (levers.drag_out != written.drag_out) add("drag-out " + sheets::figure(levers.drag_out, 3) + " times");
  if (levers.load != written.load) add("work " + sheets::figure(levers.load, 3) + " times");
  return text;
}

}  // namespace

void ForecastWork::answer(const ForecastQuestion& question, const std::stop_token& stop,
                          const std::function<void(Forecasted)>& give) {
  progress_ = 0;
  Forecasted told;
  told.tank_file = question.tank_file;
  told.policy_file = question.policy_file;
  const auto fail = [&](const Problems& problems) {
    told.problems = problems;
    give(told);
  };
  const auto kept = kept_.open(question.session, question.tank_file);
  if (!kept) return fail(kept.problems());
  told.shop = *kept;
  const work::Shop& shop = **kept;
  const auto start = work::starting_state(question.session, shop, question.readings_file.string());
  if (!start) return fail(start.problems());
  const auto read = work::policy_from(*start, question.policy_file.string(), shop.type());
  if (!read) return fail(read.problems());
  told.levers = question.levers.value_or(levers_of(*read));
  const auto policy = moved(*read, told.levers);
  const auto forecast = forecast::Forecast::prepare(shop.tank, shop.chemistry, policy);
  if (!forecast) return fail(forecast.problems());
  auto run = forecast->run(start->state);
  if (!run) return fail(run.problems());
  told.from = question.readings_file.empty() ? start->read.from : "the readings typed";
  told.currency = shop.tank.currency;
  told.notes = forecast->notes();
  for (const Problem& problem : run->ended) told.notes.push_back(problem.text());
  told.written = levers_of(*read);
  told.forecast = *forecast;
  told.run = std::make_shared<const forecast::Run>(*std::move(run));
  told.limits = forecast->limits(*told.run);
  told.summary = forecast->summary(*told.run, told.limits);
  for (const auto& limit : told.limits) told.dates.push_back(sheets::iso_date(policy, limit.day));
  give(told);
  told.bleeds =
      work::bleeds_to_hold(*forecast, start->state, told.limits, [&] { return stop.stop_requested(); });
  if (stop.stop_requested()) return;
  const auto steady = forecast->steady_state(start->state);
  if (steady) told.settled = *steady;
  told.why_unsettled = steady ? "nothing leaves the tank" : steady.problems().front().what;
  told.complete = true;
  give(told);
  progress_ = 0;
  forecast::Forecast::Sampling sampling;
  sampling.samples = question.samples;
  sampling.threads = std::max(1u, std::thread::hardware_concurrency());
  auto bands = forecast->sample(start->state, sampling, [&](double share) {
    progress_ = share;
    return !stop.stop_requested();
  });
  if (!bands) return;
  told.limits = bands->limits;
  told.bands = std::make_shared<const forecast::Bands>(*std::move(bands));
  give(told);
}

sheets::ForecastPage Forecasted::in(const sheets::Units& units) const {
  return {shop->tank,    *forecast, *run,
          bands.get(),   limits,    settled,
          why_unsettled, bleeds,    policy_file.filename().string() + changes(written, levers, units),
          from,          {},        {},
          units};
}

}  // namespace bathwright::desktop
