// The interlock on gases that kill: what a step may do to the gas over the tank, by equilibrium.
//
// A partial pressure at equilibrium is that of still air under a lid. Normal baths exceed breathing limits
// there (HF over a mixed-acid pickle stands at 15 times what is immediately dangerous, HCN over copper
// cyanide at the 15 min limit), so the rule looks at what a step does to the tank's own normal state: what
// stands over it at its aims, and at the start of the plan. A step is stopped that brings a gas
//
//   - above its caution level, above 3 times that at the aims, and above that at the start;
//   - above 30 times its immediately dangerous level, whatever is normal;
//
// and one that takes a tank with free cyanide below pH 10.5, or farther below.
//
// Three times is half a pH unit of a weak acid's gas: more than levels that end inside their windows do, less
// than the wrong drum does. Thirty times is our own choice: above every normal bath known here, and beyond
// what local extraction thins out. Where a portion goes in, before it is stirred away, only the second holds,
// and the first for hydrogen cyanide below pH 10.5; a splash of acid or alkali there is brief, and else only
// to be watched. The gas a product gives off in its own drum is not looked at there: drums are the safety
// data sheet's.
#pragma once

#include <bathwright/bath/chemistry.hpp>
#include <bathwright/bath/interlock.hpp>
#include <bathwright/dosing/plan.hpp>

namespace bathwright::dosing {

/// A row of dosing/gas_cautions.csv.
struct GasCaution {
  std::string gas, name;
  double caution_ppm = 0, danger_ppm = 0;  ///< of 1 bar
};
[[nodiscard]] const std::vector<GasCaution>& gas_cautions();

inline constexpr double most_over_normal = 3;
inline constexpr double most_over_danger = 30;
inline constexpr double cyanide_pH_floor = 10.5;  // common practice: cyanide is kept above pH 10.5 to 11

/// What stands over the tank without the plan.
class GasRule {
 public:
  /// `at_aims` where the aims make a state that can be solved.
  GasRule(const bath::Chemistry& chemistry, const speciation::Equilibrium& start,
          const std::optional<speciation::Equilibrium>& at_aims);

  /// One check of the whole tank after a step, and of its pH where it holds free cyanide.
  void check_tank(const speciation::Equilibrium& after, const bath::Held& held,
                  std::vector<Check>& checks) const;
  /// The same at the dosing point.
  void check_dosing_point(const speciation::Equilibrium& there, const matter::StockChemical& stock,
                          std::vector<Check>& checks) const;

 private:
  struct Watched {
    GasCaution caution;
    std::size_t gas;  ///< position in the system's gases
    double start_ppm, aims_ppm;
  };
  void check_cyanide_pH(double pH, const bath::Held& held, std::vector<Check>& checks) const;
  std::vector<Watched> watched_;
  double start_pH_;
};

}  // namespace bathwright::dosing
