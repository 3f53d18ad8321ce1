#include <algorithm>
#include <bathwright/base/nearest.hpp>
#include <bathwright/speciation/reaction.hpp>
#include <cmath>
#include <map>

#include "type_checks.hpp"

namespace bathwright::plugin_host {
namespace {

using speciation::Equilibria;
using speciation::Term;

constexpr std::string_view solid_phase = "(s)";

std::string hint(const std::string& name, const std::vector<std::string>& known) {
  const auto near = nearest(name, known);
  return near ? "Did you mean '" + *near + "'?" : "";
}

/// Right minus left by element, and the charge; entries that balance are left out.
using Imbalance = std::map<std::string, double>;

/// One table of own reactions at a time.
class OwnReactions {
 public:
  OwnReactions(const bath::BathType& type, Report& report)
      : shared_(Equilibria::built_in(type.convention, type.sets.zinc)), report_(report) {
    for (const auto& [name, data] : shared_.species()) known_.push_back(name);
    for (const auto& own : type.own_species) known_.push_back(own.name);
    known_.emplace_back("H2O");
  }

  void check(const Place& place, const std::string& text, const std::string& formed_or_dissolved) {
    if (text.empty()) return;
    const auto reaction = speciation::parse_reaction(text, "");
    if (!reaction)
      return report_.add(place, reaction.problems().front().what, reaction.problems().front().expected);
    Imbalance difference;
    bool readable = take(place, reaction->left, -1, formed_or_dissolved, difference);
    readable = take(place, reaction->right, 1, formed_or_dissolved, difference) && readable;
    if (!readable) return;
    std::string unequal;
    for (const auto& [element, surplus] : difference)
      if (std::abs(surplus) > 1e-9) unequal += (unequal.empty() ? "" : ", ") + element;
    if (!unequal.empty())
      report_.add(place, "the reaction '" + text + "' does not balance: " + unequal,
                  "the same atoms and charge on both sides");
  }

 private:
  bool take(const Place& place, const std::vector<Term>& side, double sign, const std::string& own_name,
            Imbalance& difference) {
    bool readable = true;
    for (const Term& term : side) {
      std::string_view name = term.name;
      const bool is_solid = name.ends_with(solid_phase);
      if (is_solid) name.remove_suffix(solid_phase.size());
      if (!is_solid && name != own_name && std::ranges::find(known_, name) == known_.end()) {
        report_.add(place, "'" + std::string(name) + "' is no species of the tables or of own_species", "",
                    hint(std::string(name), known_));
        readable = false;
        continue;
      }
      const auto formula = matter::Formula::parse(name);
      if (!formula) {
        report_.add(place, formula.problems().front().what);
        readable = false;
        continue;
      }
      for (const matter::Atom& atom : formula->atoms())
        difference[atom.element] += sign * term.coefficient * atom.count;
      difference["charge"] += sign * term.coefficient * formula->charge();
    }
    return readable;
  }

