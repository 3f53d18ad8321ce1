// One future of a tank: its amounts and those of its rinses through the days, and what moved. Equilibria are
// solved outside (block.hpp), many paths side by side.
#pragma once

#include <array>
#include <bathwright/speciation/session.hpp>

#include "prepared.hpp"

namespace bathwright::forecast {

/// What left the vessels, came in from outside, or was moved within; mol per component unless said.
struct Moved {
  std::vector<double> in, out;               ///< of tank and rinses together, for the balance
  double water_in_kg = 0, water_out_kg = 0;  ///< of the tank alone
  std::vector<double> dragged, bled, decanted, frozen, returned;  ///< out of the tank; the last into it
  std::vector<double> treated, carried;                           ///< out of the rinses
  std::vector<double> drag_in, water, carbon_dioxide;             ///< into the tank
  std::vector<std::vector<double>> by_use;                        ///< into the tank, per use
  std::vector<double> feed_kg;                                    ///< per feed
  std::vector<double> deposited_mol;                              ///< per use
  double water_cost = 0;
  double rinse_waste_L = 0, returned_L = 0;
};

class Path {
 public:
  Path(const Prepared& p, const bath::TankState& start, const Draw& draw);

  /// The hours of one day in which nothing is decided; `rating` solves the equilibria that uses by state ask
  /// for.
  Outcome work(int day, double hours, speciation::Session& rating);
  Outcome rest(int day, double hours, speciation::Session& rating);

  /// At the end of a day, in this order, then additions.
  void decants(int day);
  void freeze_outs(int day);
  void dump_rinses(int day);
  void turnover_feeds();

  /// Feeds by analysis of a quantity that are due, up to their aims.
  void meet_levels(const std::vector<const Compiled::Feed*>& due);
  void put(const Compiled::Feed& feed, double kg);

  /// Water to the mark; or water that was put in today taken back to make room.
  Outcome fill_up();
  void begin_day(int day) { day_ = day + 1, filled_today_L_ = 0; }

  /// Goes no further, with what stands in the way and its day.
  void end(Problems problems);
  [[nodiscard]] bool ended() const { return !ended_.empty(); }
  [[nodiscard]] const Problems& why_ended() const { return ended_; }

  /// Of the day, all but what needs an equilibrium.
  [[nodiscard]] Day seen(int day) const;

  /// Whether the model still describes this day; from the first on that it does not, pH and headroom are not
  /// told.
  void judge(Day& day);

  [[nodiscard]] const bath::TankState& state() const { return state_; }
  /// mol of a metal that all its uses have deposited.
  [[nodiscard]] double deposited_mol(const bath::Quantity& metal) const;
  [[nodiscard]] const Moved& moved() const { return moved_; }
  [[nodiscard]] const std::vector<std::vector<double>>& rinses_mol() const { return rinse_mol_; }
  [[nodiscard]] Balance balance() const;

  /// mol of each component in the tank, then in each rinse stage.
  [[nodiscard]] std::vector<double> amounts() const;
  /// Puts such amounts in, made neutral by what is found by charge, and fills up. The balance is lost.
  Outcome place(const std::vector<double>& amounts);

 private:
  Outcome stretch(int day, double hours, bool works, speciation::Session& rating);
  Outcome step(const Rates& r, double hours);
  struct End {
    Passage passage;
    std::vector<std::vector<double>> mol;  ///< per vessel
    double water_kg = 0, lost_kg = 0;      ///< of the tank
  };
  void end_of(const Rates& r, const Litres& flows, double hours, double tank_L, double fill_kg_per_L,
              End& end) const;
  void book(const Rates& r, const Litres& flows, double hours, double tank_L, double fill_kg_per_L,
            const End& end);
  const Rates& constant_rates(int day, bool works);
  Result<EffectsNow> effects(const bath::TankState& state, speciation::Session& rating);
  void neutralise(std::vector<double>& component_mol) const;
  void take_share(double share, std::vector<double>& into);
  void top_up(double litres);  ///< below 0: back
  [[nodiscard]] double return_kg_per_L() const;
  [[nodiscard]] std::size_t water_of(int day) const;
  [[nodiscard]] double turnovers() const;
  [[nodiscard]] double volume_L() const { return p_.chemistry.volume_L(state_); }

  const Prepared& p_;
  bath::TankState state_;
  const Draw draw_;
  std::vector<std::vector<double>> rinse_mol_;  ///< per stage, per component
  std::vector<double> first_;                   ///< mol in all vessels at the start, per component
  double first_water_kg_ = 0;
  Moved moved_;
  std::vector<std::optional<Rates>> known_;  ///< by water, then rest and work
  const Rates* last_ = nullptr;              ///< rates of the water of today
  std::array<double, 2> fill_guess_{};       ///< L/h, at rest and at work
  double cost_ = 0, waste_L_ = 0, drag_out_L_ = 0, top_up_L_ = 0, filled_today_L_ = 0;
  int day_ = 0;  ///< as Day counts them
  Problems ended_;
  Beyond beyond_ = Beyond::no, began_ = Beyond::no;
  double rise_ = 1;         ///< L of the tank per L of water that fills it up, as seen last
  double turned_over_ = 0;  ///< turnovers that feeds were given for
  speciation::Equilibrium rated_;
  std::vector<double> activity_, held_;
  End end_;
};

}  // namespace bathwright::forecast
