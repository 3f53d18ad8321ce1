// What stands in the chemical store: the substance, its hydrate, purity and density, and its hazards.
// Hazard texts are a planning aid; the supplier's safety data sheet decides.
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/matter/formula.hpp>
#include <limits>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

namespace bathwright::matter {

/// What a lot holds beside its substance, as its certificate says.
struct Impurity {
  std::string formula;  ///< of an ion or a neutral substance
  double fraction = 0;  ///< kg of it per kg of product
};

struct StockChemical {
  std::string id;                    ///< "nickel-sulfate"
  std::vector<std::string> aliases;  ///< other ids in use, accepted everywhere
  std::string name;                  ///< "nickel sulfate hexahydrate"
  std::string formula;
  std::string cas;  ///< registry number, "10101-97-0"
  bool liquid = false;
  double assay = 1;                                            ///< kg of `formula` per kg of product
  double kg_per_L = std::numeric_limits<double>::quiet_NaN();  ///< liquids at 20 degC; NaN for solids
  std::vector<Impurity> contains;                              ///< of this lot
  std::vector<std::string> hazard_statements;                  ///< codes, "H314"
  std::vector<std::string> incompatible_with;                  ///< ids of Incompatibility
  std::vector<std::string> cautions;
  std::string storage, note, source;

  /// mol of `formula` in a kg of product: assay * 1000 / molar mass.
  [[nodiscard]] double mol_per_kg() const;
  /// kg of water in a kg of product beside `formula`: the rest of a liquid is water, the rest of a solid is
  /// taken as inert. Crystal water belongs to `formula`.
  [[nodiscard]] double water_kg_per_kg() const;
};

/// Two kinds of substance that must not meet, and what happens when they do.
struct Incompatibility {
  std::string id, a, b, result;
  std::string severity;  ///< "stop", "warn" or "info"
  /// The two sides as ids of reactive_kinds(); empty where no formula tells them.
  std::vector<std::string> kinds_a, kinds_b;
  bool always = false;  ///< no bath type's own rule of addition lets it through
  std::string practice, source;
};

class StockCatalogue {
 public:
  /// The catalogue compiled into the program (matter/stock_chemicals.csv and its two companions).
  static const StockCatalogue& built_in();

  /// The chemical of this id or alias; null where there is none.
  [[nodiscard]] const StockChemical* find(std::string_view id) const;
  [[nodiscard]] std::vector<std::string> ids() const;                  ///< sorted
  [[nodiscard]] std::string hazard_text(std::string_view code) const;  ///< "" for an unknown code
  [[nodiscard]] const Incompatibility* incompatibility(std::string_view id) const;
  [[nodiscard]] const std::vector<Incompatibility>& incompatibilities() const { return incompatibilities_; }

 private:
  std::vector<StockChemical> chemicals_;  // sorted by id
  std::vector<std::pair<std::string, std::string>> hazards_;
  std::vector<Incompatibility> incompatibilities_;
};

}  // namespace bathwright::matter
