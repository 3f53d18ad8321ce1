// The chemistry of one kind of solution: its components and every species, solid and gas that can form from
// them, with stoichiometry as dense rows. Not for: amounts or temperatures (solver.hpp).
#pragma once

#include <bathwright/speciation/equilibria.hpp>
#include <optional>

namespace bathwright::speciation {

/// A species, solid or gas over the components, in the order of ChemicalSystem::components().
struct SystemSpecies {
  std::string name;
  int charge = 0;
  std::vector<double> made_of;  ///< mol of each component per mol
  double water = 0;             ///< mol H2O taken up per mol formed (given off by a solid that dissolves)
  Constant constant;
  std::vector<std::string> sources;
};
struct SystemSolid : SystemSpecies {
  std::string formula;
  double min_C = 0, max_C = 100;
  bool slow = false;
  std::string note;
};

/// The most components of one system, H^+ among them.
inline constexpr int max_components = 48;

class ChemicalSystem {
 public:
  /// Everything that can form from the components. H^+ is always component 0; the first species are the
  /// components themselves, in the same order. Fails on a component that is not a basis species (with the
  /// nearest one), on more than max_components and on more species than an activity model takes.
  static Result<ChemicalSystem> make(const Equilibria& equilibria,
                                     const std::vector<std::string>& components);

  [[nodiscard]] const std::vector<std::string>& components() const { return components_; }
  /// The convention and the set for zinc that its constants belong to.
  [[nodiscard]] activity::Convention convention() const { return convention_; }
  [[nodiscard]] activity::ZincSet zinc_set() const { return zinc_; }
  /// Parameters of the activity model that go with its constants.
  [[nodiscard]] const std::vector<activity::Interaction>& interactions() const { return interactions_; }
  [[nodiscard]] const std::vector<SystemSpecies>& species() const { return species_; }
  [[nodiscard]] const std::vector<SystemSolid>& solids() const { return solids_; }
  [[nodiscard]] const std::vector<SystemSpecies>& gases() const { return gases_; }

  [[nodiscard]] std::optional<std::size_t> component(std::string_view name) const;
  [[nodiscard]] std::optional<std::size_t> species_index(std::string_view name) const;
  [[nodiscard]] std::optional<std::size_t> solid(std::string_view name) const;
  [[nodiscard]] std::optional<std::size_t> gas(std::string_view name) const;

 private:
  activity::Convention convention_ = activity::Convention::association;
  activity::ZincSet zinc_ = activity::ZincSet::dilute;
  std::vector<activity::Interaction> interactions_;
  std::vector<std::string> components_;
  std::vector<SystemSpecies> species_;
  std::vector<SystemSolid> solids_;
  std::vector<SystemSpecies> gases_;
};

}  // namespace bathwright::speciation
