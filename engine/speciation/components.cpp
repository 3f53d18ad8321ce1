#include <Eigen/Dense>
#include <algorithm>
#include <bathwright/activity/model.hpp>
#include <bathwright/speciation/components.hpp>
#include <cmath>
#include <limits>
#include <optional>
#include <set>

namespace bathwright::speciation {
namespace {

using matter::Formula;

std::set<std::string> heavy_elements(const Formula& formula) {
  std::set<std::string> elements;
  for (const matter::Atom& atom : formula.atoms())
    if (atom.element != "H" && atom.element != "O") elements.insert(atom.element);
  return elements;
}

struct Candidate {
  std::string name;
  Formula formula;
};

constexpr double integer_tolerance = 1e-9;

bool is_positive_integer(double x) { return x > 0.5 && std::abs(x - std::round(x)) < integer_tolerance; }

/// Whether the chosen species with free H^+ (optional) and H2O (optional) make up the formula exactly; the
/// coefficients of the species, then H^+, then H2O.
std::optional<Eigen::VectorXd> coefficients(const Formula& formula,
                                            const std::vector<const Candidate*>& chosen,
                                            bool free_protons_and_water) {
  std::set<std::string> elements{"H", "O"};
  for (const auto& element : heavy_elements(formula)) elements.insert(element);
  const auto rows = static_cast<Eigen::Index>(elements.size() + 1);
  const auto n = static_cast<Eigen::Index>(chosen.size());
  Eigen::MatrixXd A = Eigen::MatrixXd::Zero(rows, n + (free_protons_and_water ? 2 : 0));
  Eigen::VectorXd b(rows);
  Eigen::Index row = 0;
  for (const std::string& element : elements) {
    for (Eigen::Index k = 0; k < n; ++k)
      A(row, k) = chosen[static_cast<std::size_t>(k)]->formula.count(element);
    if (free_protons_and_water && element == "H") A(row, n) = 1, A(row, n + 1) = 2;
    if (free_protons_and_water && element == "O") A(row, n + 1) = 1;
    b(row++) = formula.count(element);
  }
  for (Eigen::Index k = 0; k < n; ++k) A(row, k) = chosen[static_cast<std::size_t>(k)]->formula.charge();
  if (free_protons_and_water) A(row, n) = 1;
  b(row) = formula.charge();
  const Eigen::ColPivHouseholderQR<Eigen::MatrixXd> qr(A);
  if (qr.rank() < A.cols()) return std::nullopt;
  Eigen::VectorXd x = qr.solve(b);
  if ((A * x - b).lpNorm<Eigen::Infinity>() > integer_tolerance) return std::nullopt;
  for (Eigen::Index k = 0; k < n; ++k)
    if (!is_positive_integer(x(k))) return std::nullopt;
  return x;
}

/// Whether every ligand the formula names by its token is named by a chosen species too: a saccharinate is no
/// mixture that happens to have its atoms.
bool keeps_ligands(const Formula& formula, const std::vector<const Candidate*>& chosen) {
  return std::ranges::all_of(formula.ligands(), [&](const std::string& ligand) {
    return std::ranges::any_of(chosen, [&](const Candidate* species) {
      return std::ranges::count(species->formula.ligands(), ligand) > 0;
    });
  });
}

/// Species of `names` that hold only elements of the formula, and at least one besides H and O.
std::vector<Candidate> candidates(const Formula& formula, const std::vector<std::string>& names) {
  const std::set<std::string> wanted = heavy_elements(formula);
  std::vector<Candidate> found;
  for (const std::string& name : names) {
    auto parsed = Formula::parse(name);
    if (!parsed) continue;
    const std::set<std::string> has = heavy_elements(*parsed);
    if (!has.empty() && std::includes(wanted.begin(), wanted.end(), has.begin(), has.end()))
      found.push_back({name, *std::move(parsed)});
  }
  return found;
}

/// Offers every set of up to four candidates, small sets first, until one is good enough (true).
template <class Offer>
void each_set(const std::vector<Candidate>& from, Offer offer) {
  constexpr std::size_t largest = 4;
  std::vector<const Candidate*> chosen;
  auto choose = [&](auto&& self, std::size_t start, std::size_t wanted) -> bool {
    if (wanted == 0) return offer(chosen);
    for (std::size_t i = start; i + wanted <= from.size(); ++i) {
      chosen.push_back(&from[i]);
      if (self(self, i + 1, wanted - 1)) return true;
      chosen.pop_back();
    }
    return false;
  };
  for (std::size_t size = 1; size <= std::min(largest, from.size()); ++size)
    if (choose(choose, 0, size)) return;
}

const SpeciesData* species_with_composition(const Formula& formula, const Equilibria& equilibria) {
  if (const auto named = equilibria.species().find(formula.text()); named != equilibria.species().end())
    return &named->second;
  for (const auto& [name, data] : equilibria.species()) {
    const auto parsed = Formula::parse(name);
    if (parsed && parsed->charge() == formula.charge() && matter::same_composition(*parsed, formula))
      return &data;
  }
  return nullptr;
}

}  // namespace

Result<Parts> parts_of(const Formula& formula, const Equilibria& equilibria) {
  if (heavy_elements(formula).empty()) {  // water, acid and alkali themselves
    const double protons = formula.charge(), oxygen = formula.count("O");
    if (formula.count("H") == 2 * oxygen + protons) {
      Parts parts;
      if (protons != 0) parts.basis["H^+"] = protons;
      parts.water = oxygen;
      return parts;
    }
  }
  // Several sets may fit the atoms (ammonium sulfate also reads as sulfamate, ammonia and water): the one
  // that makes or takes up least water beside the crystal water is what the formula means, and the smallest
  // of those.
  Parts parts;
  double least_water = std::numeric_limits<double>::infinity();
  each_set(candidates(formula, equilibria.basis()), [&](const auto& chosen) {
    const auto x = keeps_ligands(formula, chosen) ? coefficients(formula, chosen, true) : std::nullopt;
    if (!x) return false;
    const auto n = static_cast<Eigen::Index>(chosen.size());
    const double protons = (*x)(n), water = (*x)(n + 1), made = std::abs(water - formula.crystal_water());
    if (made > least_water - integer_tolerance) return false;
    least_water = made;
    parts = {};
    for (std::size_t k = 0; k < chosen.size(); ++k)
      parts.basis[chosen[k]->name] = std::round((*x)(static_cast<Eigen::Index>(k)));
    if (std::abs(protons) > integer_tolerance) parts.basis["H^+"] += std::round(protons);
    parts.water = std::abs(water) > integer_tolerance ? water : 0;
    return made < integer_tolerance;  // nothing makes less; among cyanides there are tens of thousands of sets
  });
  if (std::isfinite(least_water)) return parts;
  std::string known;
  for (const std::string& name : equilibria.basis())
    if (auto parsed = Formula::parse(name)) {
      const auto has = heavy_elements(*parsed), wanted = heavy_elements(formula);
      if (std::any_of(has.begin(), has.end(), [&](const auto& e) { return wanted.contains(e); }))
        known += (known.empty() ? "" : ", ") + name;
    }
  return Problem{Fault::out_of_range, formula.text(), "cannot be made up from the ions the engine knows",
                 known.empty() ? "elements with an equilibrium in the tables" : "a compound of " + known,
                 "Check the formula, or describe the species in a bath type."};
}

Composition nominal_ions(const Formula& formula, const Equilibria& equilibria) {
  if (formula.charge() != 0 || species_with_composition(formula, equilibria)) return {};
  const auto parts = parts_of(formula, equilibria);
  if (!parts) return {};
  // The salt without its crystal water: a reading into ions must not need to make or take up water.
  std::vector<std::string> names{"H^+", "OH^-"};
  for (const auto& [name, data] : equilibria.species()) {
    if (activity::charge_in_name(name) == 0 || name == "H^+" || name == "OH^-") continue;
    const bool within = std::all_of(data.made_of.begin(), data.made_of.end(), [&](const auto& entry) {
      return entry.first == "H^+" || parts->basis.contains(entry.first);
    });
    const bool one_ion = std::count_if(data.made_of.begin(), data.made_of.end(),
                                       [](const auto& entry) { return entry.first != "H^+"; }) == 1;
    if (within && one_ion) names.push_back(name);
  }
  std::vector<Candidate> ions;
  for (const std::string& name : names)
    if (auto parsed = Formula::parse(name)) ions.push_back({name, *std::move(parsed)});
  const auto dry = [&]() -> std::optional<Formula> {
    if (formula.crystal_water() == 0) return formula;
    const std::size_t dot = formula.text().find_first_of("\xC2.");
    auto parsed = Formula::parse(formula.text().substr(0, dot));
    return parsed ? std::optional<Formula>(*std::move(parsed)) : std::nullopt;
  }();
  if (!dry) return {};
  // Two ions are the rule; an acid or base whose anion keeps no proton is preferred (H2SO4 -> 2 H^+ +
  // SO4^2-).
  Composition best;
  for (std::size_t i = 0; i < ions.size(); ++i)
    for (std::size_t j = i + 1; j < ions.size(); ++j) {
      if (ions[i].formula.charge() * ions[j].formula.charge() > 0) continue;
      const auto x = coefficients(*dry, {&ions[i], &ions[j]}, false);
      if (!x) continue;
      Composition reading{{ions[i].name, std::round((*x)(0))}, {ions[j].name, std::round((*x)(1))}};
      const auto size = [](const Composition& c) {
        double total = 0;
        for (const auto& [name, count] : c) total += count;
        return total;
      };
      if (best.empty() || size(reading) > size(best)) best = std::move(reading);
    }
  return best;
}

}  // namespace bathwright::speciation
