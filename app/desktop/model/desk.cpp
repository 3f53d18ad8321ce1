#include "desk.hpp"

#include <algorithm>
#include <bathwright/base/whole_file.hpp>
#include <bathwright/charts/page_file.hpp>
#include <bathwright/sheets/hand_over_sheet.hpp>
#include <bathwright/sheets/log_sheet.hpp>
#include <bathwright/sheets/names.hpp>
#include <bathwright/shifts/pattern.hpp>
#include <bathwright/units/show.hpp>
#include <chrono>

#include "views/views.hpp"
#include "work/constants.hpp"
#include "work/demonstration.hpp"
#include "work/dose_document.hpp"
#include "work/hand_over_document.hpp"
#include "work/slip.hpp"
#include "work/user_folders.hpp"
#include "work/what_must_not_meet.hpp"

namespace bathwright::desktop {
namespace {

/// Now by the shop's clock (UTC where no shifts are set, as the log reads it), as a readings file writes it.
std::string now_in_shop(const std::optional<shifts::Calendar>& calendar) {
  const std::string utc = logbook::iso_utc(work::wall_clock().utc_now());
  std::string time = sheets::local_time(utc, calendar);
  std::ranges::replace(time, ' ', 'T');
  constexpr std::size_t seconds_at = 16, seconds_long = 3;  // zones differ by whole minutes
  return time + utc.substr(seconds_at, seconds_long);
}

bool nothing_typed(const Draft& draft) {
  return std::ranges::all_of(draft.rows, [](const DraftRow& row) { return row.is_empty(); });
}

std::filesystem::path settings_file() { return work::state_folder() / "desktop.json"; }

int index_of(const std::vector<std::string>& all, const std::string& one) {
  const auto found = std::ranges::find(all, one);
  return found == all.end() ? 0 : static_cast<int>(found - all.begin());
}

template <class... Cases>
struct Overloaded : Cases... {
  using Cases::operator()...;
};

sheets::Paper paper_of(const Settings& settings) {
  return settings.letter ? sheets::Paper::letter : sheets::Paper::a4;
}

}  // namespace

Desk::Desk(work::Session session, const std::filesystem::path& shop, std::function<void()> wake)
    : session_(std::move(session)),
      given_log_(session_.log_file),
      wake_(std::move(wake)),
      settings_(kept_settings(settings_file())),
      units_(settings_.units),
      signing_(wake_),
      printing_(wake_),
      tank_job_(
          [work = std::make_shared<TankWork>()](const Question& question, const std::stop_token& stop,
                                                const auto& give) { work->answer(question, stop, give); },
          wake_),
      log_job_([](const LogQuestion& question, const std::stop_token&,
                  const auto& give) { give(read_log(question)); },
               wake_),
      forecast_job_([this](const ForecastQuestion& question, const std::stop_token& stop,
                           const auto& give) { forecast_work_.answer(question, stop, give); },
                    wake_),
      trends_job_([](const TrendsQuestion& question, const std::stop_token&,
                     const auto& give) { give(read_trends(question)); },
                  wake_),
      bath_types_job_([](const BathTypesQuestion& question, const std::stop_token&,
                         const auto& give) { read_bath_types(question, give); },
                      wake_) {
  const std::filesystem::path& folder = shop.empty() ? settings_.shop : shop;
  if (!folder.empty()) open_shop(folder, !shop.empty());
  show();
}

const bath::Tank* Desk::tank() const {
  return open_ < 0 ? nullptr : &(*shop_.tanks)[static_cast<std::size_t>(open_)];
}

const std::filesystem::path& Desk::tank_file() const { return shop_.files[static_cast<std::size_t>(open_)]; }

bool Desk::working() const {
  return tank_job_.working() || log_job_.working() || forecast_job_.working() || trends_job_.working() ||
         bath_types_job_.working() || printing_.working() || signing_.busy();
}

HeadUnits Desk::head_units() const {
  HeadUnits heads{settings_.units.volume, settings_.units.temperature, {}};
  if (worked_ && worked_->shop)
    for (const bath::Quantity& quantity : worked_->shop->type().quantities)
      heads.value[quantity.id] = units_.typed(quantity);
  return heads;
}

void Desk::open_shop(const std::filesystem::path& as_typed, bool keep_it) {
  std::error_code failed;
  const auto whole = [&](const std::filesystem::path& path) {
    const std::filesystem::path all = std::filesystem::weakly_canonical(path, failed);
    return all.has_filename() ? all : all.parent_path();
  };
  const std::filesystem::path folder = whole(as_typed);
  auto shop = read_shop(folder);
  if (!shop) {
    fault_ = text(shop.problems());
    return;
  }
  shop_ = *std::move(shop);
  fault_.clear();
  // The demonstration has a log of its own: what is tried on it never stands between a real shop's entries.
  session_.log_file = given_log_;
  if (given_log_.empty())
    session_.log_file = (folder == whole(work::data_folder() / "demonstration") ? folder / "shift-log.sqlite"
                                                                                : work::log_path(session_))
                            .string();
  if (keep_it) {
    settings_.shop = folder;
    settings_changed();
  }
  printing_.look_in(std::filesystem::path(session_.log_file).parent_path() / "printed");
  log_ = {};
  open_tank(0);
}

std::filesystem::path Desk::draft_file() const {
  return work::state_folder() / "typing" / (tank()->name + ".json");
}

void Desk::open_tank(int tank) {
  if (!shop_.tanks || tank < 0 || tank >= static_cast<int>(shop_.tanks->size())) return;
  open_ = tank;
  worked_.reset();
  draft_.reset();
  own_.reset();
  plan_.clear();
  log_.slip.reset();
  said_.clear();
  policies_ = shop_.policies(static_cast<std::size_t>(tank));
  policy_ = 0;
  levers_.reset();
  forecasted_.reset();
  ask();
  ask_log();
  if (view_.page == PageName::forecast) ask_forecast();
  if (view_.page == PageName::trends) ask_trends();
}

void Desk::handle(const Intent& intent) {
  changed_ = true;
  std::visit(Overloaded{[&](const GoTo& to) {
                          view_.page = to.page;
                          printing_.close();
                          fault_.clear();
                          said_.clear();
                          if (to.page == PageName::forecast && (!forecasted_ || forecast_is_old()))
                            ask_forecast();
                          if (to.page == PageName::trends) ask_trends();
                          if (to.page == PageName::bath_types) {
                            examined_.reset();
                            bath_types_job_.ask({session_, {}});
                          }
                        },
                        [&](const OpenTank& open) {
                          fault_.clear();
                          printing_.close();
                          if (open.tank != open_) open_tank(open.tank);
                        },
                        [&](const TypeReading& typed) {
                          if (draft_) draft_->type(typed, now_in_shop(log_.calendar)), draft_changed();
                        },
                        [&](const ChooseMethod& chosen) {
                          if (draft_) draft_->choose(chosen), draft_changed();
                        },
                        [&](const UndoTyping&) {
                          if (draft_) draft_->undo(), draft_changed();
                        },
                        [&](const RedoTyping&) {
                          if (draft_) draft_->redo(), draft_changed();
                        },
                        [&](const NewSample&) {
                          if (draft_) draft_->start_again(blank_), draft_changed();
                        },
                        [&](const ChoosePlan& chosen) {
                          if (worked_ && worked_->sheet &&
                              chosen.plan < static_cast<int>(worked_->sheet->plans.size()))
                            plan_ = worked_->sheet->plans[static_cast<std::size_t>(chosen.plan)].kind;
                          own_.reset();
                          ask();
                        },
                        [&](const DragAmount& dragged) { drag(dragged); },
                        [&](const AddChemical& added) { add_chemical(added.chemical); },
                        [&](const BackToPlan&) {
                          own_.reset();
                          ask();
                        },
                        [&](const LogAnalysis& asked) { log_analysis(asked.names); },
                        [&](const IssueSlip& asked) { issue_slip(asked.names); },
                        [&](const StepDone& asked) {
                          if (log_.slip) log_entry(work::step_done(*log_.slip, asked.step), asked.names);
                        },
                        [&](const ApproveSlip& asked) {
                          if (log_.slip) log_entry(work::approval(*log_.slip), asked.names);
                        },
                        [&](const CloseSlip& asked) {
                          if (log_.slip)
                            log_entry(work::closing(*log_.slip, asked.cancelled, asked.reason), asked.names);
                        },
                        [&](const HandOver& asked) { hand_over(asked.names); },
                        [&](const SetShifts& asked) { set_shifts(asked); },
                        [&](const AdmitPerson& asked) { admit(asked); },
                        [&](const RetirePerson& asked) { retire(asked); },
                        [&](const ExaminePlugin& asked) {
                          examined_.reset();
                          bath_types_job_.ask({session_, asked.file});
                        },
                        [&](const AllowPlugin& asked) { allow_plugin(asked); },
                        [&](const WithdrawPlugin& asked) { withdraw_plugin(asked); },
                        [&](const ChoosePolicy& chosen) {
                          policy_ = chosen.policy;
                          levers_.reset();
                          ask_forecast();
                        },
                        [&](const MoveLever& lever) {
                          if (!forecasted_) return;
                          Levers levers = levers_.value_or(forecasted_->levers);
                          if (lever.lever == 0) levers.bleed_L_per_day = std::max(0.0, lever.value);
                          if (lever.lever == 1) levers.drag_out = std::max(0.0, lever.value);
                          if (lever.lever == 2) levers.load = std::max(0.0, lever.value);
                          if (lever.lever == 3)
                            levers.horizon_days = std::max(1, static_cast<int>(lever.value));
                          levers_ = levers;
                          ask_forecast();
                        },
                        [&](const StopSampling&) { forecast_job_.stop(); },
                        [&](const FilterLog& filter) {
                          filter_ = filter.text;
                          ask_log();
                        },
                        [&](const ShowEntry& entry) {
                          shown_entry_ = entry.seq;
                          ask_log();
                        },
                        [&](const AskSource& asked) {
                          std::vector<std::string> names;
                          view_.source.species = asked.species;
                          view_.source.text =
                              work::sources_sheet(asked.species, work::constants_about(asked.species, names));
                        },
                        [&](const SaveCharts& asked) { save(asked); },
                        [&](const PrintForecast&) { print_forecast(); },
                        [&](const ShowPrinted&) { printing_.show(); },
                        [&](const ClosePrinted&) { printing_.close(); },
                        [&](const PrintSheet& asked) { printing_.send(settings_.print_command, asked.file); },
                        [&](const SetPrintCommand& asked) {
                          settings_.print_command = asked.command;
                          settings_changed();
                        },
                        [&](const SetPaper& asked) {
                          settings_.letter = asked.letter;
                          settings_changed();
                        },
                        [&](const OpenFolder& asked) { open_shop(asked.folder, true); },
                        [&](const OpenDemonstration&) {
                          if (const auto folder = work::demonstration_shop())
                            open_shop(*folder, true);
                          else
                            fault_ = text(folder.problems());
                        },
                        [&](const SetLook& look) {
                          settings_.scale = look.scale;
                          settings_.dark = look.dark;
                          settings_changed();
                        },
                        [&](const SetUnit& set) {
                          if (draft_) draft_->write_out(head_units());
                          const sheets::UnitChoice& choice =
                              sheets::unit_choices().at(static_cast<std::size_t>(set.which));
                          settings_.units.*choice.kept = choice.all.at(static_cast<std::size_t>(set.chosen));
                          units_ = sheets::Units(settings_.units);
                          settings_changed();
                          ask();
                        }},
             intent);
}

void Desk::settings_changed() {
  if (const Outcome kept = keep(settings_file(), settings_); !kept) fault_ = text(kept.problems());
}

void Desk::draft_changed() {
  if (const Outcome kept = keep_draft(draft_file(), with_units(draft_->now(), head_units())); !kept)
    fault_ = text(kept.problems());
  own_.reset();
  plan_.clear();
  ask();
}

/// The plan that is shown becomes a list of the person's own.
void Desk::begin_edit() {
  if (own_ || !worked_ || !worked_->sheet || worked_->sheet->plans.empty()) return;
  const dosing::Plan& plan = worked_->sheet->plans[index_of_plan(*worked_->sheet, plan_)];
  own_.emplace();
  if (plan.decant_L > 0) own_->take_out_L = plan.decant_L;
  for (const auto& addition : plan.additions) own_->kg.emplace_back(addition.chemical, addition.kg);
}

void Desk::drag(const DragAmount& drag) {
  if (!worked_ || !worked_->sheet || drag.amount < 0) return;
  begin_edit();
  if (!own_ || drag.addition < 0) return;
  auto row = static_cast<std::size_t>(drag.addition);
  if (own_->take_out_L) {  // it stands above the chemicals
    if (row == 0) {
      own_->take_out_L = drag.amount / units_.amount_unit("L").per_one;
      return own_changed();
    }
    --row;
  }
  if (row >= own_->kg.size()) return;
  auto& [id, kg] = own_->kg[row];
  const matter::StockChemical* stock = stock_of(worked_->shop->tank, id);
  if (!stock) return;
  const double amount = drag.amount / units_.amount_unit(stock->liquid ? "L" : "kg").per_one;
  kg = stock->liquid ? amount * stock->kg_per_L : amount;
  own_changed();
}

void Desk::add_chemical(const std::string& chemical) {
  if (!worked_ || !worked_->sheet || !stock_of(worked_->shop->tank, chemical)) return;
  begin_edit();
  if (!own_) return;
  constexpr double first_kg = 1;  // something to drag from
  own_->kg.emplace_back(chemical, first_kg);
  own_changed();
}

void Desk::own_changed() {
  ask();
  if (!worked_->analysed) return;
  // Here, so that the next picture has it whatever else the machine does. A path that takes longer than a
  // picture can spare comes with the checks.
  using Clock = std::chrono::steady_clock;
  const auto enough = Clock::now() + std::chrono::milliseconds(10);
  Path path = path_of(*worked_->shop, worked_->analysed->analysis.state, moves_of(*own_),
                      [&] { return Clock::now() > enough; });
  if (path.whole) worked_->path = std::move(path);
}

bool Desk::write_readings() {
  if (!draft_ || nothing_typed(draft_->now())) {
    typed_ = {};
    return true;
  }
  TypedReadings typed{draft_file().replace_extension(".toml"),
                      readings_text(draft_->now(), head_units(), line_of_row_)};
  if (typed == typed_) return true;  // a drag changes no reading
  if (const Outcome written = write_whole(typed.file, typed.text); !written) {
    fault_ = text(written.problems());
    return false;
  }
  typed_ = std::move(typed);
  return true;
}

void Desk::ask() {
  if (open_ >= 0 && write_readings())
    tank_job_.ask({session_, tank_file(), typed_.file, own_, plan_, log_.last});
}

void Desk::ask_log() {
  if (const bath::Tank* open = tank())
    log_job_.ask({session_, shop_.tanks, open->name, filter_, shown_entry_});
}

std::pair<std::string, std::int64_t> Desk::forecast_starts() const {
  return {worked_ && worked_->analysed ? worked_->readings : std::string(), log_.last};
}

void Desk::ask_forecast() {
  if (open_ < 0 || policies_.empty()) return;
  forecast_of_ = forecast_starts();
  const auto policy = std::min(static_cast<std::size_t>(policy_), policies_.size() - 1);
  std::filesystem::path readings;
  if (worked_ && worked_->analysed) readings = worked_->readings_file;
  forecast_job_.ask({session_, tank_file(), readings, policies_[policy], levers_});
}

void Desk::ask_trends() {
  trended_.reset();
  if (const bath::Tank* open = tank()) trends_job_.ask({session_, *open});
}

void Desk::allow_plugin(const AllowPlugin& asked) {
  if (!examined_ || !examined_->found || examined_->found->sha256 != asked.sha256) return;
  if (const Outcome allowed = work::allow_plugin(session_, examined_->file, *examined_->found); !allowed) {
    fault_ = text(allowed.problems());
    return;
  }
  said_ = "Allowed: " + examined_->file.string() + ".";
  examined_.reset();
  bath_types_job_.ask({session_, {}});
  ask();  // the tank that is open may have waited for it
}

void Desk::withdraw_plugin(const WithdrawPlugin& asked) {
  const auto forgotten = work::forget_plugin(session_, asked.sha256);
  if (!forgotten) {
    fault_ = text(forgotten.problems());
    return;
  }
  said_ = "No longer allowed: " + forgotten->front().id + ", " + forgotten->front().file + ".";
  bath_types_job_.ask({session_, {}});
}

void Desk::log_analysis(const Names& names) {
  if (!worked_ || !worked_->analysed || !worked_->shop) return;
  said_.clear();
  const auto file = readings_to_sign();
  if (!file) return;
  signing_.start(
      [session = signed_by(session_, names), worked = *worked_, file = *file]() -> Result<std::string> {
        auto entry = work::entry_computed(
            *worked.shop, file, logbook::EntryKind::analysis,
            work::analysis_document(worked.shop->tank, worked.shop->chemistry, worked.analysed->analysis));
        if (!entry) return entry.problems();
        const auto logged = work::append_to_log(session, *std::move(entry));
        if (!logged) return logged.problems();
        return work::words(*logged);
      });
}

std::optional<std::string> Desk::readings_to_sign() {
  if (worked_->readings != typed_.text) {
    fault_ = "The readings were changed just now: see what they come to, then sign.";
    return std::nullopt;
  }
  const std::filesystem::path file = draft_file().replace_extension(".signed.toml");
  if (const Outcome written = write_whole(file, worked_->readings); !written) {
    fault_ = text(written.problems());
    return std::nullopt;
  }
  return file.string();
}

void Desk::issue_slip(const Names& names) {
  if (!worked_ || !worked_->analysed || !worked_->sheet || !shown_plan(*worked_, plan_)) return;
  said_.clear();
  if (signing_.busy()) return;
  if (!worked_->is_checked(own_)) {
    fault_ = "The list is still being checked: nothing is issued.";
    return;
  }
  const auto file = readings_to_sign();
  if (!file) return;
  being_printed_ = std::make_shared<PrintedSheet>();
  signing_.start([session = signed_by(session_, names), worked = *worked_, file = *file, plan = plan_,
                  units = units_, printed = being_printed_, paper = paper_of(settings_),
                  folder = printing_.folder()]() -> Result<std::string> {
    // The log may have gone on since the readings were worked out.
    const auto fresh = work::analyse(session, *worked.shop, file);
    if (!fresh) return fresh.problems();
    dosing::AdditionSheet sheet = worked.own ? *worked.own->sheet : *worked.sheet;
    if (!worked.own) std::swap(sheet.plans.front(), sheet.plans[index_of_plan(sheet, plan)]);
    constexpr std::size_t earlier_results = 3;
    const auto history = work::history_of(session, worked.shop->tank.name, earlier_results, fresh->logged_as);
    if (!history) return history.problems();
    const auto stops = work::slip_stops(worked.shop->tank, *fresh, sheet, *history);
    if (const std::string why = work::hindrance(sheet, *fresh, stops); !why.empty())
      return Problem{Fault::refused, "slip", "none is issued: " + why, "", "Settle that first."};
    work::Json doc = work::dose_document(*worked.shop, sheet, fresh->changed_since);
    doc["stops"] = stops;
    const auto logged = work::log_dose(session, *worked.shop, file, *fresh, doc, true);
    if (!logged) return logged.problems();
    const std::optional<work::LoggedDose> issued = *logged;
    *printed = {work::page_of(session, *worked.shop, {*fresh, sheet, stops, *history, issued, units}), paper,
                folder / ("slip-" + std::to_string(*logged->slip) + ".pdf")};
    return "Slip " + std::to_string(*logged->slip) + " is issued, in " + logged->path.string() + ". " +
           print(*printed);
  });
}

void Desk::log_entry(Result<logbook::NewEntry> entry, const Names& names) {
  said_.clear();
  if (!entry) {
    fault_ = text(entry.problems());
    return;
  }
  fault_.clear();
  signing_.start([session = signed_by(session_, names), entry = *std::move(entry)]() -> Result<std::string> {
    if (entry.kind == logbook::EntryKind::addition) {
      const auto met = work::met_in_tank(session, entry.tank, work::Json::parse(entry.body, nullptr, false));
      if (!met) return met.problems();
      if (!met->stops.empty())
        return Problem{
            Fault::refused, met->stops.front().chemical, met->stops.front().why, "",
            "Add nothing of it. What has gone in already is logged as an event: bathwright log add "
            "addition --event."};
    }
    const auto logged = work::append_to_log(session, entry);
    if (!logged) return logged.problems();
    return work::words(*logged);
  });
}

void Desk::change_people(const Names& names, const work::PeopleChange& change, const std::string& done) {
  said_.clear();
  signing_.start([session = signed_by(session_, names), change, done]() -> Result<std::string> {
    const auto logged = work::change_people(session, change);
    if (!logged) return logged.problems();
    return done + ": entry " + std::to_string(logged->entry.seq) + ".";
  });
}

void Desk::admit(const AdmitPerson& asked) {
  const auto change = [asked](logbook::Logbook& log,
                              const logbook::Signatures& signatures) -> Result<logbook::Entry> {
    const auto role = logbook::role_of(asked.role);
    if (!role) return role.problems();
    return log.admit(asked.name, *role, asked.pin, signatures);
  };
  change_people(asked.names, change, asked.name + " may sign now");
}

void Desk::retire(const RetirePerson& asked) {
  const auto change = [asked](logbook::Logbook& log, const logbook::Signatures& signatures) {
    return log.retire(asked.name, signatures);
  };
  change_people(asked.names, change, asked.name + " signs nothing any more");
}

void Desk::set_shifts(const SetShifts& set) {
  const auto pattern = shifts::ready_made(set.pattern, set.zone);
  const auto calendar =
      pattern ? shifts::Calendar::of(*pattern) : Result<shifts::Calendar>(pattern.problems());
  if (!calendar) {
    fault_ = text(calendar.problems());
    return;
  }
  logbook::NewEntry entry;
  entry.kind = logbook::EntryKind::setting;
  entry.body = work::Json{{"shifts", work::Json::parse(shifts::to_json(*pattern))}}.dump();
  log_entry(std::move(entry), set.names);
}

void Desk::hand_over(const Names& names) {
  if (!log_.told) {
    fault_ = "No shifts are set: Settings has them.";
    return;
  }
  said_.clear();
  if (signing_.busy()) return;
  being_printed_ = std::make_shared<PrintedSheet>();
  signing_.start([session = signed_by(session_, names), told = *log_.told, calendar = *log_.calendar,
                  units = units_, printed = being_printed_, paper = paper_of(settings_),
                  folder = printing_.folder()]() -> Result<std::string> {
    logbook::NewEntry entry;
    entry.kind = logbook::EntryKind::hand_over;
    entry.body = work::text_of(work::hand_over_document(told));
    const auto logged = work::append_to_log(session, std::move(entry));
    if (!logged) return logged.problems();
    *printed = {sheets::hand_over_page(told, calendar, work::signer(session), units), paper,
                folder / ("hand-over-" + std::to_string(logged->entry.seq) + ".pdf")};
    return work::words(*logged) + " " + print(*printed);
  });
}

void Desk::save(const SaveCharts& asked) {
  fault_.clear();
  charts::Page page;
  if (asked.charts == Charts::forecast && forecasted_ && forecasted_->run)
    page = sheets::forecast_charts(forecasted_->in(units_));
  if (asked.charts == Charts::trends) page = {tank()->name, {"control charts"}, view_.trends.charts, ""};
  if (asked.charts == Charts::path)
    page = {tank()->name, {"along the planned additions"}, view_.chemistry.path, "Dashed: computed."};
  // A bare name goes beside the printed sheets, not to wherever the program was started.
  std::filesystem::path file = asked.file;
  if (file.is_relative()) {
    const std::filesystem::path charts = printing_.folder().parent_path() / "charts";
    std::error_code failed;
    std::filesystem::create_directories(charts, failed);
    file = charts / file;
  }
  const Outcome saved = page.charts.empty()
                            ? Outcome(Problem{Fault::bad_input, asked.file, "there is nothing to save yet",
                                              "", "Work it out first."})
                            : charts::write_page(file, page);
  if (saved)
    said_ = "Saved as " + file.string() + ".";
  else
    fault_ = text(saved.problems());
}

void Desk::print_forecast() {
  if (!forecasted_ || !forecasted_->complete) return;
  const std::string name = "forecast-" + forecasted_->tank_file.stem().string() + ".pdf";
  const auto sheet = std::make_shared<PrintedSheet>(PrintedSheet{
      sheets::forecast_page(forecasted_->in(units_)), paper_of(settings_), printing_.folder() / name});
  const std::string words = print(*sheet);
  (sheet->file.empty() ? fault_ : said_) = words;
  if (sheet->file.empty()) return;
  fault_.clear();
  printing_.add(sheet);
  printing_.show();
}

bool Desk::update() {
  if (auto answer = tank_job_.take()) {
    changed_ = true;
    if (tank() && answer->tank_file == tank_file()) {
      if (!answer->now && worked_ && worked_->now) {
        // What cannot be worked out takes the plans away, and leaves the tank as it was last known.
        answer->now = worked_->now;
        answer->shop = worked_->shop;
        answer->read = sheets::StateRead{"as it was before: it cannot be worked out as things stand",
                                         worked_->shop->tank.temperature,
                                         worked_->now->pH,
                                         {}};
      }
      worked_ = std::move(answer);
      if (!plan_.empty() && worked_->sheet && !worked_->sheet->plans.empty() &&
          worked_->sheet->plans[index_of_plan(*worked_->sheet, plan_)].kind != plan_) {
        said_ = "The plan \"" + plan_ + "\" is no longer among them: the first is shown.";
        plan_.clear();
      }
      if (worked_->shop && !draft_) {
        blank_ = blank_draft(worked_->shop->tank, worked_->shop->type());
        auto kept = kept_draft(draft_file(), blank_);
        if (!kept) fault_ = text(kept.problems());
        draft_.emplace(kept && *kept ? **kept : blank_);
        if (!nothing_typed(draft_->now())) ask();
      }
    }
  }
  if (auto answer = log_job_.take()) {
    changed_ = true;
    const bool went_on = answer->last != log_.last;
    log_ = *std::move(answer);
    if (went_on) ask();
  }
  if (view_.page == PageName::forecast && forecast_is_old()) ask_forecast();
  if (auto answer = forecast_job_.take()) {
    changed_ = true;
    if (tank() && answer->tank_file == tank_file()) forecasted_ = std::move(answer);
  }
  if (auto answer = trends_job_.take()) {
    changed_ = true;
    if (tank() && answer->tank == tank()->name) trended_ = std::move(answer);
  }
  if (auto answer = bath_types_job_.take()) {
    changed_ = true;
    view_.bath_types.rows = std::move(answer->rows);
    examined_ = std::move(answer->examination);
  }
  if (printing_.update()) changed_ = true;
  if (auto came = signing_.take()) {
    changed_ = true;
    const auto sheet = std::exchange(being_printed_, nullptr);
    if (sheet && !sheet->file.empty()) printing_.add(sheet);
    if (*came) {
      said_ = **came;
      fault_.clear();
    } else {
      fault_ = text(came->problems());
    }
    ask_log();
  }
  const double progress = forecast_job_.working() ? forecast_work_.progress() : 0;
  if (progress != view_.forecast.progress) changed_ = true;
  if (working() != !view_.status.doing.empty()) changed_ = true;
  if (!changed_) return false;
  changed_ = false;
  show();
  return true;
}

void Desk::show() {
  view_.first_start = open_ < 0;
  view_.fault = fault_;
  view_.settings = {settings_.shop.string(), session_.log_file, settings_.print_command, {},
                    settings_.scale,         settings_.dark,    settings_.letter};
  for (const sheets::UnitChoice& choice : sheets::unit_choices())
    view_.settings.units.push_back(
        {choice.what, choice.all, index_of(choice.all, settings_.units.*choice.kept)});
  if (open_ < 0) return;
  view_.status.doing = signing_.busy()           ? "signing ..."
                       : forecast_job_.working() ? "forecasting ..."
                       : tank_job_.working()     ? "working out ..."
                       : log_job_.working()      ? "reading the log ..."
                                                 : "";
  view_.status.said = said_;
  view_.status.log = "log: " + session_.log_file;
  view_.line = line_view(shop_, log_, open_);
  view_.tank_title = tank()->name;
  view_.tank_sub = units_.volume(tank()->working_volume.v) + " at the mark, " +
                   units_.temperature(tank()->temperature.v) + " at work, " +
                   units_.temperature(tank()->idle_temperature.v) + " at rest";
  const Worked* worked = worked_ ? &*worked_ : nullptr;
  view_.readings = draft_ ? readings_view(draft_->now(), line_of_row_, worked, units_) : ReadingsView{};
  if (!log_.calendar && !view_.readings.sampled.empty()) view_.readings.sampled += " UTC";
  view_.readings.can_undo = draft_ && draft_->can_undo();
  view_.readings.can_redo = draft_ && draft_->can_redo();
  view_.readings.working = tank_job_.working();
  view_.readings.units = {settings_.units.volume, settings_.units.temperature};
  if (!draft_ && worked)
    for (const Problem& problem : worked->problems) view_.readings.faults.push_back(problem.text());
  view_.state = worked ? state_view(*worked, units_) : StateView{};
  view_.additions = worked ? additions_view(*worked, plan_, own_, units_) : AdditionsView{};
  view_.additions.working = tank_job_.working();
  const bool retyped = worked && worked->readings != typed_.text;
  if (retyped && view_.additions.ready) {
    view_.additions.ready = false;
    view_.additions.verdict = "the readings were changed: they are being worked out";
  }
  view_.chemistry = worked ? chemistry_view(*worked, units_) : ChemistryView{};
  view_.slip = slip_view(log_.slip, log_.calendar, units_);
  view_.sign = {work::signer(session_),
                session_.log_file,
                fault_,
                said_,
                {},
                worked && worked->analysed && worked->problems.empty() && !retyped,
                signing_.busy(),
                worked && worked->analysed && worked->analysed->logged_as.has_value()};
  view_.people.clear();
  for (const logbook::Person& person : log_.people) {
    if (person.active) view_.sign.people.push_back(person.name);
    view_.people.push_back({person.name, std::string(logbook::name(person.role)),
                            person.active ? "yes" : "no more", person.active});
  }
  view_.shift = shift_view(log_, work::wall_clock().utc_now());
  view_.log = log_view(log_);
  view_.log.more_below = log_.entries.size() >= most_entries;
  view_.log.filter = filter_;
  view_.log.file = session_.log_file;
  view_.log.shown = shown_entry_;
  view_.hand_over = {{}, log_.calendar.has_value()};
  if (view_.page == PageName::hand_over && log_.told && log_.calendar)
    view_.hand_over.text =
        sheets::text_of(sheets::hand_over_page(*log_.told, *log_.calendar, work::signer(session_), units_));
  view_.printed = printing_.view(settings_.print_command);
  view_.bath_types.working = bath_types_job_.working();
  view_.bath_types.examined.reset();
  if (examined_) view_.bath_types.examined = examined_view(*examined_);
  const double progress = forecast_job_.working() ? forecast_work_.progress() : 0;
  // The charts of other pages are not made anew for each step of a drag.
  view_.forecast =
      forecasted_ && view_.page == PageName::forecast ? forecast_view(*forecasted_, units_) : ForecastView{};
  const bath::BathType* type = worked && worked->shop ? &worked->shop->type() : nullptr;
  view_.trends = trended_ && view_.page == PageName::trends ? trends_view(*trended_, type, units_)
                                                            : TrendsView{"reading the log ...", {}, {}, {}};
  if (policies_.empty())
    view_.forecast.empty =
        "No policy of this tank is in the folder policies: copy one from the demonstration shop and "
        "enter how the tank is run.";
  for (const auto& policy : policies_) view_.forecast.policies.push_back(policy.filename().string());
  view_.forecast.policy = policy_;
  view_.forecast.working = forecast_job_.working();
  view_.forecast.progress = progress;
}

}  // namespace bathwright::desktop
