// What a bath type says about its chemistry and its trade: a plain value, filled by whoever provides it (a
// plugin through plugin_host). Not for: a particular vat (tank.hpp) or numbers at a temperature
// (chemistry.hpp).
#pragma once

#include <bathwright/activity/make_model.hpp>
#include <bathwright/matter/formula.hpp>
#include <bathwright/matter/stock.hpp>
#include <bathwright/speciation/equilibria.hpp>
#include <cstdint>
#include <functional>
#include <limits>
#include <span>
#include <string>
#include <vector>

namespace bathwright::bath {

inline constexpr double not_given = std::numeric_limits<double>::quiet_NaN();

struct Source {
  std::string key, citation, terms;
};

/// How the total of a component is known when a tank is analysed.
enum class FoundBy : std::uint8_t {
  analysis,  ///< titrated, or reported by a laboratory; H^+ by way of an acid or alkali, H2SO4 or NaOH
  pH,        ///< H^+
  charge,    ///< what electroneutrality leaves: the counter-ion nobody titrates (one per bath type)
  book       ///< carried from the last state
};

/// A component of the solution chemistry: a basis species and where its total comes from.
struct Component {
  std::string species;  ///< "Ni^2+"
  FoundBy found_by = FoundBy::analysis;
};

/// A quantity the lab and the tank file speak of, in g/L of `formula`: total nickel, or nickel sulfate
/// hexahydrate.
struct Quantity {
  std::string id;     ///< "Ni^2+", "NiSO4.6H2O"
  std::string label;  ///< "nickel"
  matter::Formula formula;
  /// mol of this quantity = sum of coefficient * total mol of the component. A salt is what the components
  /// make up: NiCl2.6H2O = 1/2 Cl^-;  NiSO4.6H2O = Ni^2+ - 1/2 Cl^-.
  speciation::Composition counts;
  bool salt_view = false;  ///< another way to state components that are quantities of their own
  /// A by-product of the work or a contaminant: its aim is what it may come to, and nobody adds it.
  bool unwanted = false;
};

/// Limits in g/L (or pH units, degC, A/dm2). NaN: open.
struct Window {
  std::string subject;  ///< a quantity's id, an indicator's id, "pH", "temperature" or "current-density"
  double low = not_given, aim = not_given, high = not_given;
  double stop_low = not_given, stop_high = not_given;
  std::string source;
};

/// A solid to watch, by its name in the tables of equilibria, and what an operator would see.
struct WatchedSolid {
  std::string name;
  std::string sign_in_tank;
};

/// How one stock chemical goes into the bath.
struct AdditionRule {
  std::string supply;                       ///< stock chemical id
  std::uint32_t order = 0;                  ///< smaller goes in earlier
  double largest_rise_g_per_L = not_given;  ///< in one addition, of the substance as on the label
  double largest_pH_step = not_given;       ///< in one addition
  double wait_h = 0;                        ///< before the next addition
  std::string how;                          ///< "dissolve hot in a side tank"
  std::string source;
  double thin_to_parts = 0;        ///< a liquid: thinned with so many volumes of water first
  bool half_then_analyse = false;  ///< half the need, then an analysis before the rest
};

enum class Level : std::uint8_t { notice = 1, warn, stop };

struct Caution {
  std::string subject;  ///< a quantity or supply, empty for the whole bath
  std::string text;
  Level level = Level::notice;
  std::string source;
};

/// What must never go into the bath: a stock chemical, or every stock chemical of a kind of incompatibility.
struct Incompatible {
  std::string with;  ///< stock chemical id, or matter::Incompatibility id
  std::string why;
  Level level = Level::stop;
  std::string source;
};

/// What an indicator may look at: the solved bath. Spans are in the order of BathType's lists and of the
/// solved species.
struct IndicatorView {
  double temperature_C, volume_L, pH, ionic_strength;
  std::span<const double> quantity_g_per_L;
  std::span<const double> species_molality, species_activity;  ///< in the order of `species_names`
  std::span<const std::string> species_names;
  double water_kg = not_given;                 ///< liquid water
  std::span<const std::string> solid_names{};  ///< every solid that can form
  std::span<const double> saturation_index{};  ///< log10, in the order of `solid_names`
};

struct Indicator {
  std::string id, label, meaning, unit;
  std::function<Result<double>(const IndicatorView&)> evaluate;  ///< any thread
};

/// What one unit of a use is.
enum class CountedIn : std::uint8_t { ampere_hour = 1, gram_deposited, m2_of_work, hour, m2_surface_hour };

/// What one unit of work does to the bath, drag-out apart.
struct Use {
  std::string id, label;
  CountedIn counted_in = CountedIn::ampere_hour;
  struct Effect {
    std::string quantity;
    double g_per_unit;  ///< of the quantity's formula; negative: consumed
  };
  std::vector<Effect> effects;                          ///< the deposited metal apart
  double effects_u_rel = not_given;                     ///< relative standard uncertainty of the effects
  std::string deposits;                                 ///< quantity of the metal plated out; empty: none
  double electrons = not_given;                         ///< per atom of it
  double cathode_efficiency = 1, anode_efficiency = 0;  ///< fractions of the current; anode 0: inert
  double u_cathode_efficiency = not_given, u_anode_efficiency = not_given;
  std::string source;
  /// The effects in this state of the bath, in place of the table's; empty where they do not depend on it.
  std::function<Result<std::vector<double>>(const IndicatorView&)> rate;  ///< any thread
};

struct BathType {
  std::string id, name, version, author, licence;
  std::string summary, validity;
  double min_C = 0, max_C = 100, max_ionic_strength = not_given;
  activity::Convention convention = activity::Convention::interaction;
  activity::ParameterSets sets;  ///< which of the regressed sets that exclude each other
  std::vector<Source> sources;
  std::vector<Component> components;
  std::vector<Quantity> quantities;
  std::vector<speciation::StatedSpecies> own_species;  ///< beside the shared tables
  std::vector<speciation::StatedSolid> own_solids;
  std::vector<WatchedSolid> solids;
  std::vector<Window> windows;
  std::vector<AdditionRule> additions;
  std::vector<Indicator> indicators;
  std::vector<Caution> cautions;
  std::vector<Incompatible> incompatibilities;
  std::vector<Use> uses;

  [[nodiscard]] const Quantity* quantity(std::string_view id) const;  ///< nullptr if there is none
  /// The rule of addition of a chemical, of a liquid that of another strength where it has none of its own;
  /// nullptr where there is neither.
  [[nodiscard]] const AdditionRule* addition_rule(const matter::StockChemical& stock) const;
  [[nodiscard]] bool acid_by_pH() const;  ///< H^+ follows from the pH, not from an analysis or the charges
};

/// Metal that an ampere-hour plates where all of the current does, mol: 3600 s/h / (z F).
[[nodiscard]] double metal_mol_per_Ah(const Use& use);

/// Molar mass of what is plated out of a quantity: the heaviest element of its formula is the metal, Au in
/// Au(CN)2^-.
[[nodiscard]] units::GramsPerMole metal_of(const Quantity& deposited);

}  // namespace bathwright::bath
