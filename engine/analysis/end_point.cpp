#include <algorithm>
#include <bathwright/analysis/end_point.hpp>
#include <bathwright/data/tables.hpp>
#include <bathwright/matter/formula.hpp>
#include <bathwright/speciation/components.hpp>
#include <cassert>
#include <charconv>
#include <cmath>

namespace bathwright::analysis {
namespace {

using speciation::Composition;
using speciation::Equilibria;

constexpr units::Celsius laboratory{25};
constexpr std::string_view edta_as_sold = "Na2H2(edta)";  // dihydrate; its water does not matter here
constexpr double water_kg_per_L = 0.997;                  // at 25 degC; Kell 1975

/// The built-in equilibria of explicit complexes, and those of the bench alone.
const Equilibria& bench_equilibria() {
  static const Equilibria all = [] {
    const auto table = data::built_in_table("analysis/end_point_equilibria.csv", {"log10_K", "uncertainty"});
    std::vector<speciation::StatedSpecies> species;
    std::vector<speciation::StatedSolid> solids;
    for (std::size_t i = 0; i < table.size(); ++i) {
      const auto row = table[i];
      const std::string name(row["name"]), formula(row["formula"]), reaction(row["reaction"]);
      const speciation::Constant constant{
          .log10_K = row.number("log10_K"), .uncertainty = row.number("uncertainty"), .has_dH = false};
      if (formula.empty())
        species.push_back({name, reaction, std::string(row["source"]), row.where(), constant});
      else
        solids.push_back({name, formula, reaction, std::string(row["source"]), "", row.where(), constant});
    }
    auto with = Equilibria::built_in(activity::Convention::association).with(species, solids);
    assert(with);  // a test solves with each of them
    return *std::move(with);
  }();
  return all;
}

Result<Composition> basis_of(const std::string& formula) {
  const auto parsed = matter::Formula::parse(formula);
  if (!parsed) return parsed.problems();
  const auto parts = speciation::parts_of(*parsed, bench_equilibria());
  if (!parts) return parts.problems();
  return parts->basis;
}

Outcome add(Composition& to, const std::string& formula, double mol) {
  const auto basis = basis_of(formula);
  if (!basis) return basis.problems();
  for (const auto& [species, count] : *basis) to[species] += count * mol;
  return Done{};
}

/// One flask, made ready to be solved with more or less of the titrant.
class Bench {
 public:
  /// `all`: every species that is ever in the flask; `pH_by`: the ions of the acid or alkali that holds a pH,
  /// whichever can.
  static Result<Bench> prepare(const Composition& all, double water_kg,
                               const std::vector<std::string>& pH_by) {
    std::vector<std::string> components;
    for (const auto& [species, mol] : all)
      if (species != "H^+") components.push_back(species);
    const auto system = speciation::ChemicalSystem::make(bench_equilibria(), components);
    if (!system) return system.problems();
    const auto shared = std::make_shared<const speciation::ChemicalSystem>(*system);
    auto solver = speciation::Solver::prepare(shared, activity::ModelKind::sit, laboratory);
    if (!solver) return solver.problems();
    Bench bench(shared, *std::move(solver), water_kg);
    for (const std::string& ion : pH_by) bench.pH_by_.push_back(*shared->component(ion));
    return bench;
  }

  /// mol of H^+ that hold this pH.
  [[nodiscard]] Result<double> acid_to(double pH, const Composition& totals) const {
    const auto solved = solve(task_of(totals), pH);
    if (!solved) return solved.problems();
    return solved->held_ph_mol;
  }

  /// mol of a solid that dissolve until the flask is saturated with it; below 0: that is too much already.
  [[nodiscard]] Result<double> takes_up(const Change& change, const Composition& totals) const {
    auto task = task_of(totals);
    task.solids.assign(system_->solids().size(), speciation::SolidRule::report_only);
    const auto rule = [&](const std::string& solid, speciation::SolidRule as) -> bool {
      const auto index = system_->solid(solid);
      if (index) task.solids[*index] = as;
      return index.has_value();
    };
    for (const std::string& solid : change.forms) rule(solid, speciation::SolidRule::may_precipitate);
    if (!rule(change.solid, speciation::SolidRule::in_excess))
      return Problem{Fault::bad_input, change.solid, "cannot form in this flask", "a solid of what is in it",
                     ""};
    const auto solved = solve(task, change.held_pH);
    if (!solved) return solved.problems();
    return -solved->solid_mol[*system_->solid(change.solid)];
  }

