// The amounts that come nearest to the goals: linear programmes, each around the last amounts, in steps no
// larger than the linearisation can be trusted. Read next: goals.hpp. Not for: which goals, which chemicals
// (planner.hpp).
#pragma once

#include <cmath>

#include "goals.hpp"

namespace bathwright::dosing {

/// Something a plan may do: stir in a kg of a chemical, take out a litre of bath.
struct Column {
  bath::Brings brings;  ///< per unit
  double price = 0;     ///< per unit, in the weights of goals.hpp
  double lower = 0, upper = HUGE_VAL;
  double package = 0;  ///< above 0: only whole multiples of it
};

/// How the deviation from a goal moves: at the amounts it was taken at, and per unit of each column.
struct Row {
  double deviation = 0;
  std::vector<double> slope;
};

struct Settled {
  std::vector<double> amount;  ///< per column
  double merit = 0;            ///< sum of the penalties and prices
  std::vector<Row> rows;       ///< per goal, at `amount`
};

class Settling {
 public:
  Settling(const bath::Chemistry& chemistry, const bath::TankState& now, std::vector<Goal> goals,
           std::vector<Column> columns);

  /// From `amount` (per column) downhill until no linear programme promises a better sum of penalties and
  /// prices; columns with a package are taken in whole ones. Always ends, at the best amounts met. Fails only
  /// where the tank as it is cannot be solved.
  [[nodiscard]] Result<Settled> settle(std::vector<double> amount) const;

  [[nodiscard]] const std::vector<Goal>& goals() const { return goals_; }
  [[nodiscard]] std::vector<Goal>& goals() { return goals_; }
  [[nodiscard]] const std::vector<Column>& columns() const { return columns_; }
  [[nodiscard]] std::vector<Column>& columns() { return columns_; }
  [[nodiscard]] bath::TankState state_after(const std::vector<double>& amount) const;

 private:
  [[nodiscard]] Result<Settled> at(std::vector<double> amount) const;
  [[nodiscard]] Result<Row> pH_row(const Goal& goal, const bath::TankState& state) const;
  /// Of every goal of a solid; the rows of the others stay empty.
  [[nodiscard]] Outcome solid_rows(const bath::TankState& state, std::vector<Row>& rows) const;
  [[nodiscard]] Result<std::vector<double>> step(const Settled& from, double reach, double& promised,
                                                 bool whole) const;
  [[nodiscard]] Result<Settled> downhill(Settled best) const;

  const bath::Chemistry& chemistry_;
  const bath::TankState& now_;
  std::vector<Goal> goals_;
  std::vector<Column> columns_;
  std::vector<double> size_;  ///< of each column: units that move some goal by about 1
};

}  // namespace bathwright::dosing
