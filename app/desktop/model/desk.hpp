// Everything the window stands for, without a window: the tanks of a shop, the one that is open, what is
// typed and changed, what was worked out and logged. One thread, the picture's, calls it; work is done on
// others, but for the path of a dragged amount.
#pragma once

#include "../panels/intent.hpp"
#include "../panels/view.hpp"
#include "bath_types_work.hpp"
#include "forecast_work.hpp"
#include "latest_job.hpp"
#include "log_work.hpp"
#include "printing.hpp"
#include "reading_draft.hpp"
#include "settings.hpp"
#include "shop_folder.hpp"
#include "signing.hpp"
#include "tank_work.hpp"
#include "trends_work.hpp"

namespace bathwright::desktop {

class Desk {
 public:
  /// `shop`: the folder to open; empty: the one kept from last time, else the first start. `wake` is called
  /// from other threads when something has changed.
  Desk(work::Session session, const std::filesystem::path& shop, std::function<void()> wake);

  void handle(const Intent& intent);
  /// Takes what was worked out since; true where the view has changed.
  bool update();
  [[nodiscard]] const DeskView& view() const { return view_; }
  [[nodiscard]] const Settings& settings() const { return settings_; }
  /// "llvmpipe, drawn in software", for the status line.
  void drawn_by(std::string renderer) { view_.status.renderer = std::move(renderer); }
  /// Something is being worked out, read or signed.
  [[nodiscard]] bool working() const;

 private:
  void open_shop(const std::filesystem::path& folder, bool keep_it);
  void open_tank(int tank);
  void draft_changed();
  void drag(const DragAmount& drag);
  void add_chemical(const std::string& chemical);
  void begin_edit();
  /// Has the list checked, and shows what comes of it on the way.
  void own_changed();
  /// False where it cannot be written, which is told.
  bool write_readings();
  void ask();
  void ask_log();
  void ask_forecast();
  /// What a forecast goes out from: the readings that are worked out, the last entry of the log.
  [[nodiscard]] std::pair<std::string, std::int64_t> forecast_starts() const;
  [[nodiscard]] bool forecast_is_old() const { return forecast_of_ != forecast_starts(); }
  void ask_trends();
  void allow_plugin(const AllowPlugin& asked);
  void withdraw_plugin(const WithdrawPlugin& asked);
  void log_analysis(const Names& names);
  /// A file of its own for what the shown figures are of: what is typed from now on is not signed. Nothing
  /// where something was typed since, which is told.
  std::optional<std::string> readings_to_sign();
  void issue_slip(const Names& names);
  void log_entry(Result<logbook::NewEntry> entry, const Names& names);
  void change_people(const Names& names, const work::PeopleChange& change, const std::string& done);
  void admit(const AdmitPerson& asked);
  void retire(const RetirePerson& asked);
  void set_shifts(const SetShifts& set);
  void hand_over(const Names& names);
  void save(const SaveCharts& save);
  void print_forecast();
  void settings_changed();
  void show();
  [[nodiscard]] std::filesystem::path draft_file() const;
  [[nodiscard]] const bath::Tank* tank() const;
  [[nodiscard]] const std::filesystem::path& tank_file() const;  ///< where tank() is one
  [[nodiscard]] HeadUnits head_units() const;

  work::Session session_;
  std::string given_log_;  ///< --log; empty: the shop's usual one
  std::function<void()> wake_;
  Settings settings_;
  sheets::Units units_;
  ShopFolder shop_;
  int open_ = -1;
  std::optional<DraftHistory> draft_;
  Draft blank_;
  std::vector<int> line_of_row_;
  /// What is typed as it was written last; both empty where nothing is typed.
  struct TypedReadings {
    std::filesystem::path file;
    std::string text;
    bool operator==(const TypedReadings&) const = default;
  };
  TypedReadings typed_;
  std::string plan_;            ///< kind of the chosen one; empty: the first
  std::optional<OwnList> own_;  ///< the plan that is shown, changed by hand
  std::optional<Worked> worked_;
  LogNow log_;
  std::string filter_, fault_, said_;
  std::int64_t shown_entry_ = 0;
  std::vector<std::filesystem::path> policies_;
  int policy_ = 0;
  std::optional<Levers> levers_;
  std::optional<Forecasted> forecasted_;
  std::pair<std::string, std::int64_t> forecast_of_;  ///< what was asked for last
  std::optional<TrendsAnswer> trended_;
  std::optional<Examination> examined_;
  std::shared_ptr<PrintedSheet> being_printed_;  ///< filled by what is being signed
  DeskView view_;
  bool changed_ = true;
  Signing signing_;
  Printing printing_;
  ForecastWork forecast_work_;
  // Last: their threads use the works above and nothing else.
  LatestJob<Question, Worked> tank_job_;
  LatestJob<LogQuestion, LogNow> log_job_;
  LatestJob<ForecastQuestion, Forecasted> forecast_job_;
  LatestJob<TrendsQuestion, TrendsAnswer> trends_job_;
  LatestJob<BathTypesQuestion, BathTypesAnswer> bath_types_job_;
};

}  // namespace bathwright::desktop
