// Everything the window stands for, without a window: the tanks of a folder, the one that is open, what is
// typed and changed, what was worked out. One thread, the picture's, calls it; work is done on others.
#pragma once

#include "../panels/intent.hpp"
#include "../panels/view.hpp"
#include "latest_job.hpp"
#include "reading_draft.hpp"
#include "tank_work.hpp"

namespace bathwright::desktop {

class Desk {
 public:
  /// The tanks are the tank files of `folder`; `wake` is called from other threads when something has
  /// changed.
  Desk(command::Context context, std::filesystem::path folder, std::function<void()> wake);

  void handle(const Intent& intent);
  /// Takes what was worked out since; true where the view has changed.
  bool update();
  [[nodiscard]] const DeskView& view() const { return view_; }
  [[nodiscard]] DeskView& view() { return view_; }
  [[nodiscard]] bool working() const { return job_.working(); }

 private:
  struct TankFile {
    std::filesystem::path path;
    bath::Tank tank;
  };

  void find_tanks();
  void show_line();
  void open(int tank);
  void draft_changed();
  void ask();
  void show();
  [[nodiscard]] std::filesystem::path draft_file() const;

  command::Context context_;
  std::filesystem::path folder_;
  std::vector<TankFile> tanks_;
  int open_ = -1;
  std::optional<DraftHistory> draft_;
  Draft blank_;
  std::vector<int> line_of_row_;
  int plan_ = 0;
  std::vector<std::pair<std::string, double>> edited_;  ///< stock id, kg
  std::optional<Worked> worked_;
  std::string fault_;
  DeskView view_;
  bool changed_ = true;
  LatestJob<Question, Worked> job_;  // last: its thread uses nothing of the above
};

}  // namespace bathwright::desktop