  const Equilibria& shared_;
  Report& report_;
  std::vector<std::string> known_;
};

/// The own species or solid that `where` names.
Place own_row(const bath::BathType& type, const std::string& where) {
  const auto row = [&](const auto& rows) {
    return 1 + std::ranges::find_if(rows, [&](const auto& stated) { return stated.where == where; }) -
           rows.begin();
  };
  const std::size_t species = row(type.own_species), solid = row(type.own_solids);
  if (species <= type.own_species.size()) return {"own_species", species, "reaction"};
  if (solid <= type.own_solids.size()) return {"own_solids", solid, "reaction"};
  return {"", 0, where};
}

void check_own_reactions(const bath::BathType& type, Report& report) {
  OwnReactions reactions(type, report);
  for (std::size_t i = 0; i < type.own_species.size(); ++i)
    reactions.check({"own_species", i + 1, "reaction"}, type.own_species[i].reaction,
                    type.own_species[i].name);
  for (std::size_t i = 0; i < type.own_solids.size(); ++i) {
    const std::string& reaction = type.own_solids[i].reaction;
    const std::string start = type.own_solids[i].formula + "(s) = ";
    if (!reaction.starts_with(start))
      report.add({"own_solids", i + 1, "reaction"},
                 "'" + reaction + "' does not dissolve one unit of the solid", "'" + start + "...'");
    reactions.check({"own_solids", i + 1, "reaction"}, reaction, "");
  }
}

void check_components(const bath::BathType& type, const Equilibria& all, Report& report) {
  std::size_t acids = 0, by_charge = 0;
  for (std::size_t i = 0; i < type.components.size(); ++i) {
    const auto& [species, found_by] = type.components[i];
    if (!species.empty() && std::ranges::find(all.basis(), species) == all.basis().end())
      report.add({"components", i + 1, "species"}, "'" + species + "' is not a basis species", "",
                 hint(species, all.basis()));
    const bool is_acid = species == "H^+";
    if ((found_by == bath::FoundBy::pH && !is_acid) || (found_by == bath::FoundBy::book && is_acid))
      report.add({"components", i + 1, "found_by"}, "'" + species + "' and how it is found do not agree",
                 "H^+ by pH, by analysis or by charge, and nothing else by pH");
    if (found_by == bath::FoundBy::charge && activity::charge_in_name(species) == 0)
      report.add({"components", i + 1, "found_by"}, "'" + species + "' has no charge to be found by",
                 "an ion");
    acids += is_acid;
    by_charge += found_by == bath::FoundBy::charge;
  }
  if (acids != 1)
    report.add({"", 0, "components"}, std::to_string(acids) + " of the components are H^+", "one");
  if (by_charge != 1)
    report.add({"", 0, "components"}, std::to_string(by_charge) + " components are found by charge",
               "exactly one");
}

/// Acid that is analysed is found by way of a quantity that counts H^+.
void check_acid_quantity(const bath::BathType& type, Report& report) {
  const bool analysed = std::ranges::any_of(type.components, [](const bath::Component& c) {
    return c.species == "H^+" && c.found_by == bath::FoundBy::analysis;
  });
  const bool stated =
      std::ranges::any_of(type.quantities, [](const bath::Quantity& q) { return q.counts.contains("H^+"); });
  if (analysed && !stated)
    report.add({"", 0, "quantities"}, "H^+ is found by analysis, but no quantity counts it",
               "an acid or alkali: \"H2SO4\" = H^+ / 2, \"NaOH\" = - H^+");
}

void check_watched_solids(const bath::BathType& type, const Equilibria& all, Report& report) {
  std::vector<std::string> known;
  for (const auto& solid : all.solids()) known.push_back(solid.name);
  for (std::size_t i = 0; i < type.solids.size(); ++i) {
    const std::string& name = type.solids[i].name;
    const Place place{"watched_solids", i + 1, "name"};
    const auto solid = std::ranges::find(all.solids(), name, &speciation::SolidData::name);
    if (name.empty()) continue;
    if (solid == all.solids().end()) {
      report.add(place, "'" + name + "' is no solid of the tables of this convention or of own_solids", "",
                 hint(name, known));
      continue;
    }
    for (const auto& [species, count] : solid->gives)
      if (std::ranges::find(type.components, species, &bath::Component::species) == type.components.end())
        report.add(place, "'" + name + "' cannot form: " + species + " is not a component");
  }
}

}  // namespace

void check_chemistry(const bath::BathType& type, Report& report) {
  check_own_reactions(type, report);
  const auto all =
      Equilibria::built_in(type.convention, type.sets.zinc).with(type.own_species, type.own_solids);
  if (!all) {
    for (const Problem& problem : all.problems()) {
      const bool told = std::ranges::any_of(
          report.problems(), [&](const Problem& earlier) { return earlier.what == problem.what; });
      if (told) continue;  // a reaction that cannot be read
      report.add(own_row(type, problem.where), problem.what, problem.expected, problem.try_this);
    }
    return;
  }
  check_components(type, *all, report);
  check_acid_quantity(type, report);
  check_watched_solids(type, *all, report);
}

}  // namespace bathwright::plugin_host
