// How an answer moves with what went into it: first derivatives by the implicit function theorem, and the
// uncertainty that follows from them. Not for: large changes (solve again; session.hpp).
#pragma once

#include <bathwright/speciation/solver.hpp>

namespace bathwright::speciation {

/// A small change of what an answer rests on. Empty vectors: no change.
struct Change {
  std::vector<double> component_mol;  ///< per component, mol
  double water_kg = 0;
  std::vector<double> ln_K_species, ln_K_solids, ln_K_gases;
  std::vector<double> ln_gamma;  ///< per species, at fixed composition
  double ln_water_activity = 0;  ///< at fixed composition
  double pH = 0;                 ///< of a held pH
};

/// What an answer does in return, first order.
struct Shift {
  std::vector<double> ln_molality, ln_activity;  ///< per species; 0 where absent
  double ln_water_activity = 0, ln_water_kg = 0;
  std::vector<double> solid_mol;         ///< per solid; 0 where it is not present
  std::vector<double> saturation_index;  ///< per solid, log10
  std::vector<double> ln_gas_bar;        ///< per gas
  double held_ph_mol = 0;

  [[nodiscard]] double pH() const;
};

/// The linearised equilibrium of one answer: balances, mass action and conditions of the present phases with
/// d ln gamma / d m of the model, written over all species (nothing of the solver's own reduction),
/// factorised once. The set of phases is taken as it stands: at a point where a solid is about to appear or
/// to vanish the derivatives are those of the side the answer is on.
class Sensitivity {
 public:
  /// answer: of this task by this solver. Fails (not_converged) where the linear system is singular.
  static Result<Sensitivity> at(const Solver& solver, const Task& task, const Equilibrium& answer);
  ~Sensitivity();
  Sensitivity(Sensitivity&&) noexcept;
  Sensitivity& operator=(Sensitivity&&) noexcept;

  [[nodiscard]] Shift respond(const Change& change) const;

  /// The change that a kelvin makes of constants and coefficients at fixed composition, by central
  /// differences over 0.2 K (one-sided at 0 and 100 degC): the constants are smooth functions of temperature,
  /// tabulated parameters linear between their temperatures. Fails as Solver::prepare.
  static Result<Change> per_kelvin(const Solver& solver, const Equilibrium& answer);

 private:
  struct Parts;
  explicit Sensitivity(std::unique_ptr<Parts> parts);
  std::unique_ptr<Parts> parts_;
};

/// Standard uncertainties of what goes into a solution besides constants and coefficients.
struct InputUncertainty {
  std::vector<double> component_mol;  ///< per component, mol; empty: exact
  double water_kg = 0;
  double temperature_K = 0;
};

/// One standard uncertainty of a constant (Constant::uncertainty_at) or of an interaction
/// (InteractionNote::u_ln_gamma). Doubts of one answer are independent of each other; equal ones of two
/// answers of a system, at other amounts or temperatures, are the same doubt.
struct Doubt {
  enum class Of : std::uint8_t { species, solid, gas, interaction } of;
  std::vector<std::uint32_t> which;  ///< position in the system; of an interaction its kind, then its solutes
  Change change;

  [[nodiscard]] bool same_as(const Doubt& other) const { return of == other.of && which == other.which; }
};

/// All that count in this answer of the solver.
[[nodiscard]] std::vector<Doubt> doubts(const Solver& solver, const Equilibrium& answer);

/// What one standard uncertainty of each source does to an answer, first order: of its doubts and of the
/// inputs. Sources are independent of each other: u of a quantity is the root of the sum of squares of its
/// shifts. Fails as Sensitivity::at.
Result<std::vector<Shift>> independent_shifts(const Solver& solver, const Task& task,
                                              const Equilibrium& answer, const InputUncertainty& input = {});

/// Standard uncertainties of an answer, one sigma, from independent_shifts.
struct Uncertainty {
  double pH = 0, ln_water_activity = 0;
  std::vector<double> ln_molality, ln_activity;     ///< per species
  std::vector<double> solid_mol, saturation_index;  ///< per solid; saturation_index log10
  std::vector<double> ln_gas_bar;                   ///< per gas
};

/// Fails as Sensitivity::at.
Result<Uncertainty> uncertainty(const Solver& solver, const Task& task, const Equilibrium& answer,
                                const InputUncertainty& input = {});

}  // namespace bathwright::speciation
