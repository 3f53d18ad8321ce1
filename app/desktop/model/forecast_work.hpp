// The forecast of the open tank under a policy with its levers moved: first the policy as it stands, then its
// doubt.
#pragma once

#include <atomic>
#include <bathwright/sheets/forecast_charts.hpp>
#include <filesystem>
#include <functional>
#include <memory>
#include <stop_token>

#include "kept_shop.hpp"
#include "work/tank_state.hpp"

namespace bathwright::desktop {

/// What a person may move; the policy file stays as it is.
struct Levers {
  double bleed_L_per_day = 0;
  double drag_out = 1, load = 1;  ///< times what the policy has
  int horizon_days = 365;
  bool operator==(const Levers&) const = default;
};

struct ForecastQuestion {
  work::Session session;
  std::filesystem::path tank_file, readings_file, policy_file;
  std::optional<Levers> levers;  ///< nothing: as the policy has them
  int samples = 200;
};

struct Forecasted {
  std::filesystem::path tank_file, policy_file;
  Problems problems;
  std::shared_ptr<const work::Shop> shop;  ///< where there are no problems
  Levers levers, written;                  ///< as computed with, and as the policy has them
  std::vector<forecast::LimitMet> limits;
  std::vector<std::string> dates;  ///< of the limits, where the policy has a calendar date
  std::vector<sheets::BleedToHold> bleeds;
  forecast::Summary summary;
  std::string currency, from;
  std::vector<std::string> notes;
  std::optional<forecast::Forecast> forecast;
  std::shared_ptr<const forecast::Run> run;      ///< of the policy as it stands
  std::shared_ptr<const forecast::Bands> bands;  ///< nullptr: not drawn yet
  std::optional<std::vector<double>> settled;
  std::string why_unsettled;
  bool complete = false;  ///< all but the bands is worked out, so that it may be printed
  /// To show, to save and to print; where there are no problems. It refers to this.
  [[nodiscard]] sheets::ForecastPage in(const sheets::Units& units) const;
};

class ForecastWork {
 public:
  void answer(const ForecastQuestion& question, const std::stop_token& stop,
              const std::function<void(Forecasted)>& give);
  /// Share of the samples drawn, 0 to 1; from any thread.
  [[nodiscard]] double progress() const { return progress_; }

 private:
  KeptShop kept_;
  std::atomic<double> progress_ = 0;
};

}  // namespace bathwright::desktop