  /// -log10 of the free molality of a metal.
  [[nodiscard]] Result<double> pM(const std::string& metal, const Composition& totals,
                                  std::optional<double> pH) const {
    const auto species = std::ranges::find(system_->species(), metal, &speciation::SystemSpecies::name);
    if (species == system_->species().end())
      return Problem{Fault::bad_input, metal, "is not in this flask", "", ""};
    const auto solved = solve(task_of(totals), pH);
    if (!solved) return solved.problems();
    return -std::log10(solved->molality[static_cast<std::size_t>(species - system_->species().begin())]);
  }

 private:
  Bench(std::shared_ptr<const speciation::ChemicalSystem> system, speciation::Solver solver, double water_kg)
      : system_(std::move(system)), solver_(std::move(solver)), water_kg_(water_kg) {}

  [[nodiscard]] Result<speciation::Equilibrium> solve(speciation::Task task, std::optional<double> pH) const {
    if (!pH) return solver_.solve(task);
    Problems problems;
    for (const std::size_t ion : pH_by_) {
      task.pH = speciation::HeldPh{*pH, ion};
      auto solved = solver_.solve(task);
      if (solved) return solved;
      problems = solved.problems();
    }
    return problems;
  }

  [[nodiscard]] speciation::Task task_of(const Composition& totals) const {
    speciation::Task task;
    task.component_mol.assign(system_->components().size(), 0);
    for (const auto& [species, mol] : totals) task.component_mol[*system_->component(species)] = mol;
    task.water_kg = water_kg_;
    return task;
  }

