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
  double area = 1, drag_out = 1, drag_in = 1, evaporation = 1, water = 1, carbon_dioxide = 1;
  std::vector<double> work;        ///< per Policy::work: on the amount per shift
  std::vector<double> effects;     ///< per use of the bath type: on its effects
  std::vector<double> efficiency;  ///< per use: on the cathode efficiency, which stays within 0 to 1
  std::vector<double> anode;       ///< per use: on the anode efficiency
  std::vector<double> level;       ///< per quantity that is no salt view: on its level at the start
};

/// Where the model stopped describing the solution.
enum class Beyond : std::uint8_t {
  no,
  curvature,       ///< its Gibbs energy no longer curves upward
  ionic_strength,  ///< more than twice what the bath type was made for, or the model is trusted to
  solid            ///< a solid that forms readily is more than a hundred times beyond its saturation
};

/// What a forecast says of one day: the state at its end.
struct Day {
  int day = 0;                           ///< 0 is the start
  std::vector<double> quantity_g_per_L;  ///< in the order of BathType::quantities
  Beyond beyond = Beyond::no;  ///< else, and on every later day, neither pH nor headroom is told (NaN)
  double pH = 0;
  std::vector<double> working_log10, idle_log10;    ///< headroom, in the order of BathType::solids; NaN: none
  double volume_L = 0;                              ///< the mark, unless what was put in stands above it
  double density_kg_per_L = 0, water_kg_per_L = 0;  ///< at the working temperature; the second: liquid water
  double cost = 0;        ///< of everything put in since the start, water among it, the tank's currency
  double waste_L = 0;     ///< bled, decanted and run over since the start
  double drag_out_L = 0;  ///< since the start
  double top_up_L = 0;    ///< water since the start, a kg a litre; from the rinses where they give it back
  double turnovers = 0;   ///< metal deposited and lost since the start over what the tank holds at its aim
};

/// Where everything came from and went to in a run, from its start to its end.
struct Ledger {
  struct Chemical {
    std::string stock;  ///< id; "water" for what filled the tank up
    double kg = 0, cost = 0;
  };
  std::vector<Chemical> chemicals;
  /// What one thing brought into the tank (above 0) or took out of it: a use, water, drag-in, a chemical,
  /// drag-out, bleed, ...
  struct Flow {
    std::string name;
    std::vector<double> kg;  ///< per quantity, of its formula
  };
  std::vector<Flow> flows;
  /// Metal of the deposits that left undeposited (drag-out that came back, taken off), kg of metal, and what
  /// it would cost to buy again.
  struct Metal {
    std::string quantity, element;
    double dragged_kg = 0, bled_kg = 0, deposited_kg = 0, cost = 0;
  };
  std::vector<Metal> metals;
};

/// The rinses at the end of a run, and what went to waste treatment.
struct Rinsed {
  struct Stage {
    std::string name;
    std::vector<double> g_per_L;  ///< per quantity
  };
  std::vector<Stage> stages;                ///< in the order the work passes them
  double returned_L_per_day = 0;            ///< to the tank, mean of the run
  double waste_L_per_day = 0;               ///< of rinse water to treatment, mean of the run
  std::vector<double> kg_per_day, g_per_L;  ///< of that water, per quantity: mean of the run
  std::vector<double> carried_kg_per_day;   ///< per quantity: that leaves the last rinse on the work
};

/// How far the elements and the charge are from balancing over a whole run: what is in the tank now, less
/// what was, less everything put in, plus everything taken out; relative to the largest of these.
using Balance = std::map<std::string, double>;

/// From which day on something holds, and why.
struct FromDay {
  int day = 0;
  std::string why;
};

struct Run {
  std::vector<Day> days;              ///< to the horizon, or to where it ended
  std::optional<FromDay> indicative;  ///< the constants no longer make a valid answer (speciation::coverage)
  std::optional<FromDay> beyond;      ///< Day::beyond
  Problems ended;  ///< why it ended before, with the day: no room for the salts, no equilibrium
  bath::TankState end;
  Balance balance;  ///< per component and per element; "water" and "charge" among them
  Ledger ledger;
  Rinsed rinsed;
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
  /// Day it is met, by linear interpolation: with everything as the policy states it, and percentiles of the
  /// samples (of a single run the same day). Nothing: not within the horizon ("never" is said where it also
  /// settles below it).
  std::optional<double> day, day_p05, day_p50, day_p95;
  double share = 0;  ///< of the samples that meet it within the horizon; of a single run 0 or 1
};

