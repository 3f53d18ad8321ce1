// The equilibrium of one task as a system of equations for a general solver: coefficients and the set of
// solids frozen, everything else unknown. What a user who knows both the chemistry and such solvers would
// write. Shares nothing with the engine's solver but the chemical system and the activity model.
#pragma once

#include <bathwright/speciation/solver.hpp>
#include <span>
#include <vector>

namespace bathwright::benchmark {

/// What any method hands in.
struct Answer {
  std::vector<double> molality;   ///< per species, mol/kg of liquid water
  double water_kg = 0;            ///< liquid
  std::vector<double> solid_mol;  ///< per solid of the system
};

/// Unknowns: x_i = ln a_i of each component, ln W (kg of liquid water), p_s / limit_s of each solid present.
/// ln m_j = ln K_j + sum_i A_ij x_i + nu_j ln a_w - ln gamma_j, and n_j = W m_j. Equations:
///   component  ln [sum_(A > 0) A n + S p(+) + (-b)(+)] - ln [sum_(A < 0) |A| n + S p(-) + b(+)] = 0
///   water      ln [W/M_w + sum nu n + sum w p] - ln b_w = 0
///   solid      sum S x + w ln a_w - ln K_s = 0
/// The logarithms keep a poor start near the answer: seen in x, a balance is then nearly a straight line.
class Equations {
 public:
  /// Every component that has a total must have one that is not zero.
  Equations(const speciation::Solver& solver, const speciation::Task& task);

  /// Other totals and water; the solids that may precipitate stay.
  void set_totals(const speciation::Task& task);
  void use(const speciation::Constants& ln_K);

  [[nodiscard]] std::size_t size() const { return components_ + 1 + present_.size(); }

  /// false when a residual is not finite; then nothing in f may be used.
  bool residuals(const double* u, double* f) const;
  /// d f_r / d u_c at jacobian[r * row_step + c * column_step]. false as above.
  bool jacobian(const double* u, double* jacobian, std::size_t row_step, std::size_t column_step) const;

  /// Every component free, H^+ at pH 7, all water liquid, lowered until no species holds more than the total
  /// of any of its components; coefficients of the totals as they stand.
  [[nodiscard]] std::vector<double> cold_start();

  /// Moves ln gamma and ln a_w a share of the way to those of the composition at u. Returns the largest
  /// distance before the move, ln units; infinite where the model has no finite answer.
  double move_coefficients(const std::vector<double>& u, double share);

  /// One change of the set of solids: what has dissolved leaves, else the most supersaturated enters (in the
  /// place of one present with the same ions). u keeps in step. false: nothing to change.
  bool change_solids(std::vector<double>& u);

  /// As the coefficients stand.
  [[nodiscard]] double ln_water_activity() const { return ln_aw_; }

  [[nodiscard]] Answer answer(const std::vector<double>& u) const;

 private:
  struct Term {
    std::size_t component;
    double count;
  };
  struct Row {
    std::vector<Term> terms;
    double water = 0, ln_K = 0;
  };
  struct Solid : Row {
    std::size_t index = 0;  ///< in the system
    double limit_mol = 0;   ///< the most that could form at the cold start: the scale of its unknown
  };
  struct Side {
    double left = 0, right = 0;
  };

  [[nodiscard]] double ln_saturation(const Solid& solid, const double* u) const;
  void amounts(const double* u) const;
  void balances(const double* u) const;

  const activity::ActivityModel* model_;
  std::size_t components_, proton_ = 0, solids_in_system_;
  std::vector<double> total_;
  std::vector<int> charge_;
  double total_water_mol_;
  std::vector<Row> species_;
  std::vector<Solid> solids_;         ///< those that may precipitate
  std::vector<std::size_t> present_;  ///< positions in solids_
  std::vector<double> ln_gamma_, fresh_ln_gamma_;
  double ln_aw_ = 0;
  // Room for one evaluation.
  mutable std::vector<double> mol_;    ///< n_j
  mutable std::vector<Side> balance_;  ///< per component, then water
};

}  // namespace bathwright::benchmark
