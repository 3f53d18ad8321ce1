// Tanks that the analysis might have been of: levels, volume and pH drawn together. Read next: chance.hpp.
#pragma once

#include <Eigen/Dense>
#include <bathwright/base/normal.hpp>
#include <bathwright/dosing/chance.hpp>
#include <bathwright/speciation/session.hpp>

namespace bathwright::dosing {

/// A matrix L with L L' = `covariance`, which may be of any rank; negative eigenvalues count as rounding.
[[nodiscard]] Eigen::MatrixXd root_of(const Eigen::MatrixXd& covariance);

/// A vector of independent normal deviates.
[[nodiscard]] Eigen::VectorXd deviates(Normal& normal, Eigen::Index count);

struct DrawnTank {
  bath::TankState state;
  double pH = 0;         ///< read
  bool possible = true;  ///< false: its equilibrium was not found
};

class TankDraw {
 public:
  /// Fails where the tank as read cannot be solved at its temperature.
  static Result<TankDraw> prepare(const bath::Chemistry& chemistry, const bath::TankState& now,
                                  const Spread& spread);

  /// Levels, volume and pH reading; H^+ that follows from the pH only after with_acid(). Nothing after 1000
  /// draws of which none can be: an amount below zero, no counter-ion left, no volume.
  [[nodiscard]] std::optional<DrawnTank> draw(Normal& normal) const;

  /// Gives each tank the acid for its pH, where that is how the acid is found.
  [[nodiscard]] Outcome with_acid(std::vector<DrawnTank>& tanks) const;

 private:
  TankDraw(const bath::Chemistry& chemistry, const bath::TankState& now, const Spread& spread)
      : chemistry_(chemistry), now_(now), spread_(spread) {}
  [[nodiscard]] bool balance_charge(std::vector<double>& component_mol) const;

  const bath::Chemistry& chemistry_;
  const bath::TankState& now_;
  const Spread& spread_;
  double volume_L_ = 0, pH_ = 0;
  Eigen::MatrixXd root_;
  std::optional<speciation::Solver> at_reading_;  ///< at the temperature of the reading
};

}  // namespace bathwright::dosing
