#include "forecast_work.hpp"

#include <thread>

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

}  // namespace

void ForecastWork::answer(const ForecastQuestion& question, const std::stop_token& stop,
                          const std::function<void(Forecasted)>& give) {
  Forecasted told;
  told.tank_file = question.tank_file;
  told.policy_file = question.policy_file;
  const auto fail = [&](const Problems& problems) {
    told.problems = problems;
    give(told);
  };
  if (!shop_ || shop_file_ != question.tank_file) {
    auto shop = work::open_shop(question.session, question.tank_file.string());
    if (!shop) return fail(shop.problems());
    shop_ = std::make_shared<const work::Shop>(*std::move(shop));
    shop_file_ = question.tank_file;
  }
  told.shop = shop_;
  const work::Shop& shop = *shop_;
  const auto start = work::starting_state(question.session, shop, question.readings_file.string());
  if (!start) return fail(start.problems());
  const auto read = work::policy_from(*start, question.policy_file.string(), shop.type());
  if (!read) return fail(read.problems());
  told.levers = question.levers.value_or(levers_of(*read));
  const auto policy = moved(*read, told.levers);
  const auto forecast = forecast::Forecast::prepare(shop.tank, shop.chemistry, policy);
  if (!forecast) return fail(forecast.problems());
  const auto run = forecast->run(start->state);
  if (!run) return fail(run.problems());
  told.from = question.readings_file.empty() ? start->read.from : "the readings typed";
  told.currency = shop.tank.currency;
  told.notes = forecast->notes();
  for (const Problem& problem : run->ended) told.notes.push_back(problem.text());
  const auto show = [&](const forecast::Bands* bands) {
    told.limits = bands ? bands->limits : forecast->limits(*run);
    told.summary = forecast->summary(*run, forecast->limits(*run));
    told.dates.clear();
    for (const auto& limit : told.limits) told.dates.push_back(sheets::iso_date(policy, limit.day));
    sheets::ForecastPage page{shop.tank, *forecast,   *run,
                              bands,     told.limits, std::nullopt,
                              "",        told.bleeds, question.policy_file.filename().string(),
                              told.from, {},          {}};
    told.page = sheets::forecast_charts(page);
    told.sampled = bands != nullptr;
    give(told);
  };
  show(nullptr);
  for (const auto& limit : told.limits) {
    if (stop.stop_requested()) return;
    if (limit.quantity.empty() || !limit.from_below || limit.share == 0 ||
        limit.cause != forecast::Cause::by_product)
      continue;
    const auto bleed = forecast->bleed_to_hold(start->state, limit.quantity, limit.g_per_L);
    if (bleed && *bleed)
      told.bleeds.push_back({shop.type().quantity(limit.quantity)->label, **bleed, std::nullopt, {}, {}});
  }
  give(told);
  progress_ = 0;
  forecast::Forecast::Sampling sampling;
  sampling.samples = question.samples;
  sampling.threads = std::max(1u, std::thread::hardware_concurrency());
  const auto bands = forecast->sample(start->state, sampling, [&](double share) {
    progress_ = share;
    return !stop.stop_requested();
  });
  if (bands) show(&*bands);
}

}  // namespace bathwright::desktop
