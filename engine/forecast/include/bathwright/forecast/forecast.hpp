// A tank's future under a policy: levels, headroom, pH, cost and waste by day, the limits it meets and when,
// where it settles, and the bleed that holds a level. Read next: policy.hpp for what goes in.
#pragma once

#include <bathwright/bath/chemistry.hpp>
#include <bathwright/forecast/policy.hpp>
#include <functional>
#include <memory>

namespace bathwright::forecast {

/// One draw of what is uncertain in a policy: factors on its values; all 1 is the policy as it stands.
struct Draw {
  double area = 1, drag_out = 1, drag_in = 1, evaporation = 1, water = 1;
  std::vector<double> work;        ///< per Policy::work: on the amount per shift
  std::vector<double> effects;     ///< per use of the bath type: on its effects
  std::vector<double> efficiency;  ///< per use: on the cathode efficiency, which stays within 0 to 1
  std::vector<double> level;       ///< per component: on the amount at the start
};

/// What a forecast says of one day: the state at its end.
struct Day {
  int day = 0;                           ///< 0 is the start
  std::vector<double> quantity_g_per_L;  ///< in the order of BathType::quantities
  double pH = 0;
  std::vector<double> working_log10, idle_log10;  ///< headroom, in the order of BathType::solids; NaN: none
  double cost = 0;        ///< of everything put in since the start, the tank's currency
  double waste_L = 0;     ///< bled and decanted since the start
  double drag_out_L = 0;  ///< since the start
  double top_up_L = 0;    ///< water since the start
  double turnovers = 0;   ///< metal deposited and lost since the start over what the tank holds at its aim
};

/// How far the elements and the charge are from balancing over a whole run: what is in the tank now, less
/// what was, less everything put in, plus everything taken out; relative to the largest of these.
using Balance = std::map<std::string, double>;

struct Run {
  std::vector<Day> days;
  bath::TankState end;
  Balance balance;  ///< per component, "charge" among them
};

/// Why a limit is one.
enum class Cause : std::uint8_t { window, by_product, solid_at_work, solid_at_rest };
[[nodiscard]] std::string_view name(Cause cause);

struct LimitMet {
  std::string name;  ///< "orthophosphite above 120 g/L", "Na2CO3.10H2O at 15 degC"
  Cause cause = Cause::window;
  std::string quantity;    ///< id; empty: a solid
  double g_per_L = 0;      ///< of a quantity
  bool from_below = true;  ///< met as the level rises
  /// Day it is met, by linear interpolation; of the run itself, or percentiles of the samples. Nothing: not
  /// within the horizon ("never" is said where it also settles below it).
  std::optional<double> day, day_p05, day_p50, day_p95;
  double share = 0;  ///< of the samples that meet it within the horizon; of a single run 0 or 1
};

/// Percentiles of the samples, per day.
struct Band {
  std::vector<double> p05, p50, p95;
};

struct Bands {
  std::vector<int> day;
  std::vector<Band> quantity;       ///< in the order of BathType::quantities
  std::vector<Band> working, idle;  ///< headroom, log10
  Band pH, cost, waste_L;
  std::vector<LimitMet> limits;
  int samples = 0;
};

struct Prepared;

class Forecast {
 public:
  /// Fails on uses, quantities and chemicals nobody knows, aims that are not the tank's, figures that cannot
  /// be.
  static Result<Forecast> prepare(const bath::Tank& tank, const bath::Chemistry& chemistry,
                                  const Policy& policy);

  /// One run from a state, with the policy as it stands or one draw of it.
  ///   Within a shift losses are a constant rate k = (drag-out + bleed)/V and inputs a constant rate p, so
  ///   dn/dt = p - k n, solved exactly: n(t) = n e^(-kt) + p/k (1 - e^(-kt)); k -> 0 is n + p t.
  ///   The volume is kept at the mark with top-up water. What charge the effects of a use and the deposition
  ///   leave is made up in H^+ (electrolysis of water). Additions by analysis, decants and freeze-outs happen
  ///   at the end of their day, in this order: decant, freeze-out, additions.
  /// Fails where the tank runs out of room for its salts or its equilibrium cannot be solved, with the day.
  [[nodiscard]] Result<Run> run(const bath::TankState& start, const Draw* draw = nullptr) const;

  /// When each limit is met in a run.
  [[nodiscard]] std::vector<LimitMet> limits(const Run& run) const;

  /// `samples` runs with everything uncertain drawn (Uncertain; BathType's efficiencies and effects; start
  /// levels with u_level_rel), on `threads` threads; the same seed gives the same bits whatever the number of
  /// threads. `progress` is called with the share done and may return false to stop (Fault::refused).
  struct Sampling {
    int samples = 1000;
    std::uint64_t seed = 1;
    unsigned threads = 2;
    double u_level_rel = 0.01;
  };
  [[nodiscard]] Result<Bands> sample(const bath::TankState& start, const Sampling& sampling,
                                     const std::function<bool(double)>& progress = {}) const;

  /// Where the levels settle if all goes on like this, g/L per quantity: the mean of a round of the calendar after 25 times
  /// the time constant. Nothing where they do not (nothing leaves the tank).
  [[nodiscard]] Result<std::optional<std::vector<double>>> steady_state(const bath::TankState& start) const;

  /// Extra litres a day to bleed so that a quantity settles at `g_per_L`; nothing where it settles below
  /// without.
  [[nodiscard]] Result<std::optional<double>> bleed_to_hold(const bath::TankState& start,
                                                            const std::string& quantity,
                                                            double g_per_L) const;

  [[nodiscard]] const Policy& policy() const;
  [[nodiscard]] const bath::Chemistry& chemistry() const;

 private:
  std::shared_ptr<const Prepared> prepared_;
};

}  // namespace bathwright::forecast
