#include <Eigen/Dense>
#include <algorithm>
#include <bathwright/regression/fit.hpp>
#include <bathwright/solution/solution.hpp>
#include <cmath>
#include <cstdio>

namespace bathwright::regression {
namespace {

using activity::Interaction;
using Eigen::Index;
using speciation::Constant;
using speciation::Equilibria;
using Vector = Eigen::VectorXd;

double& field(Constant& constant, Parameter parameter) {
  switch (parameter) {
    case Parameter::log10_K:
      return constant.log10_K;
    case Parameter::dH_kJ_per_mol:
      return constant.dH_kJ_per_mol;
    case Parameter::dCp_J_per_molK:
      return constant.dCp_J_per_molK;
  }
  return constant.log10_K;
}

/// The constant that a fit starts from. A dCp that is to be found is one number, not a curve.
Constant start_of(const Task& task, const std::string& name) {
  Constant constant = *task.equilibria.stated(name);
  for (const Unknown& unknown : task.unknowns) {
    const auto* of = std::get_if<OfConstant>(&unknown.what);
    if (!of || of->constant != name || of->parameter != Parameter::dCp_J_per_molK) continue;
    constant.dCp_J_per_molK = constant.heat_capacity_at({25});
    constant.curve = {};
  }
  return constant;
}

double start_of(const Task& task, const Unknown& unknown) {
  if (const auto* interaction = std::get_if<Interaction>(&unknown.what)) {
    for (const Interaction& stated : task.equilibria.interactions())
      if (same_place(stated, *interaction)) return stated.value;
    return activity::value_in_tables(*interaction);
  }
  const auto& of = std::get<OfConstant>(unknown.what);
  Constant start = start_of(task, of.constant);
  return field(start, of.parameter);
}

/// Half the width of a central difference: each moves log10 K by about 1e-4 within the range of temperature,
/// an activity coefficient by as much at 1 mol/kg.
double step_of(const Unknown& unknown) {
  if (std::holds_alternative<Interaction>(unknown.what)) return 1e-4;
  const Parameter parameter = std::get<OfConstant>(unknown.what).parameter;
  return parameter == Parameter::log10_K ? 1e-4 : parameter == Parameter::dH_kJ_per_mol ? 5e-3 : 0.5;
}

Result<Equilibria> equilibria_with(const Task& task, const Vector& unknowns) {
  std::map<std::string, Constant> changed;
  std::vector<Interaction> stated;
  for (std::size_t k = 0; k < task.unknowns.size(); ++k) {
    const double value = unknowns(static_cast<Index>(k));
    if (const auto* interaction = std::get_if<Interaction>(&task.unknowns[k].what)) {
      stated.push_back(*interaction);
      stated.back().value = value;
      stated.back().source = provenance(task);
      continue;
    }
    const auto& of = std::get<OfConstant>(task.unknowns[k].what);
    auto& constant = changed.emplace(of.constant, start_of(task, of.constant)).first->second;
    field(constant, of.parameter) = value;
    constant.has_dH = constant.has_dH || of.parameter != Parameter::log10_K;
  }
  auto all = task.equilibria.with_interactions(stated);
  for (const auto& [name, constant] : changed) {
    if (!all) return all;
    all = all->with_constant(name, constant);
  }
  return all;
}

Problem not_there(const Measurement& m) {
  const char* expected = "a species or gas that can form";
  if (m.quantity == Quantity::solubility) expected = "a solid in excess";
  if (m.quantity == Quantity::mean_activity_coefficient) expected = "a salt, acid or base of the solution";
  return {Fault::bad_input, m.where, m.of + " does not occur in the solution", expected, ""};
}

Result<double> computed(const Measurement& m, activity::ModelKind model, const Equilibria& equilibria) {
  solution::Recipe recipe = m.recipe;
  recipe.model = model;
  const auto solved = solution::solve(recipe, equilibria);
  if (!solved) return solved.problems();
  const auto of = [&](const auto& list, auto value) -> Result<double> {
    for (const auto& one : list)
      if (one.name == m.of) return value(one);
    return not_there(m);
  };
  switch (m.quantity) {
    case Quantity::pH:
      return solved->pH;
    case Quantity::water_activity:
      return solved->water_activity;
    case Quantity::osmotic_coefficient:
      return solved->osmotic_coefficient;
    case Quantity::mean_activity_coefficient:
      if (const auto found = solved->mean_activity.find(m.of); found != solved->mean_activity.end())
        return found->second;
      return not_there(m);
    case Quantity::solubility:
      return of(solved->solids, [](const auto& solid) { return solid.dissolved_mol; });
    case Quantity::molality:
      return of(solved->species, [](const auto& species) { return species.molality; });
    case Quantity::partial_pressure:
      return of(solved->gases, [](const auto& gas) { return gas.partial_pressure_atm; });
  }
  return not_there(m);
}

/// (computed - measured) / uncertainty of what is fitted.
Result<Vector> residuals(const Task& task, const Vector& unknowns) {
  const auto equilibria = equilibria_with(task, unknowns);
  if (!equilibria) return equilibria.problems();
  std::vector<double> found;
  Problems problems;
  for (const Measurement& m : task.measurements) {
    if (m.held_out) continue;
    const auto value = computed(m, task.model, *equilibria);
    if (value) {
      found.push_back((*value - m.value) / m.uncertainty);
      continue;
    }
    for (Problem problem : value.problems()) {
      if (problem.where.empty()) problem.where = m.where;
      problems.push_back(std::move(problem));
    }
  }
  if (!problems.empty()) return problems;
  return Vector(Eigen::Map<const Vector>(found.data(), static_cast<Index>(found.size())));
}

/// d residual / d unknown.
Result<Eigen::MatrixXd> slopes(const Task& task, const Vector& at, Index rows) {
  Eigen::MatrixXd slope(rows, at.size());
  for (Index k = 0; k < at.size(); ++k) {
    const double step = step_of(task.unknowns[static_cast<std::size_t>(k)]);
    Vector up = at, down = at;
    up(k) += step;
    down(k) -= step;
    const auto above = residuals(task, up), below = residuals(task, down);
    if (!above) return above.problems();
    if (!below) return below.problems();
    slope.col(k) = (*above - *below) / (2 * step);
  }
  return slope;
}

Outcome check(const Task& task) {
  Problems problems;
  for (const Unknown& unknown : task.unknowns) {
    if (const auto* interaction = std::get_if<Interaction>(&unknown.what)) {
      if (auto good = task.equilibria.with_interactions({*interaction}); !good)
        problems.insert(problems.end(), good.problems().begin(), good.problems().end());
    } else if (const auto& of = std::get<OfConstant>(unknown.what); !task.equilibria.stated(of.constant)) {
      problems.push_back({Fault::bad_input, unknown.where,
                          "no species, solid or gas is called " + of.constant,
                          "the name of a row, as \"H3BO3\" or \"CaSO4.2H2O (gypsum)\"", ""});
    }
  }
  const auto fitted = static_cast<std::size_t>(std::count_if(
      task.measurements.begin(), task.measurements.end(), [](const auto& m) { return !m.held_out; }));
  if (task.unknowns.empty() || fitted < task.unknowns.size())
    problems.push_back(
        {Fault::bad_input, task.measurements.empty() ? "" : task.measurements.front().where,
         std::to_string(fitted) + " measurements for " + std::to_string(task.unknowns.size()) + " unknowns",
         "at least one unknown and as many measurements that are not held out",
         "Find fewer numbers, or measure more."});
  if (!problems.empty()) return problems;
  return Done{};
}

/// What the measurements leave free: a direction in which the unknowns move and nothing computed does.
///   null   (n, k), over the unknowns divided by `scale`
Problems undetermined(const Task& task, const Eigen::MatrixXd& null, const Vector& scale) {
  constexpr double takes_part = 0.01;
  Problems problems;
  for (Index k = 0; k < null.cols(); ++k) {
    Vector direction = null.col(k).cwiseQuotient(scale);
    std::vector<std::size_t> members;
    Index largest = 0;
    null.col(k).cwiseAbs().maxCoeff(&largest);
    direction /= direction(largest);
    std::string combination;
    for (Index i = 0; i < null.rows(); ++i) {
      if (std::abs(null(i, k)) < takes_part) continue;
      members.push_back(static_cast<std::size_t>(i));
      char share[32];
      std::snprintf(share, sizeof share, "%+.3g", direction(i));
      const Unknown& unknown = task.unknowns[members.back()];
      combination += (combination.empty() ? "" : ", ") + std::string(share) + ' ' +
                     std::string(parameter_name(unknown)) + " of " + owner(unknown);
    }
    const Unknown& first = task.unknowns[members.front()];
    if (members.size() == 1)
      problems.push_back(
          {Fault::bad_input, first.where,
           "the measurements do not determine " + std::string(parameter_name(first)) + " of " + owner(first),
           "",
           "Leave it out, or measure where it matters: dH and dCp need several temperatures, an "
           "interaction needs its solutes."});
    else
      problems.push_back(
          {Fault::bad_input, first.where,
           "the measurements do not determine this combination, along which nothing computed "
           "changes: " +
               combination,
           "", "Leave one of them out, or measure where they act apart, at other strengths or ratios."});
  }
  return problems;
}

/// Relative for what is a ratio, a difference for a logarithm.
double error_of(Quantity quantity, double found, double measured) {
  return quantity == Quantity::pH ? found - measured : found / measured - 1;
}

///   which  &Compared::before or &Compared::computed
std::optional<double> root_mean_square(const Task& task, const std::vector<Compared>& all, bool held_out,
                                       std::optional<double> Compared::*which) {
  double sum = 0, count = 0;
  for (std::size_t k = 0; k < all.size(); ++k) {
    if (all[k].held_out != held_out || !(all[k].*which)) continue;
    sum += std::pow(error_of(task.measurements[k].quantity, *(all[k].*which), all[k].measured), 2);
    ++count;
  }
  if (count == 0) return std::nullopt;
  return std::sqrt(sum / count);
}

}  // namespace

std::string_view parameter_name(const Unknown& unknown) {
  if (const auto* interaction = std::get_if<Interaction>(&unknown.what))
    return activity::name(interaction->parameter);
  return name(std::get<OfConstant>(unknown.what).parameter);
}

std::string owner(const Unknown& unknown) {
  if (const auto* interaction = std::get_if<Interaction>(&unknown.what)) return solutes_of(*interaction);
  return std::get<OfConstant>(unknown.what).constant;
}

std::string_view name(Parameter parameter) {
  switch (parameter) {
    case Parameter::log10_K:
      return "log10_K";
    case Parameter::dH_kJ_per_mol:
      return "dH_kJ_per_mol";
    case Parameter::dCp_J_per_molK:
      return "dCp_J_per_molK";
  }
  return "";
}

std::string_view name(Quantity quantity) {
  switch (quantity) {
    case Quantity::solubility:
      return "solubility";
    case Quantity::pH:
      return "pH";
    case Quantity::water_activity:
      return "water_activity";
    case Quantity::osmotic_coefficient:
      return "osmotic_coefficient";
    case Quantity::mean_activity_coefficient:
      return "mean_activity_coefficient";
    case Quantity::molality:
      return "molality";
    case Quantity::partial_pressure:
      return "partial_pressure";
  }
  return "";
}

std::string provenance(const Task& task) {
  return task.fitted_by.empty() ? "regressed from " + task.source
                                : "fitted to this tank by " + task.fitted_by + ", from " + task.source;
}

Result<Fit> fit(const Task& task) {
  if (Outcome good = check(task); !good) return good.problems();
  Vector at(static_cast<Index>(task.unknowns.size()));
  for (std::size_t k = 0; k < task.unknowns.size(); ++k)
    at(static_cast<Index>(k)) = start_of(task, task.unknowns[k]);
  const Vector start = at;

  constexpr int most_steps = 50, most_halvings = 12;
  constexpr double settled = 1e-4;  // of a standard error
  constexpr double rank_tolerance =
      1e-6;  // of the largest singular value; above the noise of the differences
  auto residual = residuals(task, at);
  if (!residual) return residual.problems();
  Eigen::MatrixXd inverse;  // (J'J)^-1
  Fit result;
  for (bool done = false; !done;) {
    if (result.steps++ == most_steps)
      return Problem{Fault::not_converged, task.unknowns.front().where,
                     "the fit does not settle in " + std::to_string(most_steps) + " steps", "",
                     "Start nearer, or find fewer numbers."};
    const auto slope = slopes(task, at, residual->size());
    if (!slope) return slope.problems();
    // Columns of one length, so that the rank does not depend on units; a column of zeros stays one.
    Vector scale = slope->colwise().norm();
    scale = (scale.array() > 0).select(scale, 1);
    Eigen::JacobiSVD<Eigen::MatrixXd> svd(*slope * scale.cwiseInverse().asDiagonal(),
                                          Eigen::ComputeThinU | Eigen::ComputeFullV);
    svd.setThreshold(rank_tolerance);
    if (svd.rank() < at.size())
      return undetermined(task, svd.matrixV().rightCols(at.size() - svd.rank()), scale);
    const Vector step = -scale.cwiseInverse().cwiseProduct(Vector(svd.solve(*residual)));
    inverse = (slope->transpose() * *slope).inverse();

    double fraction = 1;
    for (int halving = 0;; ++halving, fraction /= 2) {
      auto next = residuals(task, at + fraction * step);
      if (next && next->squaredNorm() <= residual->squaredNorm() * (1 + 1e-12)) {
        at += fraction * step;
        residual = std::move(next);
        break;
      }
      if (halving == most_halvings) {
        fraction = 0;  // no way down from here: the minimum, to the noise of the solver
        break;
      }
    }
    done = fraction == 0 ||
           (fraction == 1 && (step.array().abs() <= settled * inverse.diagonal().array().sqrt()).all());
  }

  result.degrees_of_freedom = static_cast<std::size_t>(residual->size() - at.size());
  if (result.degrees_of_freedom > 0)
    result.reduced_chi2 = residual->squaredNorm() / static_cast<double>(result.degrees_of_freedom);
  const Eigen::MatrixXd covariance = inverse * std::max(1.0, result.reduced_chi2);
  for (Index i = 0; i < at.size(); ++i) {
    result.found.push_back(
        {task.unknowns[static_cast<std::size_t>(i)], start(i), at(i), std::sqrt(covariance(i, i))});
    for (Index k = 0; k < at.size(); ++k) result.covariance.push_back(covariance(i, k));
  }

  const auto fitted = equilibria_with(task, at);
  if (!fitted) return fitted.problems();
  for (const Measurement& m : task.measurements) {
    Compared row{m.label, m.value, m.uncertainty, {}, {}, m.held_out};
    if (const auto before = computed(m, task.model, task.equilibria)) row.before = *before;
    if (const auto now = computed(m, task.model, *fitted)) row.computed = *now;
    result.measurements.push_back(std::move(row));
  }
  result.fit_error = root_mean_square(task, result.measurements, false, &Compared::computed).value_or(0);
  result.test_error = root_mean_square(task, result.measurements, true, &Compared::computed);
  result.test_error_before = root_mean_square(task, result.measurements, true, &Compared::before);
  return result;
}

}  // namespace bathwright::regression
