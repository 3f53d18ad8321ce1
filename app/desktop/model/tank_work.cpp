#include "tank_work.hpp"

#include <algorithm>
#include <bathwright/bath/taken_out.hpp>
#include <bathwright/bath/uncertainty.hpp>
#include <cmath>
#include <fstream>
#include <iterator>

#include "work/planning.hpp"

namespace bathwright::desktop {
namespace {

std::string contents(const std::filesystem::path& file) {
  std::ifstream in(file, std::ios::binary);
  return {std::istreambuf_iterator<char>(in), {}};
}

/// What happens to a tank at once.
struct Move {
  double take_out_L = 0;
  std::string chemical;
  double kg = 0;
};

/// By its additions: its steps carry some of the water with what is dissolved in it.
std::vector<Move> moves_of(const dosing::Plan& plan) {
  std::vector<Move> moves;
  if (plan.decant_L > 0) moves.push_back({plan.decant_L, {}, 0});
  for (const dosing::Addition& addition : plan.additions)
    moves.push_back({0, addition.chemical, addition.kg});
  return moves;
}

std::vector<Move> moves_of(const OwnList& list) {
  std::vector<Move> moves;
  if (list.take_out_L) moves.push_back({*list.take_out_L, {}, 0});
  for (const auto& [id, kg] : list.kg) moves.push_back({0, id, kg});
  return moves;
}

/// Free ions and headroom on the way: where it begins and ends, and `points` within.
std::vector<PathPoint> path_of(const work::Shop& shop, const bath::TankState& from,
                               const std::vector<Move>& moves, const std::stop_token& stop) {
  constexpr double points = 20;
  double all_kg = 0, kg = 0;
  for (const Move& move : moves) all_kg += move.kg;
  std::vector<PathPoint> path;
  bath::TankState state = from;
  const auto add = [&] {
    if (auto view = shop.chemistry.quick_view(state)) path.push_back({kg, *std::move(view)});
  };
  add();
  for (const Move& move : moves) {
    if (move.take_out_L > 0) {
      const double share = std::min(1.0, move.take_out_L / shop.chemistry.volume_L(state));
      state = bath::without(std::move(state), share);
      add();
    }
    const matter::StockChemical* stock = move.kg > 0 ? stock_of(shop.tank, move.chemical) : nullptr;
    const auto brings = stock ? shop.chemistry.brings(*stock) : Result<bath::Brings>(Problems{});
    if (!brings) continue;
    const int steps = std::max(1, static_cast<int>(std::lround(points * move.kg / all_kg)));
    for (int i = 0; i < steps && !stop.stop_requested(); ++i) {
      state = bath::Chemistry::after(std::move(state), *brings, move.kg / steps);
      kg += move.kg / steps;
      add();
    }
  }
  return path;
}

}  // namespace

std::size_t index_of_plan(const dosing::AdditionSheet& sheet, const std::string& kind) {
  const auto found = std::ranges::find(sheet.plans, kind, &dosing::Plan::kind);
  return found == sheet.plans.end() ? 0 : static_cast<std::size_t>(found - sheet.plans.begin());
}

const matter::StockChemical* stock_of(const bath::Tank& tank, const std::string& id) {
  const bath::ShelfItem* item = tank.on_shelf(id);
  return item ? &item->stock : matter::StockCatalogue::built_in().find(id);
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

CheckedList TankWork::checked(const OwnList& list, const Worked& worked) {
  std::vector<dosing::Wanted> wanted;
  for (const auto& [id, kg] : list.kg)
    if (const matter::StockChemical* stock = stock_of(worked.shop->tank, id); stock && kg > 0)
      wanted.push_back({*stock, kg});
  auto sheet = dosing::check_plan(worked.shop->tank, worked.shop->chemistry, worked.analysed->analysis.state,
                                  wanted, list.take_out_L.value_or(0));
  if (!sheet) return {list, std::nullopt, sheet.problems()};
  return {list, *std::move(sheet), {}};
}

void TankWork::answer(const Question& question, const std::stop_token& stop,
                      const std::function<void(Worked)>& give) {
  const auto shop = kept_.open(question.session, question.tank_file);
  if (!shop) {
    Worked worked;
    worked.tank_file = question.tank_file;
    worked.problems = shop.problems();
    return give(std::move(worked));
  }
  const std::string readings = contents(question.readings_file);
  const std::string key =
      question.readings_file.string() + '\n' + readings + '\n' + std::to_string(question.log_state);
  if (!planned_ || planned_->shop != *shop || planned_for_ != key) {
    planned_ = worked_out(question, *shop);
    planned_->readings = readings;
    planned_for_ = key;
    sampled_ = false;
  }
  Worked worked = *planned_;
  if (!worked.analysed || !worked.sheet) return give(std::move(worked));
  const bath::TankState& from = worked.analysed->analysis.state;
  if (question.own) {
    worked.path = path_of(**shop, from, moves_of(*question.own), stop);
    give(worked);
    if (stop.stop_requested()) return;
    planned_->own = worked.own = checked(*question.own, worked);
    const auto& sheet = worked.own->sheet;
    if (sheet && !sheet->refused.empty())  // what is refused goes nowhere
      worked.path = path_of(**shop, from, moves_of(sheet->plans.front()), stop);
    return give(std::move(worked));
  }
  planned_->own = worked.own = std::nullopt;
  const auto along_the_plan = [&] {
    if (worked.sheet->plans.empty()) return;
    const dosing::Plan& plan = worked.sheet->plans[index_of_plan(*worked.sheet, question.plan)];
    worked.path = path_of(**shop, from, moves_of(plan), stop);
  };
  along_the_plan();
  give(worked);
  if (sampled_ || stop.stop_requested()) return;
  auto sampled =
      dosing::plan_additions((*shop)->tank, (*shop)->chemistry, from,
                             work::request_for(worked.analysed->analysis, dosing::Sampling{}.samples));
  if (!sampled) return;
  sampled_ = true;
  planned_->sheet = worked.sheet = *std::move(sampled);
  along_the_plan();  // which may be another: a more certain one can stand before it now
  give(std::move(worked));
}

}  // namespace bathwright::desktop
