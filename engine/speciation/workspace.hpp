// One solve in dense form: only the components that are present, the species they can form and the phases
// that matter, over a basis that can be changed to the most abundant species.
#pragma once

#include <Eigen/Dense>
#include <bathwright/speciation/solver.hpp>
#include <vector>

namespace bathwright::speciation {

using Matrix = Eigen::MatrixXd;
using Vector = Eigen::VectorXd;
using Index = Eigen::Index;

/// A condition  condition'x + water ln a_w = ln_K  that holds while `active`, with `supply` added to (formed:
/// taken from) the totals per mol. A solid and a held gas supply what they condition (supply = condition); a
/// held pH supplies H^+ with its counter-ion.
struct Phase {
  enum class Kind : std::uint8_t { precipitate, excess, gas, ph };
  Kind kind;
  std::size_t index;  ///< in the system's solids or gases
  Vector condition, supply;
  double water;         ///< of the condition
  double supply_water;  ///< H2O bound per mol
  double ln_K;
  bool active = false;
  double mol = 0;  ///< formed (precipitate, excess), or minus the amount supplied (gas, pH)
};

class Workspace {
 public:
  Workspace(const Solver& solver, const Task& task);

  [[nodiscard]] Index components() const { return A.rows(); }
  [[nodiscard]] Index count() const { return A.cols(); }

  /// ln activity coefficients and ln a_w of the current molalities; species left out of the workspace count
  /// as zero.
  double activity_coefficients(const Vector& molality, Vector& ln_gamma);
  /// Also derivatives for the listed columns (workspace positions), species by column.
  double activity_coefficients(const Vector& molality, Vector& ln_gamma, const std::vector<Index>& columns,
                               Matrix& derivative);

  /// Rewrites everything over the most abundant independent species and present solids. x moves with it.
  void rebase(const Vector& molality, double ln_aw);

  Matrix A;                ///< components x species
  Vector water;            ///< H2O per species
  Vector ln_K;             ///< per species
  Vector charge;           ///< per species
  Vector total;            ///< per component, mol
  double total_water = 0;  ///< mol
  std::vector<Phase> phases;
  std::vector<std::size_t> species;  ///< workspace position -> system position
  Index proton = 0;                  ///< row of H^+ in the first basis

  // The state that the methods move.
  Vector x;         ///< ln activity of the basis
  Vector ln_gamma;  ///< per species
  double ln_aw = 0;
  double water_kg = 1;

  /// ln molality of every species at the current state.
  [[nodiscard]] Vector ln_molality() const;

 private:
  const activity::ActivityModel* model_;
  std::vector<double> full_molality_, full_ln_gamma_;
};

}  // namespace bathwright::speciation
