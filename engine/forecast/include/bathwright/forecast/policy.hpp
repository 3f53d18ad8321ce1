// How a shop runs a tank: when it works, what each shift does to it, what is lost, what is put back. Values
// only; reading them from a file is shopfiles' work. Read next: forecast.hpp.
#pragma once

#include <bathwright/bath/tank.hpp>
#include <chrono>
#include <map>
#include <optional>
#include <string>
#include <vector>

namespace bathwright::forecast {

/// A figure and its standard uncertainty as a fraction of it; samples are lognormal, so that none changes
/// sign.
struct Uncertain {
  double value = 0;
  double u_rel = 0;
};

/// Two uncertain inputs that are not independent: what was learned of them from one log. By the names of
/// Influence::input ("drag-out", "work, deposition"); of the logarithms.
struct Correlation {
  std::string one, other;
  double correlation = 0;  ///< -1 to 1
};

/// Days are counted from the start of the forecast, day 0.
struct Calendar {
  int shifts_per_day = 1;
  double hours_per_shift = 24;
  int days_per_week = 7;  ///< worked, from Monday on
  int first_weekday = 0;  ///< of day 0; Monday is 0
  struct Closed {
    int first_day = 0, days = 0;
  };
  std::vector<Closed> closed;                     ///< holidays, shutdowns
  std::optional<std::chrono::sys_days> starts{};  ///< date of day 0, where the policy gives one

  /// The same calendar with `day` as day 0: weekdays follow its date, and what is shut stays where it is
  /// where the calendar has dates, else counts from the new day 0.
  [[nodiscard]] Calendar starting(std::chrono::sys_days day) const;
  [[nodiscard]] bool works_on(int day) const;
  [[nodiscard]] std::optional<std::chrono::year_month_day> date(int day) const;
  [[nodiscard]] double worked_h_per_day() const;  ///< of a day that works, at most 24
};

/// So many units of one of the bath type's uses in every shift that works.
struct Work {
  std::string use;  ///< id; counted in ampere hours, grams, m2 or hours as the bath type says
  Uncertain per_shift;
};

/// What the shop found of one of the bath type's uses, in place of what the bath type says. Of a use that
/// goes by the clock as well.
struct OwnRates {
  std::string use;                                       ///< id
  std::optional<std::map<std::string, double>> effects;  ///< g of a quantity per unit
  std::optional<double> effects_u_rel;
  std::optional<Uncertain> cathode_efficiency;  ///< 0 to 1
  std::optional<Uncertain> anode_efficiency;    ///< 0 to 2: an anode may dissolve without current as well
};

/// What is put into the tank without anybody planning it.
struct Replenishment {
  enum class By : std::uint8_t {
    use,       ///< kg_per_unit for each unit of `use`
    hour,      ///< kg_per_unit for each hour, worked or not
    analysis,  ///< up to the tank's aim of `quantity` (or "pH"), at the end of every so many days or shifts
    fill,      ///< kg_per_unit with each litre of water that fills the tank up
    turnover   ///< kg_per_unit for each metal turnover, at the end of the day
  };
  By by = By::hour;
  std::string stock;  ///< id of a shelf item of the tank
  std::string use;
  double kg_per_unit = 0;
  double L_per_unit = 0;  ///< of a liquid, in place of kg_per_unit
  std::string quantity;
  int every_days = 1;
  int every_shifts = 0;              ///< of those worked, in place of every_days; 0: by days
  std::optional<double> to = {};     ///< g/L or pH, in place of the tank's aim
  std::optional<double> below = {};  ///< added only where the level is below it, g/L or pH
};

/// Part of the tank thrown away at the end of every so many days, or once.
struct Decant {
  int every_days = 7;
  double litres = 0;
  double share = 0;  ///< of the tank, in place of litres
  int on_day = 0;    ///< the first is 1; in place of every_days
};

/// A portion chilled outside the tank until only `left_g_per_L` of a quantity stays dissolved, at the end of
/// every so many days. Crystals take their water with them.
struct FreezeOut {
  std::string quantity;  ///< "Na2CO3"
  std::string crystals;  ///< formula of what is taken out, "Na2CO3.10H2O"
  int every_days = 7;
  double litres = 0, left_g_per_L = 0;
};

/// A limit of the shop's own, beside those of the bath type and the tank.
struct OwnLimit {
  std::string quantity;
  double high_g_per_L = 0;
};

/// Other water for a part of every year, both days included; from may stand later in the year than to.
struct WaterSeason {
  std::chrono::month_day from, to;
  std::map<std::string, double> g_per_L;
};

/// Carbon dioxide that the bath takes up from the air, g per hour, day and night; of baths with CO3^2- among
/// their components, in place of the carbonate that the bath type's own uses of the air bring.
struct Uptake {
  Uncertain g_per_h;
  bool per_m2 = false;  ///< of the tank's surface
};

/// Rinses that the work passes after the tank, in its order; each carries over as much as the tank does.
/// Several stages are counter-current: water enters the last and leaves the first.
struct Rinse {
  std::string name;
  double volume_L = 0;  ///< of each stage
  int stages = 1;
  double flow_L_per_h = 0;  ///< of water, while the tank works
  /// What the tank loses in volume is filled up from the first stage, and the last is filled up with water.
  bool returns = false;
  int dump_every_days = 0;  ///< emptied and filled with water at the end of every so many days; 0: never
};

struct Policy {
  Calendar calendar;
  std::vector<Work> work;
  std::vector<OwnRates> own_rates;
  Uncertain area_m2_per_shift;  ///< worked; drag-out and drag-in go with it
  Uncertain drag_out_L_per_m2, drag_in_L_per_m2;
  std::map<std::string, double> drag_in_g_per_L;  ///< what drag-in brings, by quantity
  Uncertain evaporation_L_per_h;                  ///< while it works
  double idle_evaporation_L_per_h = 0;
  std::map<std::string, double> water_g_per_L;  ///< what top-up water brings, by quantity
  std::vector<WaterSeason> seasons;             ///< the first that holds; calendar.starts must be given
  double u_water_rel = 0;
  std::optional<Uptake> carbon_dioxide;
  double bleed_L_per_day = 0;  ///< drawn off evenly, day and night
  bool bleed_at_work = false;  ///< evenly while it works instead, of days that work
  std::vector<Replenishment> replenishment;
  std::vector<Decant> decants;
  std::vector<FreezeOut> freeze_outs;
  std::vector<Rinse> rinses;
  double waste_price_per_L = 0;  ///< what it costs to be rid of bled and decanted solution
  std::vector<OwnLimit> limits;
  std::vector<Correlation> correlations;  ///< of others than named here: none
  int horizon_days = 365;

  [[nodiscard]] double bleed_L_per_h(bool works) const;
};

}  // namespace bathwright::forecast
