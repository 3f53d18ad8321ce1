#include "desk.hpp"

#include <algorithm>
#include <bathwright/sheets/names.hpp>
#include <bathwright/shopfiles/tank_file.hpp>
#include <bathwright/units/show.hpp>
#include <ctime>
#include <fstream>

#include "user_folders.hpp"
#include "view_json.hpp"
#include "views.hpp"

namespace bathwright::desktop {
namespace {

/// Now, as a readings file writes it.
std::string local_now() {
  const std::time_t now = std::time(nullptr);
  std::tm parts{};
  localtime_r(&now, &parts);
  std::array<char, 32> text{};
  return std::strftime(text.data(), text.size(), "%Y-%m-%dT%H:%M:%S", &parts) > 0 ? text.data() : "";
}

/// The first word of a tank's name, "N-07", and the rest.
std::pair<std::string, std::string> split(const std::string& name) {
  const std::size_t space = name.find(' ');
  return {name.substr(0, space), space == std::string::npos ? "" : name.substr(space + 1)};
}

bool nothing_typed(const Draft& draft) {
  return std::ranges::all_of(draft.rows, [](const DraftRow& row) { return row.is_empty(); });
}

}  // namespace

Desk::Desk(command::Context context, std::filesystem::path folder, std::function<void()> wake)
    : context_(std::move(context)),
      folder_(std::move(folder)),
      job_(
          [work = std::make_shared<TankWork>()](const Question& question, const std::stop_token& stop) {
            return work->answer(question, stop);
          },
          std::move(wake)) {
  find_tanks();
  show_line();
  if (!tanks_.empty()) open(0);
  show();
}

void Desk::find_tanks() {
  std::error_code failed;
  for (const auto& entry : std::filesystem::directory_iterator(folder_, failed)) {
    if (entry.path().extension() != ".toml") continue;
    if (auto tank = shopfiles::read_tank(entry.path().string(), matter::StockCatalogue::built_in()))
      tanks_.push_back({entry.path(), *std::move(tank)});
  }
  std::ranges::sort(tanks_, {}, [](const TankFile& file) { return file.tank.name; });
  if (tanks_.empty())
    view_.empty = "No tank is in " + folder_.string() +
                  ". Start with the folder of a shop: bathwright FOLDER; the demonstration shop is in baths.";
}

/// Each tank as its last analysis in the log left it.
void Desk::show_line() {
  view_.line.tanks.clear();
  for (const TankFile& file : tanks_) {
    TankOnLine shown;
    std::tie(shown.name, shown.kind) = split(file.tank.name);
    shown.vessel = {1, file.tank.freeboard.v / file.tank.working_volume.v, false};
    shown.word = "not analysed";
    const auto last = command::last_analysis(context_, file.tank.name);
    if (last && *last) {
      shown.vessel.level = (*last)->volume.v / file.tank.working_volume.v;
      shown.vessel.level_known = true;
      shown.word = "in window";
      for (const auto& level : (*last)->document.value("levels", command::Json::array())) {
        const std::string state = level.value("state", "");
        if (state == "stop") {
          shown.state = charts::State::stop;
          shown.word = "stop: " + sheets::pretty(level.value("quantity", ""));
          break;
        }
        if (state.ends_with("window") && state != "in window") {
          shown.state = charts::State::act;
          shown.word = "add this shift";
        }
      }
    }
    view_.line.tanks.push_back(std::move(shown));
    view_.line.shop = file.tank.shop;
  }
  view_.line.selected = open_;
}

std::filesystem::path Desk::draft_file() const {
  return command::state_folder() / "typing" /
         tanks_[static_cast<std::size_t>(open_)].path.stem().concat(".json");
}

void Desk::open(int tank) {
  if (tank < 0 || tank >= static_cast<int>(tanks_.size())) return;
  open_ = tank;
  view_.line.selected = tank;
  worked_.reset();
  draft_.reset();
  edited_.clear();
  plan_ = 0;
  fault_.clear();
  changed_ = true;
  ask();
}

void Desk::handle(const Intent& intent) {
  changed_ = true;
  std::visit(
      [this](const auto& asked) {
        using Asked = std::decay_t<decltype(asked)>;
        if constexpr (std::is_same_v<Asked, OpenTank>) {
          if (asked.tank != open_) open(asked.tank);
        } else if constexpr (std::is_same_v<Asked, TypeReading>) {
          if (draft_) draft_->type(asked), draft_changed();
        } else if constexpr (std::is_same_v<Asked, ChooseMethod>) {
          if (draft_) draft_->choose(asked), draft_changed();
        } else if constexpr (std::is_same_v<Asked, UndoTyping>) {
          if (draft_) draft_->undo(), draft_changed();
        } else if constexpr (std::is_same_v<Asked, RedoTyping>) {
          if (draft_) draft_->redo(), draft_changed();
        } else if constexpr (std::is_same_v<Asked, ChoosePlan>) {
          plan_ = asked.plan;
          edited_.clear();
          ask();
        } else if constexpr (std::is_same_v<Asked, BackToPlan>) {
          edited_.clear();
          ask();
        } else if constexpr (std::is_same_v<Asked, DragAmount>) {
          if (!worked_ || !worked_->sheet || worked_->sheet->plans.empty()) return;
          const auto& plans = worked_->sheet->plans;
          const auto& additions =
              plans[std::min(static_cast<std::size_t>(plan_), plans.size() - 1)].additions;
          if (asked.addition < 0 || asked.addition >= static_cast<int>(additions.size())) return;
          if (edited_.empty())
            for (const auto& addition : additions) edited_.emplace_back(addition.chemical, addition.kg);
          const auto& addition = additions[static_cast<std::size_t>(asked.addition)];
          edited_[static_cast<std::size_t>(asked.addition)].second =
              addition.amount > 0 ? asked.amount * addition.kg / addition.amount : 0;
          ask();
        }
      },
      intent);
}

void Desk::draft_changed() {
  if (const Outcome kept = keep_draft(draft_file(), draft_->now()); !kept) fault_ = text(kept.problems());
  edited_.clear();
  plan_ = 0;
  ask();
}

void Desk::ask() {
  if (open_ < 0) return;
  Question question{context_, tanks_[static_cast<std::size_t>(open_)].path, {}, edited_, plan_};
  if (draft_ && !nothing_typed(draft_->now())) {
    const std::filesystem::path file = draft_file().replace_extension(".toml");
    std::ofstream(file, std::ios::binary) << readings_text(draft_->now(), local_now(), line_of_row_);
    question.readings_file = file;
  }
  job_.ask(std::move(question));
}

bool Desk::update() {
  if (auto answer = job_.take()) {
    changed_ = true;
    worked_ = std::move(answer);
    if (worked_->shop && !draft_) {
      blank_ = blank_draft(worked_->shop->tank, worked_->shop->type());
      auto kept = kept_draft(draft_file(), blank_);
      if (!kept) fault_ = text(kept.problems());
      draft_.emplace(kept && *kept ? **kept : blank_);
      if (!nothing_typed(draft_->now())) ask();
    }
  }
  if (!changed_) return false;
  changed_ = false;
  show();
  return true;
}

void Desk::show() {
  if (open_ < 0) return;
  const bath::Tank& tank = tanks_[static_cast<std::size_t>(open_)].tank;
  view_.tank_title = tank.name;
  view_.tank_sub = units::significant(tank.working_volume.v, 4) + " L at the mark, " +
                   units::significant(tank.temperature.v, 3) + " °C at work, " +
                   units::significant(tank.idle_temperature.v, 3) + " °C at rest";
  const Worked* worked = worked_ ? &*worked_ : nullptr;
  view_.readings = draft_ ? readings_view(draft_->now(), line_of_row_, worked) : ReadingsView{};
  view_.readings.can_undo = draft_ && draft_->can_undo();
  view_.readings.can_redo = draft_ && draft_->can_redo();
  view_.readings.working = job_.working();
  if (!draft_ && worked)
    for (const Problem& problem : worked->problems) view_.readings.faults.push_back(problem.text());
  if (!fault_.empty()) view_.readings.faults.push_back(fault_);
  view_.state = worked ? state_view(*worked, shown_plan(*worked, plan_)) : StateView{};
  view_.additions = worked ? additions_view(*worked, plan_, edited_) : AdditionsView{};
  view_.additions.working = job_.working();
  view_.chemistry = worked ? chemistry_view(*worked) : ChemistryView{};
}

}  // namespace bathwright::desktop
