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

}  // namespace

std::size_t index_of_plan(const dosing::AdditionSheet& sheet, const std::string& kind) {
  const auto found = std::ranges::find(sheet.plans, kind, &dosing::Plan::kind);
  return found == sheet.plans.end() ? 0 : static_cast<std::size_t>(found - sheet.plans.begin());
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
  const auto enough = [&stop] { return stop.stop_requested(); };
  if (question.own) {
    worked.own = checked(*question.own, worked);
    const auto& sheet = worked.own->sheet;
    const bool refuses = sheet && !sheet->refused.empty();  // what is refused goes nowhere
    worked.path =
        path_of(**shop, from, refuses ? moves_of(sheet->plans.front()) : moves_of(*question.own), enough);
    return give(std::move(worked));
  }
  const auto along_the_plan = [&] {
    if (worked.sheet->plans.empty()) return;
    const dosing::Plan& plan = worked.sheet->plans[index_of_plan(*worked.sheet, question.plan)];
    worked.path = path_of(**shop, from, moves_of(plan), enough);
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