/// How far one uncertain input moves the day of one limit: with the input one standard uncertainty lower and
/// higher, everything else as it stands.
struct Influence {
  std::string input;  ///< "drag-out", "effects of deposition", "nickel at the start"
  double u_rel = 0;
  std::optional<double> day_lower, day_higher;  ///< nothing: not within the horizon
  double days = 0;  ///< half the way between the two; a day out of sight counts as the horizon
};

/// Influences on one limit, the largest first; those that move it by less than 0.05 days are left out.
struct Sensitivity {
  std::string limit;
  std::vector<Influence> influences;
};

/// What a policy comes to, per day of the horizon, to set beside another.
struct Summary {
  double cost = 0;        ///< chemicals and water
  double waste_cost = 0;  ///< of being rid of what is bled and decanted
  double waste_L = 0, top_up_L = 0;
  double metal_lost_kg = 0, metal_lost_cost = 0;  ///< the second is part of `cost` where it is put back
  std::vector<LimitMet> met;                      ///< within the horizon, the earliest first
  bool holds = false;                             ///< none is met
};

/// Percentiles of the samples, per day.
struct Band {
  std::vector<double> p05, p50, p95;
};

struct Bands {
  std::vector<int> day;             ///< percentiles are of the samples that have not ended (Run::ended)
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
  ///   dn/dt = p - k n, solved exactly: n(t) = n e^(-kt) + p/k (1 - e^(-kt)); k -> 0 is n + p t. With rinses
  ///   n is a vector over tank and stages, and k a matrix.
  ///   The rate of top-up water is what ends the stretch at the mark, its ions with it, evaporation taken
  ///   off. Where more is put in than leaves, the tank stands above the mark, and beyond the freeboard runs
  ///   over. Effects that depend on the state (Use::rate) are taken at the start of each shift and, from a
  ///   first step with them, at its end; the mean of both counts (Heun): the error falls with the square of
  ///   the shift. What charge the effects of a use and the deposition leave is made up in H^+ (electrolysis
  ///   of water, which inert anodes turn to oxygen). Additions by analysis, decants and freeze-outs happen at
  ///   the end of their day, in this order: decant, freeze-out, rinses dumped, additions; additions of every
  ///   so many shifts at the end of the shift. They take the place of water that would have filled the tank
  ///   up.
  /// Where the tank runs out of room for its salts or its equilibrium cannot be solved the run ends, with the
  /// day and the reason; it fails only where there is no answer on day 0.
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

  /// How far each uncertain input moves the day of each limit that is met; u_level_rel as in Sampling.
  [[nodiscard]] Result<std::vector<Sensitivity>> sensitivity(const bath::TankState& start,
                                                             double u_level_rel = 0.01) const;

  /// `met`: limits() of the run.
  [[nodiscard]] Summary summary(const Run& run, const std::vector<LimitMet>& met) const;

  /// Where the levels settle if all goes on like this, g/L per quantity: the mean of a round of the calendar
  /// (shutdowns and seasons apart) once rounds repeat. Nothing where they do not (nothing leaves the tank).
  [[nodiscard]] Result<std::optional<std::vector<double>>> steady_state(const bath::TankState& start) const;

  /// Extra litres a day to bleed so that a quantity settles at `g_per_L`; nothing where it settles below
  /// without. Fails (not_converged) where no bleed does that, with the reason.
  [[nodiscard]] Result<std::optional<double>> bleed_to_hold(const bath::TankState& start,
                                                            const std::string& quantity,
                                                            double g_per_L) const;

  /// How many times the policy's work (and the area that passes with it) the tank can carry so that a
  /// quantity settles at `g_per_L` with the policy's bleed: 0 where it settles above without work, nothing
  /// where it settles below whatever the load (drag-out grows with it). Fails as bleed_to_hold does.
  [[nodiscard]] Result<std::optional<double>> largest_load(const bath::TankState& start,
                                                           const std::string& quantity, double g_per_L) const;

  /// Names of what is uncertain in the policy, as in Influence::input.
  [[nodiscard]] std::vector<std::string> uncertain() const;

  /// What the policy leaves out of account that somebody might expect in it.
  [[nodiscard]] const std::vector<std::string>& notes() const;
  [[nodiscard]] const Policy& policy() const;
  [[nodiscard]] const bath::Chemistry& chemistry() const;

 private:
  std::shared_ptr<const Prepared> prepared_;
};

}  // namespace bathwright::forecast
