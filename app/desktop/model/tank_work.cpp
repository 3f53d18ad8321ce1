#include "tank_work.hpp"

#include <algorithm>
#include <bathwright/bath/uncertainty.hpp>
#include <fstream>
#include <iterator>

#include "work/planning.hpp"

namespace bathwright::desktop {
namespace {

std::string contents(const std::filesystem::path& file) {
  std::ifstream in(file, std::ios::binary);
  return {std::istreambuf_iterator<char>(in), {}};
}

/// Free ions and headroom along a plan, a few points for each of its steps.
std::vector<PathPoint> path_of(const work::Shop& shop, const bath::TankState& from, const dosing::Plan& plan,
                               const std::stop_token& stop) {
  constexpr int points_a_step = 3;
  std::vector<PathPoint> path;
  bath::TankState state = from;
  double kg = 0;
  const auto add = [&] {
    if (auto view = shop.chemistry.quick_view(state)) path.push_back({kg, *std::move(view)});
  };
  add();
  for (const dosing::Step& step : plan.steps) {
    const matter::StockChemical* stock = stock_of(shop.tank, step.chemical);
    if (!stock) continue;
    const auto brings = shop.chemistry.brings(*stock);
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

const matter::StockChemical* stock_of(const bath::Tank& tank, const std::string& id) {
  const bath::ShelfItem* item = tank.on_shelf(id);
  return item ? &item->stock : matter::StockCatalogue::built_in().find(id);
}

Result<std::shared_ptr<const work::Shop>> TankWork::opened(const Question& question) {
  std::error_code failed;
  const auto time = std::filesystem::last_write_time(question.tank_file, failed);
  if (shop_ && shop_file_ == question.tank_file && time == shop_time_) return shop_;
  auto shop = work::open_shop(question.session, question.tank_file.string());
  if (!shop) return shop.problems();
  shop_ = std::make_shared<const work::Shop>(*std::move(shop));
  shop_file_ = question.tank_file;
  shop_time_ = time;
  planned_.reset();
  return shop_;
}

/// From the readings, or from what the log or the tank file say, to the state and its plans.
Worked TankWork::worked_out(const Question& question, const std::shared_ptr<const work::Shop>& shop) const {
  Worked worked;
  worked.shop = shop;
  worked.tank_file = question.tank_file;
  worked.readings_file = question.readings_file;
  const auto failed = [&](const Problems& problems) {
    worked.problems = problems;
    return worked;
  };
  bath::TankState state;
  if (question.readings_file.empty()) {
    const auto start = work::starting_state(question.session, *shop, "");
    if (!start) return failed(start.problems());
    worked.read = start->read;
    state = start->state;
  } else {
    auto analysed = work::analyse(question.session, *shop, question.readings_file.string());
    if (!analysed) return failed(analysed.problems());
    state = analysed->analysis.state;
    worked.analysed = *std::move(analysed);
  }
  auto view = bath::view_with_uncertainty(shop->chemistry, state);
  if (!view) return failed(view.problems());
  worked.now = *std::move(view);
  if (!worked.analysed) return worked;
  auto sheet = dosing::plan_additions(shop->tank, shop->chemistry, state,
                                      work::request_for(worked.analysed->analysis, 0));
  if (!sheet) return failed(sheet.problems());
  worked.sheet = *std::move(sheet);
  return worked;
}

void TankWork::answer(const Question& question, const std::stop_token& stop,
                      const std::function<void(Worked)>& give) {
  const auto shop = opened(question);
  if (!shop) {
    Worked worked;
    worked.tank_file = question.tank_file;
    worked.problems = shop.problems();
    return give(std::move(worked));
  }
  const std::string key = question.readings_file.string() + '\n' + contents(question.readings_file) + '\n' +
                          std::to_string(question.log_state);
  if (!planned_ || planned_for_ != key) {
    planned_ = worked_out(question, *shop);
    planned_for_ = key;
    sampled_ = false;
  }
  Worked worked = *planned_;
  if (!worked.analysed || !worked.sheet) return give(std::move(worked));
  const bath::TankState& from = worked.analysed->analysis.state;
  if (!question.edited.empty()) {
    std::vector<dosing::Wanted> wanted;
    for (const auto& [id, kg] : question.edited)
      if (const matter::StockChemical* stock = stock_of((*shop)->tank, id); stock && kg > 0)
        wanted.push_back({*stock, kg});
    auto own = dosing::check_plan((*shop)->tank, (*shop)->chemistry, from, wanted);
    if (own)
      worked.own = *std::move(own);
    else
      worked.problems = own.problems();
  }
  const auto& sheet = worked.own ? worked.own : worked.sheet;
  if (!sheet->plans.empty()) {
    const auto plan =
        worked.own ? 0
                   : std::min<std::size_t>(static_cast<std::size_t>(question.plan), sheet->plans.size() - 1);
    worked.path = path_of(**shop, from, sheet->plans[plan], stop);
  }
  give(worked);
  if (sampled_ || worked.own || stop.stop_requested()) return;
  auto sampled =
      dosing::plan_additions((*shop)->tank, (*shop)->chemistry, from,
                             work::request_for(worked.analysed->analysis, dosing::Sampling{}.samples));
  if (!sampled) return;
  sampled_ = true;
  planned_->sheet = worked.sheet = *std::move(sampled);
  give(std::move(worked));
}

}  // namespace bathwright::desktop
