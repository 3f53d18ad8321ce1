// A solution given by formulae and molalities, brought to equilibrium.
#pragma once

#include <bathwright/matter/formula.hpp>
#include <bathwright/speciation/components.hpp>
#include <bathwright/speciation/sensitivity.hpp>
#include <functional>
#include <map>
#include <optional>

namespace bathwright::reference {

/// mol per kg of water, by formula as the tables write it.
using Recipe = std::map<std::string, double>;

/// What "trace" in a table stands for, mol/kg: too little to act on anything else, far above what water gives
/// off itself.
inline constexpr double trace_molal = 1e-4;

/// Reads "m(NaHCO3)=0.025; m(Na2CO3)=0.025 mol/kg", "c=0.1 mol/L", "5 mass % NH4Cl", "10 g NaH2PO2.H2O per L"
/// and the like; what is stated without a formula is of `system`. mol/L and g/L are taken as in 0.997 kg of
/// water, right to 1 % in the dilute solutions that are stated so (3 % at 100 g/L). Empty where nothing was
/// read.
Recipe read_recipe(const std::string& conditions, const std::string& system);

struct Mixture {
  std::shared_ptr<const speciation::Solver> solver;
  speciation::Task task;
};

/// Fails on a formula that does not read or cannot be made up from known ions.
Result<Mixture> mix(const Recipe& recipe, double t_C, activity::ModelKind model);

/// Molality of each ion, every salt taken as fully dissociated; a substance that gives no ions stands for
/// itself.
speciation::Composition nominal_totals(const Recipe& recipe, activity::ModelKind model);

/// g/mol; NaN for a formula that does not read.
double molar_mass(const std::string& formula);

/// Why the model should not be judged at this composition, or empty: what a user would be told, where the
/// engine calls its own answer no more than indicative (speciation/coverage.hpp).
std::string doubt(const speciation::Solver& solver, const speciation::Equilibrium& answer);

/// Standard uncertainty of a quantity of an answer; of: what it changes by, first order, when the answer
/// shifts. Nothing where the equilibrium has no derivatives.
std::optional<double> standard_uncertainty(const speciation::Solver& solver, const speciation::Task& task,
                                           const speciation::Equilibrium& answer,
                                           const std::function<double(const speciation::Shift&)>& of);

}  // namespace bathwright::reference
