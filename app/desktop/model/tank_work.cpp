#include "tank_work.hpp"

#include <algorithm>
#include <fstream>
#include <iterator>

namespace bathwright::desktop {
namespace {

std::string contents(const std::filesystem::path& file) {
  std::ifstream in(file, std::ios::binary);
  return {std::istreambuf_iterator<char>(in), {}};
}

/// Free ions and headroom along a plan, a few points for each of its steps.
std::vector<PathPoint> path_of(const command::Shop& shop, const bath::TankState& from,
                               const dosing::Plan& plan, const std::stop_token& stop) {
  constexpr int points_a_step = 3;
  std::vector<PathPoint> path;
  bath::TankState state = from;
  double kg = 0;
  const auto add = [&] {
    if (auto view = shop.chemistry.quick_view(state)) path.push_back({kg, *std::move(view)});
  };
  add();
  for (const dosing::Step& step : plan.steps) {
    const bath::ShelfItem* item = shop.tank.on_shelf(step.chemical);
    if (!item) continue;
    const auto brings = shop.chemistry.brings(item->stock);
    if (!brings) continue;
    for (int i = 0; i < points_a_step && !stop.stop_requested(); ++i) {
      state = bath::Chemistry::after(std::move(state), *brings, step.kg / points_a_step);
      kg += step.kg / points_a_step;
      add();
    }
  }
  return path;
}

}  // namespace

Result<std::shared_ptr<const command::Shop>> TankWork::opened(const Question& question) {
  std::error_code failed;
  const auto time = std::filesystem::last_write_time(question.tank_file, failed);
  if (shop_ && shop_file_ == question.tank_file && time == shop_time_) return shop_;
  auto shop = command::open_shop(question.context, question.tank_file.string());
  if (!shop) return shop.problems();
  shop_ = std::make_shared<const command::Shop>(*std::move(shop));
  shop_file_ = question.tank_file;
  shop_time_ = time;
  planned_.reset();
  return shop_;
}

Worked TankWork::answer(const Question& question, const std::stop_token& stop) {
  Worked worked;
  auto shop = opened(question);
  if (!shop) {
    worked.problems = shop.problems();
    return worked;
  }
  const std::string key = question.readings_file.string() + '\n' + contents(question.readings_file);
  if (planned_ && planned_for_ == key) {
    worked = *planned_;
  } else {
    worked.shop = *shop;
    bath::TankState state;
    if (question.readings_file.empty()) {
      const auto start = command::starting_state(question.context, **shop, "");
      if (!start) {
        worked.problems = start.problems();
        return worked;
      }
      worked.read = start->read;
      state = start->state;
    } else {
      auto analysed = command::analyse(question.context, **shop, question.readings_file.string());
      if (!analysed) {
        worked.problems = analysed.problems();
        return worked;
      }
      state = analysed->analysis.state;
      worked.analysed = *std::move(analysed);
    }
    auto view = (*shop)->chemistry.view(state);
    if (!view) {
      worked.problems = view.problems();
      return worked;
    }
    worked.now = *std::move(view);
    if (stop.stop_requested()) return worked;
    if (worked.analysed) {
      dosing::Request request;
      for (const auto& level : worked.analysed->analysis.results)
        request.uncertainty[level.quantity] = level.standard_uncertainty.v;
      auto sheet = dosing::plan_additions((*shop)->tank, (*shop)->chemistry, state, request);
      if (sheet)
        worked.sheet = *std::move(sheet);
      else
        worked.problems = sheet.problems();
    }
    planned_for_ = key;
    planned_ = worked;
  }
  if (!worked.analysed || stop.stop_requested()) return worked;
  const bath::TankState& from = worked.analysed->analysis.state;
  if (!question.edited.empty()) {
    std::vector<dosing::Wanted> wanted;
    for (const auto& [id, kg] : question.edited)
      if (const bath::ShelfItem* item = (*shop)->tank.on_shelf(id); item && kg > 0)
        wanted.push_back({item->stock, kg});
    auto own = dosing::check_plan((*shop)->tank, (*shop)->chemistry, from, wanted);
    if (own)
      worked.own = *std::move(own);
    else
      worked.problems = own.problems();
  }
  const auto& sheet = worked.own ? worked.own : worked.sheet;
  if (sheet && !sheet->plans.empty()) {
    const auto plan =
        worked.own ? 0
                   : std::min<std::size_t>(static_cast<std::size_t>(question.plan), sheet->plans.size() - 1);
    worked.path = path_of(**shop, from, sheet->plans[plan], stop);
  }
  return worked;
}

}  // namespace bathwright::desktop
