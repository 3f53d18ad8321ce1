// Totals of ions as if everything were fully dissociated: what stoichiometric activity and osmotic
// coefficients are counted over. H^+ and OH^- from different substances neutralise each other.
#pragma once

#include <bathwright/matter/formula.hpp>
#include <bathwright/speciation/components.hpp>

namespace bathwright::solution {

class IonTotals {
 public:
  explicit IonTotals(const speciation::Equilibria& equilibria) : equilibria_(&equilibria) {}

  /// A substance by its nominal ions; one without any counts as a particle of its own.
  void add(const matter::Formula& formula, const speciation::Composition& ions, double mol);
  void add(const std::string& formula, double mol);
  void add_ion(const std::string& ion, double mol);
  void divide_by(double water_kg);

  [[nodiscard]] double of(const std::string& ion) const;
  [[nodiscard]] double sum() const;

 private:
  [[nodiscard]] double neutralised() const;

  const speciation::Equilibria* equilibria_;
  speciation::Composition mol_;
};

}  // namespace bathwright::solution
