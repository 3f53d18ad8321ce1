#include <algorithm>
#include <bathwright/activity/debye_huckel_slope.hpp>
#include <bathwright/base/nearest.hpp>
#include <bathwright/data/tables.hpp>
#include <bathwright/speciation/equilibria.hpp>
#include <bathwright/speciation/reaction.hpp>
#include <cassert>
#include <cmath>
#include <numbers>
#include <optional>
#include <set>

#include "temperature_data.hpp"

namespace bathwright::speciation {
namespace {

std::string without_phase(std::string name) {
  for (const char* phase : {"(s)", "(g)"})
    if (name.ends_with(phase)) name.resize(name.size() - 3);
  return name;
}

/// Carries a constant measured at an ionic strength to zero: log K(0) = log K(I) + sum nu log gamma(I), with
/// Davies' log gamma, which depends on z^2 alone. Sound to about 0.5 mol/kg; the rest is in the uncertainty.
void carry_to_zero(Constant& constant, const Reaction& reaction, double I) {
  double z2 = 0;
  for (const Term& term : reaction.right)
    z2 += term.coefficient * std::pow(activity::charge_in_name(term.name), 2);
  for (const Term& term : reaction.left)
    z2 -= term.coefficient * std::pow(activity::charge_in_name(term.name), 2);
  const double i = std::min(I, 1.0), s = std::sqrt(i);
  const double slope_log10 = 3 * activity::osmotic_slope({25}) / std::numbers::ln10;
  constant.log10_K += -slope_log10 * (s / (1 + s) - 0.3 * i) * z2;
  constant.uncertainty = std::hypot(constant.uncertainty, I <= 0.5 ? 0.1 : I <= 1 ? 0.3 : 0.6);
}

/// "dH estimated", "dH approximate" in a note.
bool calls_dH_rough(std::string_view note) {
  return note.find("dH est") != std::string_view::npos || note.find("dH appr") != std::string_view::npos;
}

/// A reaction that does not read is left to resolve(), which says so.
Constant constant_in(const data::CsvRow& row, const std::string& name, const TemperatureData& temperature) {
  const double dH = row.number("dH_kJ_mol"), dCp = row.number("dCp_J_molK");
  Constant constant{row.number("log10_K"), std::isnan(dH) ? 0 : dH, std::isnan(dCp) ? 0 : dCp,
                    row.number("uncertainty"), !std::isnan(dH)};
  if (const auto reaction = parse_reaction(row["reaction"], row.where()))
    temperature.complete(constant, name, row["set"].empty() ? "main" : std::string(row["set"]),
                         !std::isnan(dCp), calls_dH_rough(row["note"]), *reaction);
  return constant;
}

struct Builder {
  std::vector<std::string> ions;
  std::vector<StatedSpecies> species;
  std::vector<StatedSolid> solids, gases;
};

/// The sets of constants and parameters that a choice loads. With interaction the hydrated sulfates take the
/// constants that were derived with the parameters, hydrogensulfate that of the temperature tables.
std::set<std::string_view> sets_in_use(activity::Convention convention, activity::ZincSet zinc) {
  std::set<std::string_view> sets{"main"};
  if (convention == activity::Convention::association) return sets;
  sets.insert({"estimates", "A", "B", "warm", "sulfate T", "chloride T"});
  if (zinc == activity::ZincSet::chloride) sets.insert("zinc chloride");
  if (zinc == activity::ZincSet::alkaline) sets.insert("zincate");
  return sets;
}

/// Adds a row, or puts it in the place of the row of the same name: a later set supersedes `main`.
template <class Stated>
void supersede(std::vector<Stated>& into, Stated row) {
  const auto same =
      std::find_if(into.begin(), into.end(), [&](const Stated& one) { return one.name == row.name; });
  if (same == into.end())
    into.push_back(std::move(row));
  else
    *same = std::move(row);
}

Builder read_tables(activity::Convention convention, const std::set<std::string_view>& sets) {
  const bool interaction = convention == activity::Convention::interaction;
  const TemperatureData temperature(convention);
  Builder found;
  const data::CsvTable species = data::built_in_table(
      "equilibria/species.csv", {"log10_K", "ionic_strength", "dH_kJ_mol", "dCp_J_molK", "uncertainty"});
  for (std::size_t i = 0; i < species.size(); ++i) {
    const data::CsvRow row = species[i];
    if (!sets.contains(row["set"])) continue;
    if (row["convention"] != "both" && (row["convention"] == "interaction") != interaction) continue;
    supersede(found.species, StatedSpecies{std::string(row["species"]), std::string(row["reaction"]),
                                           std::string(row["source"]), row.where(),
                                           constant_in(row, std::string(row["species"]), temperature),
                                           row.number("ionic_strength")});
  }
  const data::CsvTable pairs = data::built_in_table("activity/pitzer_binary.csv", {});
  for (std::size_t i = 0; i < pairs.size(); ++i)
    if (pairs[i]["set"] == "main")
      for (const char* side : {"cation", "anion"}) found.ions.emplace_back(pairs[i][side]);
  const auto read_phases = [&](const char* path, const char* name_column, const char* name_suffix,
                               std::vector<StatedSolid>& into, const auto& wanted,
                               std::initializer_list<std::string_view> numeric) {
    const data::CsvTable table = data::built_in_table(path, numeric);
    for (std::size_t i = 0; i < table.size(); ++i) {
      const data::CsvRow row = table[i];
      if (!wanted(row)) continue;
      const std::string name(row[name_column]);
      const double low = row.number("min_C"), high = row.number("max_C");
      StatedSolid phase{name,
                        std::string(row["formula"]),
                        std::string(row["reaction"]),
                        std::string(row["source"]),
                        std::string(row["note"]),
                        row.where(),
                        constant_in(row, name + name_suffix, temperature),
                        std::isnan(low) ? 0 : low,
                        std::isnan(high) ? 100 : high,
                        row["kinetics"] == "slow"};
      supersede(into, std::move(phase));
    }
  };
  read_phases("equilibria/solids.csv", "solid", "", found.solids,
              [&](const data::CsvRow& row) { return sets.contains(row["set"]); },
              {"log10_K", "dH_kJ_mol", "dCp_J_molK", "uncertainty", "min_C", "max_C"});
  read_phases("equilibria/gases.csv", "gas", "(g)", found.gases, [](const data::CsvRow&) { return true; },
              {"log10_K", "dH_kJ_mol", "uncertainty"});
  return found;
}

}  // namespace

const Equilibria& Equilibria::built_in(activity::Convention convention, activity::ZincSet zinc) {
  using activity::Convention;
  using activity::ZincSet;
  const auto build = [](Convention c, ZincSet z) {
    const auto sets = sets_in_use(c, z);
    Builder tables = read_tables(c, sets);
    Equilibria all;
    all.convention_ = c;
    all.zinc_ = z;
    if (c == Convention::interaction) {
      const data::CsvTable pairs = data::built_in_table("activity/pitzer_binary.csv", {});
      for (std::size_t i = 0; i < pairs.size(); ++i) {
        const data::CsvRow row = pairs[i];
        if (!sets.contains(row["set"])) continue;
        const auto beside = row.list("beside");
        const auto known = std::find_if(all.fits_.begin(), all.fits_.end(), [&](const Fit& fit) {
          return fit.cation == row["cation"] && fit.anion == row["anion"];
        });
        if (known == all.fits_.end())
          all.fits_.push_back(
              {std::string(row["cation"]), std::string(row["anion"]), {beside.begin(), beside.end()}});
        else
          known->beside.insert(beside.begin(), beside.end());
      }
    }
    all.free_ions_ = std::move(tables.ions);
    all.stated_species_ = std::move(tables.species);
    all.stated_solids_ = std::move(tables.solids);
    all.stated_gases_ = std::move(tables.gases);
    [[maybe_unused]] const Outcome resolved = all.resolve();  // a test reads every row
    assert(resolved);
    all.leave_out_held();
    return all;
  };
  if (convention == Convention::association) {
    static const Equilibria association = build(Convention::association, ZincSet::dilute);
    return association;
  }
  static const Equilibria dilute = build(Convention::interaction, ZincSet::dilute);
  if (zinc == ZincSet::dilute) return dilute;
  static const Equilibria chloride = build(Convention::interaction, ZincSet::chloride);
  if (zinc == ZincSet::chloride) return chloride;
  static const Equilibria alkaline = build(Convention::interaction, ZincSet::alkaline);
  return alkaline;
}

namespace {

/// Whether a is n c + k x with whole n, k >= 1.
bool made_of_both(const Composition& a, const Composition& c, const Composition& x) {
  const auto count = [](const Composition& of, const std::string& name) {
    const auto found = of.find(name);
    return found == of.end() ? 0.0 : found->second;
  };
  const bool of_these = std::all_of(a.begin(), a.end(), [&](const auto& entry) {
    return c.contains(entry.first) || x.contains(entry.first);
  });
  if (!of_these) return false;
  constexpr int most = 12;
  for (int n = 1; n <= most; ++n)
    for (int k = 1; k <= most; ++k) {
      const auto fits = [&](const Composition& names) {
        return std::all_of(names.begin(), names.end(), [&](const auto& entry) {
          const std::string& name = entry.first;
          return count(a, name) == n * count(c, name) + k * count(x, name);
        });
      };
      if (fits(a) && fits(c) && fits(x)) return true;
    }
  return false;
}

}  // namespace

const Equilibria::Fit* Equilibria::held_by(const SpeciesData& species) const {
  const auto known = [&](const std::string& ion) { return species_.find(ion); };
  for (const Fit& fit : fits_) {
    const auto cation = known(fit.cation), anion = known(fit.anion);
    if (cation == species_.end() || anion == species_.end() || fit.beside.contains(species.name)) continue;
    if (species.name == fit.cation || species.name == fit.anion) continue;
    if (made_of_both(species.made_of, cation->second.made_of, anion->second.made_of)) return &fit;
  }
  return nullptr;
}

void Equilibria::leave_out_held() {
  std::vector<std::string> held;
  for (const auto& [name, data] : species_)
    if (held_by(data)) held.push_back(name);
  for (const std::string& name : held) species_.erase(name);
}

Result<Equilibria> Equilibria::with(const std::vector<StatedSpecies>& species,
                                    const std::vector<StatedSolid>& solids) const {
  if (species.empty() && solids.empty()) return *this;
  Equilibria all = *this;
  const auto merge = [](auto& into, const auto& added) {
    for (const auto& one : added) supersede(into, one);
  };
  merge(all.stated_species_, species);
  merge(all.stated_solids_, solids);
  if (Outcome resolved = all.resolve(); !resolved) return resolved.problems();
  Problems twice;
  for (const StatedSpecies& one : species) {
    const auto data = all.species_.find(one.name);
    const Fit* fit = data == all.species_.end() ? nullptr : all.held_by(data->second);
    if (fit)
      twice.push_back({Fault::inconsistent_data, one.where,
                       one.name + " counts an attraction twice: the interaction parameters of " +
                           fit->cation + " with " + fit->anion + " hold it already",
                       "no complex of these two ions alone",
                       "Leave it out, or use the association convention."});
  }
  if (!twice.empty()) return twice;
  all.leave_out_held();
  return all;
}

/// The constant of a row, of `all` as it is, const or not.
template <class All>
auto* Equilibria::stated_in(All& all, std::string_view name) {
  decltype(&all.stated_solids_.front().constant) found = nullptr;
  for (auto& species : all.stated_species_)
    if (species.name == name) found = &species.constant;
  for (auto* phases : {&all.stated_solids_, &all.stated_gases_})
    for (auto& phase : *phases)
      if (!found && phase.name == name) found = &phase.constant;
  return found;
}

const Constant* Equilibria::stated(std::string_view name) const { return stated_in(*this, name); }

Result<Equilibria> Equilibria::with_constant(std::string_view name, const Constant& constant) const {
  Equilibria all = *this;
  Constant* found = stated_in(all, name);
  if (!found)
    return Problem{Fault::bad_input, std::string(name), "no species, solid or gas of the tables", "", ""};
  *found = constant;
  if (Outcome resolved = all.resolve(); !resolved) return resolved.problems();
  all.leave_out_held();
  return all;
}

Result<Equilibria> Equilibria::with_interactions(const std::vector<activity::Interaction>& stated) const {
  Equilibria all = *this;
  Problems problems;
  for (const activity::Interaction& one : stated) {
    for (const std::string& solute : one.solutes) {
      if (species_.contains(solute)) continue;
      std::vector<std::string> names;
      for (const auto& [name, data] : species_) names.push_back(name);
      const auto close = nearest(solute, names);
      problems.push_back({Fault::bad_input, one.where, "no dissolved species is called " + solute,
                          "a species of the tables, as Na^+ or H3BO3",
                          close ? "Did you mean " + *close + "?" : ""});
    }
    if (const Outcome good = activity::check(one); !good)
      problems.insert(problems.end(), good.problems().begin(), good.problems().end());
    if (const auto model = activity::model_with(one.parameter); activity::convention(model) != convention_)
      problems.push_back({Fault::inconsistent_data, one.where,
                          text(one) + " belongs to the model " + std::string(activity::name(model)),
                          "a parameter of the model that is asked for",
                          "Ask for the model " + std::string(activity::name(model)) + "."});
    std::erase_if(all.interactions_, [&](const auto& other) { return same_place(one, other); });
    all.interactions_.push_back(one);
  }
  if (!problems.empty()) return problems;
  return all;
}

Outcome Equilibria::resolve() {
  Problems problems;
  std::map<std::string, std::pair<const StatedSpecies*, Reaction>> formed_by;
  for (const StatedSpecies& stated : stated_species_) {
    if (stated.reaction.empty()) continue;
    auto reaction = parse_reaction(stated.reaction, stated.where);
    if (!reaction)
      problems.insert(problems.end(), reaction.problems().begin(), reaction.problems().end());
    else
      formed_by.insert_or_assign(stated.name, std::pair{&stated, *std::move(reaction)});
  }

  species_.clear();
  std::set<std::string> under_way;
  // Adds `times` of a named species, written over the basis, to a composition.
  struct Total {
    Composition made_of;
    double water = 0;
    Constant constant;
    std::vector<std::string> sources;
  };
  auto resolve_species = [&](auto&& self, const std::string& name,
                             const std::string& where) -> const SpeciesData* {
    if (const auto known = species_.find(name); known != species_.end()) return &known->second;
    const auto row = formed_by.find(name);
    if (row == formed_by.end()) return &species_.insert({name, {name, {{name, 1}}, 0, {}, {}}}).first->second;
    if (!under_way.insert(name).second) {
      problems.push_back({Fault::inconsistent_data, where,
                          "the reaction that forms " + name + " leads back to itself", "",
                          "Write it over species that are not formed from it."});
      return nullptr;
    }
    const StatedSpecies* stated = row->second.first;
    const Reaction& reaction = row->second.second;
    SpeciesData data{name, {}, 0, stated->constant, {stated->source}};
    if (stated->measured_at_ionic_strength > 0)
      carry_to_zero(data.formation, reaction, stated->measured_at_ionic_strength);
    bool formed = false, complete = true;
    const auto take = [&](const Term& term, double sign) {
      if (term.name == name && sign < 0 && term.coefficient == 1 && !formed) {
        formed = true;
        return;
      }
      if (term.name == "H2O") {
        data.water += sign * term.coefficient;
        return;
      }
      const SpeciesData* part = self(self, term.name, stated->where);
      if (!part) {
        complete = false;
        return;
      }
      for (const auto& [basis, count] : part->made_of) data.made_of[basis] += sign * term.coefficient * count;
      data.water += sign * term.coefficient * part->water;
      if (part->made_of.size() > 1 || !part->made_of.contains(term.name)) {
        data.formation.add(part->formation, sign * term.coefficient);
        data.sources.insert(data.sources.end(), part->sources.begin(), part->sources.end());
      }
    };
    for (const Term& term : reaction.left) take(term, 1);
    for (const Term& term : reaction.right) take(term, -1);
    std::erase_if(data.made_of, [](const auto& entry) { return entry.second == 0; });
    under_way.erase(name);
    if (!formed)
      problems.push_back(
          {Fault::inconsistent_data, stated->where, "the reaction does not form one " + name, "", ""});
    if (!formed || !complete) return nullptr;
    return &species_.insert({name, std::move(data)}).first->second;
  };

  for (const StatedSpecies& stated : stated_species_) {
    const auto row = formed_by.find(stated.name);
    if (row == formed_by.end()) {
      if (stated.reaction.empty()) resolve_species(resolve_species, stated.name, stated.where);
      continue;
    }
    resolve_species(resolve_species, stated.name, stated.where);
    for (const auto* side : {&row->second.second.left, &row->second.second.right})
      for (const Term& term : *side)
        if (term.name != "H2O") resolve_species(resolve_species, term.name, stated.where);
  }

  for (const std::string& ion : free_ions_) resolve_species(resolve_species, ion, ion);

  const auto dissolve = [&](const StatedSolid& stated) -> std::optional<Total> {
    auto reaction = parse_reaction(stated.reaction, stated.where);
    if (!reaction) {
      problems.insert(problems.end(), reaction.problems().begin(), reaction.problems().end());
      return std::nullopt;
    }
    Total total{{}, 0, stated.constant, {stated.source}};
    const auto take = [&](const Term& term, double sign) {
      if (term.name == "H2O") {
        total.water += sign * term.coefficient;
        return;
      }
      const SpeciesData* part = resolve_species(resolve_species, term.name, stated.where);
      if (!part) return;
      for (const auto& [basis, count] : part->made_of)
        total.made_of[basis] += sign * term.coefficient * count;
      total.water += sign * term.coefficient * part->water;
      if (part->made_of.size() > 1 || !part->made_of.contains(term.name)) {
        // K of the phase over the basis: dissolve, then take the dissolved species apart.
        total.constant.add(part->formation, -sign * term.coefficient);
        total.sources.insert(total.sources.end(), part->sources.begin(), part->sources.end());
      }
    };
    for (const Term& term : reaction->left)
      if (!term.name.ends_with("(s)") && !term.name.ends_with("(g)")) take(term, -1);
    for (const Term& term : reaction->right) take(term, 1);
    std::erase_if(total.made_of, [](const auto& entry) { return entry.second == 0; });
    return total;
  };
  solids_.clear();
  for (const StatedSolid& stated : stated_solids_)
    if (auto total = dissolve(stated))
      solids_.push_back({stated.name, stated.formula.empty() ? without_phase(stated.name) : stated.formula,
                         std::move(total->made_of), total->water, total->constant, stated.min_C, stated.max_C,
                         stated.slow, std::move(total->sources), stated.note});
  gases_.clear();
  for (const StatedSolid& stated : stated_gases_)
    if (auto total = dissolve(stated))
      gases_.push_back(
          {stated.name, std::move(total->made_of), total->water, total->constant, std::move(total->sources)});

  basis_.clear();
  for (const auto& [name, data] : species_)
    if (data.made_of.size() == 1 && data.made_of.begin()->first == name) basis_.push_back(name);
  if (!problems.empty()) return problems;
  return Done{};
}

}  // namespace bathwright::speciation
