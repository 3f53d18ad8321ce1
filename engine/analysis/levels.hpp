// Components from whatever quantities were found: each component is kept as a weighted sum of the findings it
// follows from, so that everything made of them has its exact first-order uncertainty, correlations included.
#pragma once

#include <bathwright/analysis/analysis.hpp>
#include <bathwright/bath/bath_type.hpp>
#include <map>
#include <optional>

namespace bathwright::analysis {

/// A quantity found, by whatever way.
struct Finding {
  const bath::Quantity* quantity = nullptr;
  double g_per_L = 0, u_g_per_L = 0;
  Origin from = Origin::titration;
  std::string how, where, interferences{};
  std::string titrant_lot{}, titrated_by{};
};

class Levels {
 public:
  struct Level {
    double mol_per_L, u_mol_per_L;
    Origin from;
  };
  enum class Taken : std::uint8_t {
    settles_a_component,
    restates,    ///< follows from what is known: not used
    leaves_open  ///< counts two or more components that are not known yet: not used
  };

  Taken take(const Finding& finding);
  /// States that the solution holds none of a component.
  void take_none_of(const std::string& component) { weights_[component] = {}; }
  /// States the counter-ion: `mol_per_L` of it balance the charges of the components known and of the protons
  /// a pH stands for; its uncertainty is that of the components alone.
  void close_charge(const std::string& counter_ion, double mol_per_L);

  [[nodiscard]] bool knows(const std::string& component) const { return weights_.contains(component); }
  /// Findings in use, g/L by quantity.
  [[nodiscard]] std::map<std::string, double> in_use() const;
  /// A sum of components; nothing where one of them is not known.
  [[nodiscard]] std::optional<Level> of(const speciation::Composition& counts) const;

 private:
  using Weights = std::map<std::size_t, double>;  // mol/L of a component per mol/L of a finding, by its index
  [[nodiscard]] std::optional<Weights> weights_of(const speciation::Composition& counts) const;

  struct Input {
    std::string quantity;
    double g_per_L, mol_per_L, u_mol_per_L;
    Origin from;
  };
  std::vector<Input> inputs_;
  std::map<std::string, Weights> weights_;  // by component
};

}  // namespace bathwright::analysis
