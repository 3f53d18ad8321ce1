#include <Eigen/Dense>
#include <algorithm>
#include <bathwright/base/nearest.hpp>
#include <bathwright/bath/chemistry.hpp>
#include <bathwright/speciation/coverage.hpp>
#include <cmath>
#include <cstdio>
#include <numbers>

namespace bathwright::bath {

using speciation::Equilibrium;
using speciation::SolidRule;
using speciation::Solver;
using speciation::Task;
using units::Celsius;

struct Chemistry::Prepared {
  BathType type;
  std::shared_ptr<const speciation::ChemicalSystem> system;
  speciation::Equilibria equilibria;
  Solver working, idle;
  matter::ComponentDensity density;
  std::vector<std::vector<double>> quantity_counts;  ///< per quantity, over the components
  std::vector<std::size_t> watched;                  ///< positions in the system's solids
  std::size_t by_charge;                             ///< component found by charge
  std::size_t counter_ion;                           ///< see Chemistry::counter_ion
};

namespace {

constexpr activity::ModelKind model_for(activity::Convention convention) {
  return convention == activity::Convention::interaction ? activity::ModelKind::pitzer
                                                         : activity::ModelKind::sit;
}

bool is_hydroxide(const speciation::SystemSolid& solid) { return solid.made_of[0] < 0; }

/// mol of a solid that would still dissolve (positive) or would crystallise (negative).
double room_mol(const Solver& solver, const TankState& state, std::size_t solid) {
  Task task = task_of(state);
  task.solids.assign(solver.system().solids().size(), SolidRule::report_only);
  task.solids[solid] = SolidRule::in_excess;
  const auto answer = solver.solve(task);
  return answer ? -answer->solid_mol[solid] : not_given;
}

/// pH at which a hydroxide would begin to form as alkali is added, by secants on its saturation. NaN where
/// they lead nowhere: an amphoteric metal in alkali, whose hydroxide forms as alkali is used up.
double onset_pH(const Solver& solver, const TankState& state, const Equilibrium& now, std::size_t solid,
                std::size_t counter_ion) {
  const double hydroxides = -solver.system().solids()[solid].made_of[0];
  double pH = now.pH() - now.saturation_index[solid] / hydroxides;
  double saturation = 0;
  for (int step = 0; step < 4; ++step) {
    Task task = task_of(state);
    task.pH = speciation::HeldPh{pH, counter_ion};
    const auto held = solver.solve(task);
    if (!held) return not_given;
    saturation = held->saturation_index[solid];
    pH -= saturation / hydroxides;
  }
  constexpr double met = 0.02;  // of a log unit; the last step has gone on from there
  return std::abs(saturation) < met ? pH : not_given;
}

/// The first component that carries charge and is not H^+.
std::size_t first_ion(const speciation::ChemicalSystem& system) {
  for (std::size_t i = 1; i < system.components().size(); ++i)
    if (system.species()[i].charge != 0) return i;
  return 0;
}

}  // namespace

Task task_of(const TankState& state) {
  Task task;
  task.component_mol = state.component_mol;
  task.water_kg = state.water_kg;
  return task;
}

Result<Chemistry> Chemistry::prepare(const BathType& type, Celsius working, Celsius idle) {
  Problems problems;
  const auto within = [&](const char* name, Celsius t, double low, double high) {
    if (t.v >= low && t.v <= high) return;
    char found[32], range[64];
    std::snprintf(found, sizeof found, "%.4g degC", t.v);
    std::snprintf(range, sizeof range, "%.4g to %.4g degC for ", low, high);
    problems.push_back({Fault::out_of_range, name, found, range + type.name, ""});
  };
  within("temperature", working, type.min_C, type.max_C);
  within("idle_temperature", idle, 0, type.max_C);  // cold, a tank only has to be computed, not worked
  if (!problems.empty()) return problems;

  auto equilibria = speciation::Equilibria::built_in(type.convention, type.sets.zinc)
                        .with(type.own_species, type.own_solids);
  if (!equilibria) return equilibria.problems();
  std::vector<std::string> names;
  for (const Component& component : type.components) names.push_back(component.species);
  auto system = speciation::ChemicalSystem::make(*equilibria, names);
  if (!system) return system.problems();
  auto shared = std::make_shared<const speciation::ChemicalSystem>(*std::move(system));
  const auto kind = model_for(type.convention);
  auto at_work = Solver::prepare(shared, kind, working, type.sets.acid);
  if (!at_work) return at_work.problems();
  auto at_rest = Solver::prepare(shared, kind, idle, type.sets.acid);
  if (!at_rest) return at_rest.problems();
  auto density = matter::ComponentDensity::prepare(shared->components());
  if (!density) return density.problems();

  std::vector<std::vector<double>> counts;
  for (const Quantity& quantity : type.quantities) {
    std::vector<double> row(shared->components().size(), 0);
    for (const auto& [name, count] : quantity.counts) {
      const auto at = shared->component(name);
      if (!at)
        problems.push_back({Fault::inconsistent_data, type.id,
                            quantity.id + " counts " + name + ", which is not a component", "", ""});
      else
        row[*at] = count;
    }
    counts.push_back(std::move(row));
  }
  std::vector<std::size_t> watched;
  for (const WatchedSolid& solid : type.solids) {
    const auto at = shared->solid(solid.name);
    if (at) {
      watched.push_back(*at);
      continue;
    }
    std::vector<std::string> known;
    for (const auto& row : shared->solids()) known.push_back(row.name);
    const auto close = nearest(solid.name, known);
    problems.push_back({Fault::inconsistent_data, type.id,
                        "watches " + solid.name + ", which cannot form from its components", "",
                        close ? "Did you mean " + *close + "?" : ""});
  }
  std::optional<std::size_t> by_charge;
  for (const Component& component : type.components)
    if (component.found_by == FoundBy::charge) by_charge = shared->component(component.species);
  if (!by_charge)
    problems.push_back(
        {Fault::inconsistent_data, type.id, "no component is found by charge", "exactly one", ""});
  if (!problems.empty()) return problems;

  Chemistry chemistry;
  chemistry.prepared_ = std::make_shared<const Prepared>(Prepared{
      type, shared, *std::move(equilibria), *std::move(at_work), *std::move(at_rest), *std::move(density),
      std::move(counts), std::move(watched), *by_charge, *by_charge == 0 ? first_ion(*shared) : *by_charge});
  return chemistry;
}

const BathType& Chemistry::type() const { return prepared_->type; }
const std::vector<std::string>& Chemistry::components() const { return prepared_->system->components(); }
std::size_t Chemistry::found_by_charge() const { return prepared_->by_charge; }
std::size_t Chemistry::counter_ion() const { return prepared_->counter_ion; }
const Solver& Chemistry::working() const { return prepared_->working; }
const Solver& Chemistry::idle() const { return prepared_->idle; }
Celsius Chemistry::working_temperature() const { return prepared_->working.temperature(); }
Celsius Chemistry::idle_temperature() const { return prepared_->idle.temperature(); }

double Chemistry::volume_L(const TankState& state) const {
  return prepared_->density.volume_L(state.component_mol, state.water_kg, state.temperature);
}

units::KilogramsPerLitre Chemistry::density(const TankState& state) const {
  return prepared_->density.density(state.component_mol, state.water_kg, state.temperature);
}

double Chemistry::quantity_mol(const Quantity& quantity, std::span<const double> component_mol) const {
  double mol = 0;
  for (const auto& [name, count] : quantity.counts)
    mol += count * component_mol[*prepared_->system->component(name)];
  return mol;
}

double Chemistry::quantity_g_per_L(const Quantity& quantity, const TankState& state) const {
  return quantity_mol(quantity, state.component_mol) * quantity.formula.molar_mass().v / volume_L(state);
}

Result<Equilibrium> Chemistry::speciate(const TankState& state) const {
  return working().solve(task_of(state));
}

Result<TankView> Chemistry::quick_view(const TankState& state) const {
  const auto now = working().solve(task_of(state)), cold = idle().solve(task_of(state));
  if (!now) return now.problems();
  if (!cold) return cold.problems();
  return view_of(state, *now, *cold);
}

TankView Chemistry::view_of(const TankState& state, const Equilibrium& now, const Equilibrium& cold) const {
  const Prepared& p = *prepared_;
  TankView view;
  view.volume_L = volume_L(state);
  view.density_kg_per_L = density(state).v;
  view.pH = now.pH();
  view.ionic_strength = now.ionic_strength;
  view.water_activity = std::exp(now.ln_water_activity);
  for (const Quantity& quantity : p.type.quantities)
    view.quantity_g_per_L.push_back(quantity_g_per_L(quantity, state));
  for (std::size_t j = 0; j < p.system->species().size(); ++j)
    view.species.push_back({p.system->species()[j].name, now.molality[j], std::exp(now.ln_gamma[j]),
                            now.ln_activity[j] / std::numbers::ln10});
  for (std::size_t i = 0; i < p.watched.size(); ++i) {
    const std::size_t k = p.watched[i];
    if (!std::isfinite(now.saturation_index[k])) continue;  // an ion of it is not there at all
    const speciation::SystemSolid& solid = p.system->solids()[k];
    Headroom room;
    room.solid = solid.name;
    room.formula = solid.formula;
    room.sign_in_tank = p.type.solids[i].sign_in_tank;
    room.slow = solid.slow;
    room.working_log10 = -now.saturation_index[k];
    room.idle_log10 = -cold.saturation_index[k];
    room.covers_working = p.working.covers(k);
    room.covers_idle = p.idle.covers(k);
    view.headroom.push_back(std::move(room));
  }
  for (std::size_t g = 0; g < p.system->gases().size(); ++g)
    if (now.gas_bar[g] > 0) view.gases.push_back({p.system->gases()[g].name, now.gas_bar[g]});
  return view;
}

Result<TankView> Chemistry::view(const TankState& state) const {
  const Prepared& p = *prepared_;
  const auto now = p.working.solve(task_of(state)), cold = p.idle.solve(task_of(state));
  if (!now) return now.problems();
  if (!cold) return cold.problems();
  TankView view = view_of(state, *now, *cold);

  for (Headroom& room : view.headroom) {
    const std::size_t k = *p.system->solid(room.solid);
    const speciation::SystemSolid& solid = p.system->solids()[k];
    if (is_hydroxide(solid)) {
      room.forms_above_pH = onset_pH(p.working, state, *now, k, p.counter_ion);
      if (!std::isnan(room.forms_above_pH)) continue;
    }
    const auto formula = matter::Formula::parse(solid.formula);
    if (!formula) continue;
    const double kg_per_mol = formula->molar_mass().v / 1000;
    if (room.covers_working) room.working_kg = kg_per_mol * room_mol(p.working, state, k);
    if (room.covers_idle) room.idle_kg = kg_per_mol * room_mol(p.idle, state, k);
  }

  std::vector<std::string> names;
  std::vector<double> activity;
  for (const SpeciesView& species : view.species) {
    names.push_back(species.name);
    activity.push_back(std::pow(10, species.log10_activity));
  }
  std::vector<std::string> solids;
  for (const speciation::SystemSolid& solid : p.system->solids()) solids.push_back(solid.name);
  for (const Indicator& indicator : p.type.indicators) {
    IndicatorValue value{indicator.id, indicator.label, indicator.meaning, indicator.unit, std::nullopt, {}};
    const auto result = indicator.evaluate({state.temperature.v, view.volume_L, view.pH, view.ionic_strength,
                                            view.quantity_g_per_L, now->molality, activity, names,
                                            now->water_kg, solids, now->saturation_index});
    if (result)
      value.value = *result;
    else
      value.note = result.problems().front().text();
    view.indicators.push_back(std::move(value));
  }

  view.model = activity::name(p.working.model().kind());
  if (view.ionic_strength > p.type.max_ionic_strength)
    view.warnings.push_back("the ionic strength is beyond what " + p.type.name +
                            " was made for: " + p.type.validity);
  const speciation::Coverage covered = speciation::coverage(p.working, *now);
  view.valid = covered.valid;
  view.missing = covered.missing;
  for (const std::string& warning : covered.warnings) view.warnings.push_back(warning);
  for (const std::string& missing : covered.missing) view.warnings.push_back(missing);
  for (std::string& warning :
       p.density.range_warnings(state.component_mol, state.water_kg, state.temperature))
    view.warnings.push_back(std::move(warning));
  std::stable_sort(view.species.begin(), view.species.end(),
                   [](const SpeciesView& a, const SpeciesView& b) { return a.molality > b.molality; });
  return view;
}

Result<TankState> Chemistry::state_from(const std::map<std::string, double>& g_per_L,
                                        std::optional<double> pH, units::Litres volume,
                                        Celsius temperature) const {
  const Prepared& p = *prepared_;
  const std::size_t n = components().size();
  Problems problems;
  if (!(volume.v > 0))
    problems.push_back({Fault::bad_input, "volume", std::to_string(volume.v) + " L", "more than 0", ""});
  const bool by_pH = p.type.acid_by_pH();
  if (by_pH && !pH)
    problems.push_back({Fault::bad_input, "pH", "is not given", "-2 to 16", "Measure it."});
  else if (by_pH && !(*pH > -2 && *pH < 16))
    problems.push_back({Fault::bad_input, "pH", std::to_string(*pH), "-2 to 16", ""});

  // Levels are linear in the totals of the components that are analysed: one row per level given.
  std::vector<const Quantity*> given;
  for (const auto& [id, level] : g_per_L) {
    const Quantity* quantity = p.type.quantity(id);
    if (!quantity)
      problems.push_back({Fault::bad_input, id, "is not a quantity of " + p.type.name, "", ""});
    else if (!std::isfinite(level) || level < 0)
      problems.push_back({Fault::bad_input, id, std::to_string(level) + " g/L", "0 g/L or more", ""});
    else if (!quantity->counts.contains(components()[p.by_charge]))
      given.push_back(quantity);
  }
  if (!problems.empty()) return problems;
  Eigen::MatrixXd rows =
      Eigen::MatrixXd::Zero(static_cast<Eigen::Index>(given.size()), static_cast<Eigen::Index>(n));
  Eigen::VectorXd mol(rows.rows());
  for (Eigen::Index r = 0; r < rows.rows(); ++r) {
    const Quantity& quantity = *given[static_cast<std::size_t>(r)];
    for (const auto& [name, count] : quantity.counts)
      rows(r, static_cast<Eigen::Index>(*p.system->component(name))) = count;
    mol(r) = g_per_L.at(quantity.id) * volume.v / quantity.formula.molar_mass().v;
  }
  TankState state;
  state.component_mol.assign(n, 0);
  state.temperature = temperature;
  if (rows.rows() > 0) {
    const Eigen::CompleteOrthogonalDecomposition<Eigen::MatrixXd> factor(rows);
    const Eigen::VectorXd found = factor.solve(mol);
    // A component is known when its unit vector lies in the row space.
    const Eigen::MatrixXd inside = factor.pseudoInverse() * rows;
    for (const Component& component : p.type.components) {
      if (component.found_by != FoundBy::analysis && component.found_by != FoundBy::book) continue;
      const auto i = static_cast<Eigen::Index>(*p.system->component(component.species));
      const bool known = std::abs(inside(i, i) - 1) < 1e-9;
      if (!known && component.found_by == FoundBy::analysis)
        problems.push_back({Fault::bad_input, component.species, "no level given for it",
                            "an analysis, or a value from the book", ""});
      // Levels that state one thing twice leave a zero at rounding level on either side.
      const double rounding = 1e-12 * mol.cwiseAbs().maxCoeff();
      if (known)
        state.component_mol[static_cast<std::size_t>(i)] = std::abs(found(i)) <= rounding ? 0 : found(i);
      if (known && found(i) < -rounding && i != 0)  // a total of H^+ below zero is alkali
        problems.push_back({Fault::bad_input, component.species, "the levels given make its amount negative",
                            "levels that can be together", "Check the titrations."});
    }
  } else {
    problems.push_back({Fault::bad_input, "", "no levels given", "one for each analysed component", ""});
  }
  if (!problems.empty()) return problems;

  double charge = 0;  // of all but what is found by charge; H^+ that follows from the pH comes later
  for (std::size_t i = 0; i < n; ++i)
    if (i != p.by_charge) charge += p.system->species()[i].charge * state.component_mol[i];
  const int balancing_charge = p.system->species()[p.by_charge].charge;
  const double balancing = -charge / balancing_charge;
  if (balancing < 0 && p.by_charge != 0)
    return Problem{Fault::bad_input, components()[p.by_charge],
                   "the levels leave " + std::to_string(balancing / volume.v) + " mol/L for the counter-ion",
                   "0 or more",
                   "One of the other levels is wrong: check the ions that carry the same charge as it."};
  state.component_mol[p.by_charge] = balancing;
  state.water_kg = volume.v * 0.9;
  const auto fill_up = [&]() -> Outcome {
    for (int step = 0; step < 50; ++step) {
      const double gap = volume.v - volume_L(state);
      state.water_kg += gap;
      if (!(state.water_kg > 0))
        return Problem{Fault::bad_input, "",
                       "the levels leave no room for water in " + std::to_string(volume.v) + " L",
                       "concentrations that can be dissolved", ""};
      if (std::abs(gap) < 1e-12 * volume.v) break;
    }
    return Done{};
  };
  if (!by_pH) {
    if (Outcome filled = fill_up(); !filled) return filled.problems();
    return state;
  }

  auto solver = std::abs(temperature.v - working_temperature().v) < 1e-9
                    ? Result<Solver>(p.working)
                    : p.working.at_temperature(temperature);
  if (!solver) return solver.problems();
  double acid = 0;
  const auto with_acid = [&] {
    state.component_mol[0] = acid;
    state.component_mol[p.by_charge] = balancing - acid / balancing_charge;
  };
  for (int round = 0; round < 20; ++round) {
    with_acid();
    if (Outcome filled = fill_up(); !filled) return filled.problems();
    Task task = task_of(state);
    task.component_mol[0] = 0;
    task.component_mol[p.by_charge] = balancing;
    task.pH = speciation::HeldPh{*pH, p.by_charge};
    const auto held = solver->solve(task);
    if (!held) return held.problems();
    const bool settled = std::abs(held->held_ph_mol - acid) <= 1e-10 * volume.v;
    acid = held->held_ph_mol;
    if (settled) break;
  }
  with_acid();
  return state;
}

Result<Brings> Chemistry::brings_per_mol(const matter::Formula& formula) const {
  auto parts = speciation::parts_of(formula, prepared_->equilibria);
  if (!parts) return parts.problems();
  speciation::Parts brought = *std::move(parts);
  // Carbonate leaves an acid bath as carbon dioxide: CO3^2- + 2 H^+ -> CO2 + H2O.
  if (const auto carbonate = brought.basis.find("CO3^2-");
      carbonate != brought.basis.end() && !prepared_->system->component("CO3^2-")) {
    brought.basis["H^+"] -= 2 * carbonate->second;
    brought.water += carbonate->second;
    brought.basis.erase(carbonate);
  }
  Brings result;
  result.component_mol.assign(components().size(), 0);
  for (const auto& [name, count] : brought.basis) {
    const auto at = prepared_->system->component(name);
    if (!at)
      return Problem{Fault::out_of_range, formula.text(),
                     "brings " + name + ", which is not a component of " + prepared_->type.name, "",
                     "Leave it off the shelf of this tank, or use a bath type that knows it."};
    result.component_mol[*at] += count;
  }
  result.water_kg = brought.water * activity::water_kg_per_mol;
  return result;
}

Result<Brings> Chemistry::brings(const matter::StockChemical& stock) const {
  Brings result{std::vector<double>(components().size(), 0), stock.water_kg_per_kg()};
  const auto take = [&](const std::string& text, double fraction) -> Outcome {
    const auto formula = matter::Formula::parse(text, stock.id);
    if (!formula) return formula.problems();
    auto brought = brings_per_mol(*formula);
    if (!brought) {
      Problems problems = brought.problems();
      for (Problem& problem : problems) problem.where = stock.id;
      return problems;
    }
    const double mol = fraction * 1000 / formula->molar_mass().v;  // per kg of product
    for (std::size_t i = 0; i < result.component_mol.size(); ++i)
      result.component_mol[i] += mol * brought->component_mol[i];
    const std::size_t partner = prepared_->by_charge;
    result.component_mol[partner] -= mol * formula->charge() / prepared_->system->species()[partner].charge;
    result.water_kg += mol * brought->water_kg;
    return Done{};
  };
  if (Outcome taken = take(stock.formula, stock.assay); !taken) return taken.problems();
  for (const matter::Impurity& impurity : stock.contains)
    if (Outcome taken = take(impurity.formula, impurity.fraction); !taken) return taken.problems();
  return result;
}

TankState Chemistry::after(TankState state, const Brings& brings, double kg) {
  for (std::size_t i = 0; i < state.component_mol.size(); ++i)
    state.component_mol[i] += kg * brings.component_mol[i];
  state.water_kg += kg * brings.water_kg;
  return state;
}

}  // namespace bathwright::bath
