#include "settle.hpp"

#include <algorithm>
#include <bathwright/speciation/sensitivity.hpp>
#include <cmath>

#include "linear_programme.hpp"

namespace bathwright::dosing {

using bath::Chemistry;
using bath::TankState;

Settling::Settling(const Chemistry& chemistry, const TankState& now, std::vector<Goal> goals,
                   std::vector<Column> columns)
    : chemistry_(chemistry), now_(now), goals_(std::move(goals)), columns_(std::move(columns)) {
  const double volume = chemistry.volume_L(now);
  for (const Column& column : columns_) {
    double per_unit = std::abs(column.brings.water_kg) / volume;
    for (const Goal& goal : goals_)
      if (goal.quantity)
        per_unit =
            std::max(per_unit, std::abs(chemistry.quantity_mol(*goal.quantity, column.brings.component_mol)) *
                                   goal.quantity->formula.molar_mass().v / (goal.unit * volume));
    constexpr double one_molal = 1;  // what moves no goal but the pH
    per_unit = std::max(per_unit, std::abs(column.brings.component_mol[0]) / (one_molal * volume));
    size_.push_back(per_unit > 0 ? 1 / per_unit : 1);
  }
}

TankState Settling::state_after(const std::vector<double>& amount) const {
  TankState state = now_;
  for (std::size_t c = 0; c < columns_.size(); ++c)
    if (amount[c] != 0) state = Chemistry::after(std::move(state), columns_[c].brings, amount[c]);
  return state;
}

/// The deviation of the pH in units: the acid that is missing for it over what a unit takes. Unlike the pH
/// itself, that is nearly linear in what is added, however steep the titration curve. Where the pH cannot be
/// held (its counter-ion runs out), the pH itself.
Result<Row> Settling::pH_row(const Goal& goal, const TankState& state) const {
  const speciation::Solver& solver = chemistry_.working();
  speciation::Task task = bath::task_of(state);
  task.pH = speciation::HeldPh{goal.value, chemistry_.counter_ion()};
  auto answer = solver.solve(task);
  if (!answer) {
    task.pH.reset();
    answer = solver.solve(task);
    if (!answer) return answer.problems();
  }
  const auto sensitivity = speciation::Sensitivity::at(solver, task, *answer);
  if (!sensitivity) return sensitivity.problems();
  double per_mol = 1;
  Row row;
  if (task.pH) {
    speciation::Change higher;
    higher.pH = 1;
    per_mol = 1 / std::max(-sensitivity->respond(higher).held_ph_mol, 1e-12);
    row.deviation = answer->held_ph_mol * per_mol;
  } else {
    row.deviation = answer->pH() - goal.value;
  }
  for (const Column& column : columns_) {
    speciation::Change change;
    change.component_mol = column.brings.component_mol;
    change.water_kg = column.brings.water_kg;
    const speciation::Shift shift = sensitivity->respond(change);
    row.slope.push_back(task.pH ? shift.held_ph_mol * per_mol : shift.pH());
  }
  return row;
}

Outcome Settling::solid_rows(const TankState& state, std::vector<Row>& rows) const {
  for (const bool idle : {false, true}) {
    const auto here = [&](const Goal& goal) { return goal.of == Goal::Of::solid && goal.idle == idle; };
    if (std::ranges::none_of(goals_, here)) continue;
    const speciation::Solver& solver = idle ? chemistry_.idle() : chemistry_.working();
    const speciation::Task task = bath::task_of(state);
    const auto answer = solver.solve(task);
    if (!answer) return answer.problems();
    const auto sensitivity = speciation::Sensitivity::at(solver, task, *answer);
    if (!sensitivity) return sensitivity.problems();
    std::vector<speciation::Shift> shifts;
    for (const Column& column : columns_) {
      speciation::Change change;
      change.component_mol = column.brings.component_mol;
      change.water_kg = column.brings.water_kg;
      shifts.push_back(sensitivity->respond(change));
    }
    for (std::size_t g = 0; g < goals_.size(); ++g) {
      if (!here(goals_[g])) continue;
      const std::size_t k = goals_[g].solid;
      constexpr double far = -10;  // log10: an ion of it is not there
      const bool there = std::isfinite(answer->saturation_index[k]);
      rows[g].deviation = there ? answer->saturation_index[k] - goals_[g].value : far;
      for (const speciation::Shift& shift : shifts)
        rows[g].slope.push_back(there ? shift.saturation_index[k] : 0);
    }
  }
  return Done{};
}

Result<Settled> Settling::at(std::vector<double> amount) const {
  Settled here;
  here.amount = std::move(amount);
  // A trace of everything, so that what is not in the tank yet has a slope.
  std::vector<double> with_traces = here.amount;
  for (std::size_t c = 0; c < columns_.size(); ++c)
    if (with_traces[c] <= 0 && columns_[c].upper > 0) with_traces[c] = 1e-9 * size_[c];
  const TankState state = state_after(with_traces);
  const double volume = chemistry_.volume_L(state);
  std::vector<double> litres(columns_.size());
  for (std::size_t c = 0; c < columns_.size(); ++c) {
    const double unit = 1e-4 * size_[c];
    litres[c] = (chemistry_.volume_L(Chemistry::after(state, columns_[c].brings, unit)) - volume) / unit;
  }
  here.rows.resize(goals_.size());
  if (Outcome found = solid_rows(state, here.rows); !found) return found.problems();
  for (std::size_t g = 0; g < goals_.size(); ++g) {
    const Goal& goal = goals_[g];
    Row& row = here.rows[g];
    switch (goal.of) {
      case Goal::Of::solid:
        break;
      case Goal::Of::volume:
        row.deviation = (volume - goal.value) / goal.unit;
        for (const double L : litres) row.slope.push_back(L / goal.unit);
        break;
      case Goal::Of::level: {
        const double grams = goal.quantity->formula.molar_mass().v;
        const double level = grams * chemistry_.quantity_mol(*goal.quantity, state.component_mol) / volume;
        row.deviation = (level - goal.value) / goal.unit;
        for (std::size_t c = 0; c < columns_.size(); ++c)
          row.slope.push_back(
              (grams * chemistry_.quantity_mol(*goal.quantity, columns_[c].brings.component_mol) -
               level * litres[c]) /
              (volume * goal.unit));
        break;
      }
      case Goal::Of::pH: {
        auto found = pH_row(goal, state);
        if (!found) return found.problems();
        row = *std::move(found);
        break;
      }
    }
    here.merit += penalty(goal, row.deviation);
  }
  for (std::size_t c = 0; c < columns_.size(); ++c) here.merit += columns_[c].price * here.amount[c];
  return here;
}

/// The best amounts within `reach` of the last (in sizes of the columns), as the linearisation sees them.
Result<std::vector<double>> Settling::step(const Settled& from, double reach, double& promised,
                                           bool whole) const {
  const std::size_t n = columns_.size();
  // A column in the programme counts sizes, or whole packages.
  std::vector<double> counted = size_;
  std::vector<std::size_t> in_whole_numbers;
  LinearProgramme lp;
  for (std::size_t c = 0; c < n; ++c) {
    const Column& column = columns_[c];
    const bool packed = whole && column.package > 0;
    if (packed) counted[c] = column.package, in_whole_numbers.push_back(c);
    const double range = reach * size_[c], x = from.amount[c];
    const double low = packed ? column.lower : std::max(column.lower, x - range);
    const double high = packed ? column.upper : std::min(column.upper, x + range);
    lp.add_column(column.price * counted[c], low / counted[c], high / counted[c]);
  }
  for (std::size_t g = 0; g < goals_.size(); ++g) {
    const Row& row = from.rows[g];
    std::vector<double> coefficients(n);
    double at_nothing = row.deviation;
    for (std::size_t c = 0; c < n; ++c) {
      coefficients[c] = row.slope[c] * counted[c];
      at_nothing -= row.slope[c] * from.amount[c];
    }
    // deviation = what is above - what is below, each in its stretches
    for (const bool above : {true, false})
      for (const Stretch& stretch : above ? goals_[g].above : goals_[g].below) {
        lp.add_column(stretch.weight, 0, stretch.width);
        coefficients.resize(lp.objective.size(), 0);
        coefficients.back() = above ? -1 : 1;
      }
    lp.add_row(std::move(coefficients), -at_nothing, -at_nothing);
  }
  auto found = in_whole_numbers.empty() ? solve(lp) : solve_in_whole_numbers(lp, in_whole_numbers);
  if (!found) return found.problems();
  std::vector<double> amount = *std::move(found);
  promised = 0;
  for (std::size_t c = 0; c < amount.size(); ++c) promised += lp.objective[c] * amount[c];
  amount.resize(n);
  for (std::size_t c = 0; c < n; ++c)
    amount[c] = std::clamp(amount[c] * counted[c], columns_[c].lower, columns_[c].upper);
  return amount;
}

Result<Settled> Settling::downhill(Settled best) const {
  constexpr int most_rounds = 60;
  constexpr double enough = 1e-10;  // of what a goal missed by 100 % counts
  constexpr double finest_reach = 1e-10;
  double reach = 10;
  for (int round = 0; round < most_rounds && reach > finest_reach; ++round) {
    double promised = 0;
    auto next = step(best, reach, promised, false);
    if (!next || best.merit - promised <= enough) break;
    double moved = 0;
    for (std::size_t c = 0; c < columns_.size(); ++c)
      moved = std::max(moved, std::abs((*next)[c] - best.amount[c]) / size_[c]);
    auto there = at(*std::move(next));
    const double gained = there ? best.merit - there->merit : -1;
    const double kept = gained / (best.merit - promised);  // of the promise
    if (gained > 0) best = *std::move(there);
    if (kept < 0.25)
      reach = 0.25 * moved;
    else if (kept > 0.75)
      reach = std::max(reach, 2 * moved);
  }
  return best;
}

Result<Settled> Settling::settle(std::vector<double> amount) const {
  auto start = at(std::move(amount));
  if (!start) return start.problems();
  auto best = downhill(*std::move(start));
  if (!best || std::ranges::none_of(columns_, [](const Column& one) { return one.package > 0; })) return best;
  // Whole packages: chosen once, around the amounts that need none; the rest settles around them.
  double promised = 0;
  auto packed = step(*best, HUGE_VAL, promised, true);
  if (!packed) return packed.problems();
  Settling around = *this;
  for (std::size_t c = 0; c < columns_.size(); ++c)
    if (columns_[c].package > 0) around.columns_[c].lower = around.columns_[c].upper = (*packed)[c];
  for (Column& column : around.columns_) column.package = 0;
  return around.settle(*std::move(packed));
}

}  // namespace bathwright::dosing
