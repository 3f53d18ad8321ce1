#include "drawn_tank.hpp"

#include <cmath>

namespace bathwright::dosing {

using bath::TankState;
using Eigen::Index;

Eigen::MatrixXd root_of(const Eigen::MatrixXd& covariance) {
  // Of the correlations: what is exact stays exact, however large the others are.
  const Eigen::VectorXd u = covariance.diagonal().cwiseMax(0).cwiseSqrt();
  const Eigen::VectorXd per_u = u.unaryExpr([](double v) { return v > 0 ? 1 / v : 0; });
  const Eigen::SelfAdjointEigenSolver<Eigen::MatrixXd> parts(per_u.asDiagonal() * covariance *
                                                             per_u.asDiagonal());
  return u.asDiagonal() * parts.eigenvectors() * parts.eigenvalues().cwiseMax(0).cwiseSqrt().asDiagonal();
}

Eigen::VectorXd deviates(Normal& normal, Index count) {
  Eigen::VectorXd drawn(count);
  for (double& one : drawn) one = normal();
  return drawn;
}

Result<TankDraw> TankDraw::prepare(const bath::Chemistry& chemistry, const TankState& now,
                                   const Spread& spread) {
  TankDraw draw(chemistry, now, spread);
  draw.volume_L_ = chemistry.volume_L(now);
  const auto rows = static_cast<Index>(now.component_mol.size()) + 1;
  Eigen::MatrixXd covariance = Eigen::MatrixXd::Zero(rows, rows);
  if (!spread.covariance.empty()) {
    if (static_cast<Index>(spread.covariance.size()) != rows * rows)
      return Problem{Fault::bad_input, "covariance", std::to_string(spread.covariance.size()) + " values",
                     std::to_string(rows * rows), ""};
    covariance = Eigen::Map<const Eigen::MatrixXd>(spread.covariance.data(), rows, rows);
  }
  const auto exact = [&](std::size_t component) {
    covariance.row(static_cast<Index>(component)).setZero();
    covariance.col(static_cast<Index>(component)).setZero();
  };
  exact(chemistry.found_by_charge());
  if (chemistry.type().acid_by_pH()) exact(0);
  draw.root_ = root_of(covariance);

  auto solver = std::abs(now.temperature.v - chemistry.working_temperature().v) < 1e-9
                    ? Result<speciation::Solver>(chemistry.working())
                    : chemistry.working().at_temperature(now.temperature);
  if (!solver) return solver.problems();
  const auto read = solver->solve(bath::task_of(now));
  if (!read) return read.problems();
  draw.pH_ = read->pH();
  draw.at_reading_ = *std::move(solver);
  return draw;
}

bool TankDraw::balance_charge(std::vector<double>& component_mol) const {
  const auto& species = chemistry_.working().system().species();
  const std::size_t by_charge = chemistry_.found_by_charge();
  double moved = 0;  // charge that was drawn beside that of the tank as read
  for (std::size_t i = 0; i < component_mol.size(); ++i)
    if (i != by_charge) moved += species[i].charge * (component_mol[i] - now_.component_mol[i]);
  component_mol[by_charge] -= moved / species[by_charge].charge;
  for (std::size_t i = 1; i < component_mol.size(); ++i)
    if (component_mol[i] < 0) return false;
  return true;
}

std::optional<DrawnTank> TankDraw::draw(Normal& normal) const {
  constexpr int most = 1000;
  for (int attempt = 0; attempt < most; ++attempt) {
    DrawnTank drawn{now_, pH_};
    std::vector<double>& mol = drawn.state.component_mol;
    const Eigen::VectorXd error = root_ * deviates(normal, root_.cols());
    for (std::size_t i = 0; i < mol.size(); ++i) mol[i] += error(static_cast<Index>(i));
    const double volume = volume_L_ + error(error.size() - 1);
    drawn.pH += spread_.u_pH * normal();
    if (!balance_charge(mol) || !(volume > 0)) continue;
    // As much water as the salts leave room for.
    drawn.state.water_kg *= volume / volume_L_;
    for (int step = 0; step < 20 && drawn.state.water_kg > 0; ++step) {
      const double gap = volume - chemistry_.volume_L(drawn.state);
      drawn.state.water_kg += gap;
      if (std::abs(gap) < 1e-9 * volume) break;
    }
    if (!(drawn.state.water_kg > 0)) continue;
    return drawn;
  }
  return std::nullopt;
}

Outcome TankDraw::with_acid(std::vector<DrawnTank>& tanks) const {
  if (!chemistry_.type().acid_by_pH()) return Done{};
  const std::size_t by_charge = chemistry_.found_by_charge();
  const int charge = at_reading_->system().species()[by_charge].charge;
  const auto without_acid = [&](std::vector<double> mol) {
    mol[by_charge] += mol[0] / charge;
    mol[0] = 0;
    return mol;
  };
  speciation::Task task = bath::task_of(now_);
  task.component_mol = without_acid(std::move(task.component_mol));
  task.pH = speciation::HeldPh{pH_, by_charge};
  std::vector<speciation::Variant> variants;
  for (const DrawnTank& tank : tanks) {
    speciation::Variant variant{without_acid(tank.state.component_mol), at_reading_->ln_K(), tank.pH};
    for (double& mol : variant.component_mol) mol *= now_.water_kg / tank.state.water_kg;
    variants.push_back(std::move(variant));
  }
  speciation::Session session(*at_reading_);
  return session.solve_variants(
      task, variants, [&](std::size_t v, const Outcome& solved, const speciation::Equilibrium& answer) {
        DrawnTank& tank = tanks[v];
        tank.possible = static_cast<bool>(solved);
        if (!solved) return;
        std::vector<double>& mol = tank.state.component_mol;
        const double acid = answer.held_ph_mol * tank.state.water_kg / now_.water_kg;
        mol[by_charge] -= (acid - mol[0]) / charge;
        mol[0] = acid;
      });
}

}  // namespace bathwright::dosing
