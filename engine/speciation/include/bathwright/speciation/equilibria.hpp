// The equilibria the engine knows: dissolved species, solids and gases, each written over basis species, H^+
// and H2O, with a constant that carries its uncertainty and source. Built in from engine/data/equilibria; a
// bath type may add its own. Not for: numbers at one temperature (system.hpp).
#pragma once

#include <bathwright/activity/make_model.hpp>
#include <bathwright/base/result.hpp>
#include <bathwright/speciation/constant.hpp>
#include <map>
#include <set>
#include <string>
#include <vector>

namespace bathwright::speciation {

/// Coefficients over basis species: what one unit is made of.
using Composition = std::map<std::string, double>;

struct SpeciesData {
  std::string name;     ///< "NiOH^+"
  Composition made_of;  ///< basis species (H^+ included), water apart; { name: 1 } for a basis species
  double water = 0;     ///< H2O taken up in forming it (negative: given off)
  Constant formation;   ///< of  sum made_of + water H2O = species
  std::vector<std::string> sources;
};

struct SolidData {
  std::string name;      ///< unique phase name, "NiSO4.6H2O (alpha)"
  std::string formula;   ///< "NiSO4.6H2O"
  Composition gives;     ///< basis species from one unit
  double water = 0;      ///< H2O from one unit
  Constant dissolution;  ///< of  solid = sum gives + water H2O
  double min_C = 0, max_C = 100;
  bool slow = false;  ///< known to form too slowly to count on: shown as supersaturated, not precipitated
  std::vector<std::string> sources;
  std::string note;
};

struct GasData {
  std::string name;  ///< "CO2"
  Composition gives;
  double water = 0;
  Constant dissolution;  ///< of  gas (1 bar) = sum gives + water H2O
  std::vector<std::string> sources;
};

/// A reaction as a table or a bath type states it, before it is written over the basis.
struct StatedSpecies {
  std::string name;
  std::string reaction;  ///< empty: made of nothing else, a basis species
  std::string source, where;
  Constant constant;
  double measured_at_ionic_strength = 0;  ///< mol/kg; 0: already at zero ionic strength
};
struct StatedSolid {
  std::string name, formula, reaction, source, note, where;
  Constant constant;
  double min_C = 0, max_C = 100;
  bool slow = false;
};

class Equilibria {
 public:
  /// The built-in tables, for one data convention and, with interaction, one set for zinc. Constants measured
  /// at an ionic strength are carried to zero with the Davies equation (held at 1 mol/kg), and their
  /// uncertainty is widened: 0.1 up to 0.5 mol/kg, 0.3 up to 1, 0.6 above.
  ///   No attraction is counted twice: with interaction, a complex made of nothing but a cation and an anion
  /// whose parameters were fitted to their fully dissociated salt is inside those parameters and is left out
  /// (NiCl^+, CuCl4^2-, AlSO4^+); those the fit was made with stay (column `beside` of pitzer_binary.csv).
  static const Equilibria& built_in(activity::Convention convention,
                                    activity::ZincSet zinc = activity::ZincSet::dilute);

  /// These equilibria with a bath type's own added; one that restates a known species or solid replaces it.
  /// Fails where a reaction does not read, does not form its species, or leads back to itself, and on a
  /// species that is already inside the activity coefficients (see built_in).
  [[nodiscard]] Result<Equilibria> with(const std::vector<StatedSpecies>& species,
                                        const std::vector<StatedSolid>& solids) const;

  /// The constant of a species, solid or gas as stated, of its own reaction; null where none has the name.
  [[nodiscard]] const Constant* stated(std::string_view name) const;
  /// These equilibria with that constant changed, in all that is formed through it too. Fails on a name that
  /// stated() does not know.
  [[nodiscard]] Result<Equilibria> with_constant(std::string_view name, const Constant& constant) const;

  /// These equilibria with parameters of their activity model stated beside the tables; one that is stated
  /// again is replaced. Fails on solutes nobody knows, on a parameter that they cannot have and on one of a
  /// model of the other convention.
  [[nodiscard]] Result<Equilibria> with_interactions(const std::vector<activity::Interaction>& stated) const;
  [[nodiscard]] const std::vector<activity::Interaction>& interactions() const { return interactions_; }

  [[nodiscard]] const std::map<std::string, SpeciesData>& species() const { return species_; }
  [[nodiscard]] const std::vector<SolidData>& solids() const { return solids_; }
  [[nodiscard]] const std::vector<GasData>& gases() const { return gases_; }
  /// Names that no reaction forms: what totals are counted in. H^+ is one of them, H2O is not listed.
  [[nodiscard]] const std::vector<std::string>& basis() const { return basis_; }
  /// What they must be solved with.
  [[nodiscard]] activity::Convention convention() const { return convention_; }
  [[nodiscard]] activity::ZincSet zinc_set() const { return zinc_; }

 private:
  /// An interaction that was fitted to a fully dissociated salt but for the complexes `beside` it.
  struct Fit {
    std::string cation, anion;
    std::set<std::string> beside;
  };

  Outcome resolve();
  template <class All>
  static auto* stated_in(All& all, std::string_view name);
  /// The fit that holds a species already; nothing where it may stand as a species.
  const Fit* held_by(const SpeciesData& species) const;
  void leave_out_held();

  activity::Convention convention_ = activity::Convention::association;
  activity::ZincSet zinc_ = activity::ZincSet::dilute;
  std::vector<activity::Interaction> interactions_;
  std::vector<Fit> fits_;  ///< empty with association

  std::vector<std::string>
      free_ions_;  ///< known to the activity models, formed from nothing: NO3^-, Li^+, ClO4^-
  std::vector<StatedSpecies> stated_species_;
  std::vector<StatedSolid> stated_solids_;
  std::vector<StatedSolid> stated_gases_;
  std::map<std::string, SpeciesData> species_;
  std::vector<SolidData> solids_;
  std::vector<GasData> gases_;
  std::vector<std::string> basis_;
};

}  // namespace bathwright::speciation