  std::shared_ptr<const speciation::ChemicalSystem> system_;
  speciation::Solver solver_;
  double water_kg_;
  std::vector<std::size_t> pH_by_;
};

/// The ion that a titrant brings beside H^+ or OH^-.
std::string counter_ion_of(const Composition& titrant) {
  const auto ion = std::ranges::find_if(titrant, [](const auto& part) { return part.first != "H^+"; });
  return ion == titrant.end() ? "" : ion->first;
}

Result<double> beyond_by_pH(const TitratedFlask& flask, const Change& change, const Composition& titrant,
                            Composition with_reagents) {
  for (const auto& [species, count] : titrant) with_reagents[species] += count * flask.equivalence_mol;
  const auto bench = Bench::prepare(with_reagents, flask.water_kg, {counter_ion_of(titrant)});
  if (!bench) return bench.problems();
  const auto end = bench->acid_to(change.pH, with_reagents);
  if (!end) return end.problems();
  double acid_mol = *end;
  if (change.start_pH) {
    const auto start = bench->acid_to(*change.start_pH, flask.holds_mol);
    if (!start) return start.problems();
    acid_mol -= *start;
  }
  return acid_mol / titrant.at("H^+");  // alkali brings less than none
}

Result<double> beyond_by_solid(const TitratedFlask& flask, const Change& change, const Composition& titrant,
                               const Composition& with_reagents) {
  const auto solid = basis_of(change.solid);
  if (!solid) return solid.problems();
  // The metal of the titrant is its only part that the solid has.
  const auto metal =
      std::ranges::find_if(titrant, [&](const auto& part) { return solid->contains(part.first); });
  if (metal == titrant.end())
    return Problem{Fault::bad_input, change.solid, "has nothing of " + flask.titrant, "", ""};
  const double titrant_per_solid = solid->at(metal->first) / metal->second;

  Composition all = with_reagents;
  for (const Composition& more : {titrant, *solid, Composition{{"Na^+", 0}, {"NO3^-", 0}}})
    for (const auto& [species, count] : more) all[species] += 0;
  const auto bench = Bench::prepare(all, flask.water_kg, {"Na^+", "NO3^-"});
  if (!bench) return bench.problems();
  // What the solid takes up stands for titrant, but brings its other ion too: repeated until it takes up
  // none.
  double beyond = 0;
  constexpr int most_turns = 40;
  for (int turn = 0; turn < most_turns; ++turn) {
    Composition now = with_reagents;
    for (const auto& [species, count] : titrant) now[species] += count * (flask.equivalence_mol + beyond);
    const auto taken = bench->takes_up(change, now);
    if (!taken) return taken.problems();
    beyond = std::max(beyond + *taken * titrant_per_solid, -0.999 * flask.equivalence_mol);
    if (std::abs(*taken) < 1e-6 * flask.equivalence_mol) return beyond;
  }
  return Problem{Fault::not_converged, change.solid, "its first appearance was not found", "", ""};
}

/// The titrant after which no more than 10^-pM of the metal is free, the pH held by the buffer.
Result<double> beyond_by_metal(const TitratedFlask& flask, const Change& change, const Composition& titrant,
                               const Composition& with_reagents) {
  Composition all = with_reagents;
  for (const Composition& more : {titrant, Composition{{"Na^+", 0}, {"Cl^-", 0}}})
    for (const auto& [species, count] : more) all[species] += 0;
  const auto bench = Bench::prepare(all, flask.water_kg, {"Cl^-", "Na^+"});
  if (!bench) return bench.problems();
  // pM rises with the titrant: halving between nine tenths and eleven tenths of the equivalence.
  double low = -0.1 * flask.equivalence_mol, high = 0.1 * flask.equivalence_mol;
  constexpr int halvings = 24;
  for (int turn = 0; turn < halvings; ++turn) {
    const double beyond = (low + high) / 2;
    Composition now = with_reagents;
    for (const auto& [species, count] : titrant) now[species] += count * (flask.equivalence_mol + beyond);
    const auto pM = bench->pM(change.metal, now, change.held_pH);
    if (!pM) return pM.problems();
    (*pM < change.pM ? low : high) = beyond;
  }
  constexpr double at_an_end = 0.0999;
  if (std::abs(low) > at_an_end * flask.equivalence_mol)
    return Problem{Fault::out_of_range, change.metal,
                   "the indicator does not change within a tenth of the equivalence", "", ""};
  return (low + high) / 2;
}

/// A row of end_points.csv.
struct EndPoint {
  std::string indicator;
  std::optional<std::map<std::string, double>> contains;  ///< per mol of analyte; nothing: the bath
  double flask_L = 0;
  Change change;
  double from_pH = 0, to_pH = 0;  ///< 0: none
};

/// "KI 3.01|NaOH 37.5" by formula, times `unit`.
std::map<std::string, double> amounts(const std::vector<std::string>& list, double unit) {
  std::map<std::string, double> all;
  for (const std::string& entry : list) {
    const std::size_t space = entry.rfind(' ');
    double value = 0;
    std::from_chars(entry.data() + space + 1, entry.data() + entry.size(), value);
    all[entry.substr(0, space)] = value * unit;
  }
  return all;
}

const EndPoint* end_point_of(const std::string& method) {
  static const auto all = [] {
    const auto table = data::built_in_table(
        "analysis/end_points.csv", {"flask_mL", "start_pH", "end_pH", "from_pH", "to_pH", "held_pH", "pM"});
    const auto given = [](double value) {
      return std::isfinite(value) ? std::optional(value) : std::nullopt;
    };
    std::map<std::string, EndPoint, std::less<>> read;
    for (std::size_t i = 0; i < table.size(); ++i) {
      const auto row = table[i];
      EndPoint e;
      e.indicator = row["indicator"];
      if (row["contains"] != "bath") e.contains = amounts(row.list("contains"), 1);
      e.flask_L = row.number("flask_mL") / 1000;
      e.change.adds_mol = amounts(row.list("adds"), 1e-3);
      e.change.start_pH = given(row.number("start_pH"));
      e.change.pH = given(row.number("end_pH")).value_or(0);
      e.from_pH = given(row.number("from_pH")).value_or(0);
      e.to_pH = given(row.number("to_pH")).value_or(0);
      e.change.solid = row["solid"];
      e.change.forms = row.list("forms");
      e.change.held_pH = given(row.number("held_pH"));
      e.change.metal = row["metal"];
      e.change.pM = given(row.number("pM")).value_or(0);
      read.emplace(row["method"], std::move(e));
    }
    return read;
  }();
  const auto found = all.find(method);
  return found == all.end() ? nullptr : &found->second;
}

}  // namespace

Result<double> titrant_beyond_equivalence(const TitratedFlask& flask, const Change& change) {
  const auto titrant = basis_of(flask.titrant == "EDTA" ? std::string(edta_as_sold) : flask.titrant);
  if (!titrant) return titrant.problems();
  Composition with_reagents = flask.holds_mol;
  for (const auto& [formula, mol] : change.adds_mol)
    if (const auto added = add(with_reagents, formula, mol); !added) return added.problems();
  if (!change.metal.empty()) return beyond_by_metal(flask, change, *titrant, with_reagents);
  return change.solid.empty() ? beyond_by_pH(flask, change, *titrant, std::move(with_reagents))
                              : beyond_by_solid(flask, change, *titrant, with_reagents);
}

Result<EndPointBias> end_point_bias(const Titration& t, const Method& method, const bath::Quantity& quantity,
                                    const bath::Chemistry& chemistry, const bath::TankState& state) {
  const auto unknown = [&](std::string why) {
    return Problem{Fault::out_of_range, method.id, std::move(why), "", ""};
  };
  const EndPoint* row = end_point_of(method.id);
  const auto per_analyte = quantity_per_analyte(method, quantity);
  if (method.kind != Kind::direct) return unknown("only the end points of direct titrations are computed");
  if (!row) return unknown("no constant is known of what " + method.indicator + " shows");
  if (!per_analyte) return unknown("the method does not find this quantity");

  const double sample_L = t.diluted_to.v > 0 ? t.sample.v * t.aliquot.v / t.diluted_to.v : t.sample.v;
  const double share = sample_L / chemistry.volume_L(state);
  const double analyte_mol = chemistry.quantity_mol(quantity, state.component_mol) * share / *per_analyte;
  TitratedFlask flask;
  flask.titrant = method.titrant;
  flask.equivalence_mol = analyte_mol / method.mol_per_mol;
  if (!(flask.equivalence_mol > 0)) return unknown("there is none of it in the flask");
  const double titrant_mol_per_L = t.titrant.v * t.factor;
  flask.water_kg = (row->flask_L + flask.equivalence_mol / titrant_mol_per_L) * water_kg_per_L;
  if (row->contains) {
    for (const auto& [formula, count] : *row->contains)
      if (const Outcome added = add(flask.holds_mol, formula, count * analyte_mol); !added)
        return added.problems();
  } else {
    // A component that a bath counts as a whole (iron as Fe(CN)6^4-) is a species of the bench.
    for (std::size_t i = 0; i < state.component_mol.size(); ++i) {
      if (state.component_mol[i] == 0) continue;
      if (const Outcome added =
              add(flask.holds_mol, chemistry.components()[i], state.component_mol[i] * share);
          !added)
        return added.problems();
    }
  }

  const auto mL_at = [&](std::optional<double> pH) -> Result<double> {
    Change change = row->change;
    if (pH) change.pH = *pH;
    const auto beyond = titrant_beyond_equivalence(flask, change);
    if (!beyond) return beyond.problems();
    return *beyond / titrant_mol_per_L * 1000;
  };
  const auto mL = mL_at(std::nullopt);
  if (!mL)
    return Problem{Fault::not_converged, method.id,
                   "its flask could not be solved: " + mL.problems().front().text(), "", ""};
  EndPointBias bias{
      quantity.id, method.id, row->indicator, *mL, *mL * titrant_mol_per_L / 1000 / flask.equivalence_mol,
      *mL,         *mL};
  if (row->from_pH > 0 && row->change.metal.empty()) {
    const auto from = mL_at(row->from_pH), to = mL_at(row->to_pH);
    if (from) bias.from_mL = *from;
    if (to) bias.to_mL = *to;
  }
  return bias;
}

}  // namespace bathwright::analysis
