// How a shop runs a tank: when it works, what each shift does to it, what is lost, what is put back. Values
// only; reading them from a file is shopfiles' work. Read next: forecast.hpp.
#pragma once

#include <bathwright/bath/tank.hpp>
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

/// Days are counted from the start of the forecast, day 0.
struct Calendar {
  int shifts_per_day = 1;
  double hours_per_shift = 24;
  int days_per_week = 7;  ///< worked, from Monday on
  int first_weekday = 0;  ///< of day 0; Monday is 0
  struct Closed {
    int first_day = 0, days = 0;
  };
  std::vector<Closed> closed;  ///< holidays, shutdowns

  [[nodiscard]] bool works_on(int day) const;
};

/// So many units of one of the bath type's uses in every shift that works.
struct Work {
  std::string use;  ///< id; counted in ampere hours, grams, m2 or hours as the bath type says
  Uncertain per_shift;
};

/// What is put into the tank without anybody planning it.
struct Replenishment {
  enum class By : std::uint8_t {
    use,      ///< kg_per_unit for each unit of `use`
    hour,     ///< kg_per_unit for each hour, worked or not
    analysis  ///< up to the tank's aim of `quantity` (or "pH"), at the end of every so many days
  };
  By by = By::hour;
  std::string stock;  ///< id of a shelf item of the tank
  std::string use;
  double kg_per_unit = 0;
  std::string quantity;
  int every_days = 1;
};

/// Part of the tank thrown away at the end of every so many days.
struct Decant {
  int every_days = 7;
  double litres = 0;
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

struct Policy {
  Calendar calendar;
  std::vector<Work> work;
  Uncertain area_m2_per_shift;  ///< worked; drag-out and drag-in go with it
  Uncertain drag_out_L_per_m2, drag_in_L_per_m2;
  std::map<std::string, double> drag_in_g_per_L;  ///< what drag-in brings, by quantity
  Uncertain evaporation_L_per_h;                  ///< while it works
  double idle_evaporation_L_per_h = 0;
  std::map<std::string, double> water_g_per_L;  ///< what top-up water brings, by quantity
  double u_water_rel = 0;
  double bleed_L_per_day = 0;  ///< drawn off evenly, day and night
  std::vector<Replenishment> replenishment;
  std::vector<Decant> decants;
  std::vector<FreezeOut> freeze_outs;
  std::vector<OwnLimit> limits;
  int horizon_days = 365;
};

}  // namespace bathwright::forecast
