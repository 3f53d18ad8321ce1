// From readings to concentrations with their uncertainty, and from those to the tank's state.
// Read next: readings.hpp for what goes in, titration.hpp for the arithmetic of one titration.
#pragma once

#include <bathwright/analysis/carried.hpp>
#include <bathwright/analysis/end_point.hpp>
#include <bathwright/analysis/method.hpp>
#include <bathwright/analysis/misfit.hpp>
#include <bathwright/analysis/readings.hpp>
#include <bathwright/bath/chemistry.hpp>

namespace bathwright::analysis {

/// Where a level comes from, the surest first; a level made of several takes the last that went into it.
enum class Origin : std::uint8_t { titration, found, book, electroneutrality };
[[nodiscard]] std::string_view name(Origin origin);

/// One quantity, in g/L of its formula.
struct LevelFound {
  std::string quantity;
  units::GramsPerLitre value;                 ///< of a salt view it may be negative: there is a Suspect then
  units::GramsPerLitre standard_uncertainty;  ///< one sigma
  Origin from = Origin::titration;
  std::string how;              ///< "23.80 mL of 0.1012 mol/L EDTA on 2.000 mL", for the sheet
  std::string interferences{};  ///< what the method counts besides, or misses; empty where none is known
  std::string titrant_lot{}, titrated_by{};  ///< as given with the titrations; of several, between "; "
};

/// Something in the readings that does not fit.
struct Suspect {
  std::string what, reason, try_this;
};

struct Analysis {
  units::Litres volume;
  std::string volume_from;  ///< "2400 L at the mark, 3 cm low on 200 dm2"
  units::Celsius temperature;
  double pH = 0;  ///< as read; as computed where the acid or alkali is analysed and no pH was read
  std::vector<LevelFound> results;  ///< components, salt views, counter-ion; nothing that counts H^+
  /// Lab and book weighed against each other, in the order of `results`; where there is nothing to weigh, the
  /// results themselves.
  std::vector<LevelFound> reconciled;
  units::Litres volume_reconciled;
  std::vector<LevelFound>
      expected;           ///< what the book had before the readings, as `reconciled`; without it empty
  Misfit misfit;          ///< of readings and book
  bath::TankState state;  ///< of the reconciled levels
  /// Covariance of state.component_mol, in the order of Chemistry::components, and last of the volume, mol
  /// and L: row after row. H^+ that follows from the pH counts as exact; the counter-ion keeps the charges
  /// balanced.
  std::vector<double> covariance;
  units::KilogramsPerLitre density_predicted;
  std::optional<units::KilogramsPerLitre> density_measured;
  std::string density_read;  ///< the hydrometer reading as it was written: "28 degBe"
  std::vector<Suspect> suspects;
  std::vector<std::string>
      notes;  ///< assumptions made: temperature from the tank file, pH from the book, ...
  std::string sampled{}, sample_number{}, sampled_by{};  ///< as given with the readings
  double u_volume_L = 0;  ///< one standard uncertainty of `volume`, from how it was found
  /// Of every titration whose flask can be computed: where its indicator changes. Told in a note where it
  /// makes more than half a standard uncertainty; no level is changed for it.
  std::vector<EndPointBias> end_points{};
  std::vector<EndPointUnknown> end_points_unknown{};
};

/// Levels known from the last logged analysis of the tank, g/L by quantity id; what nobody titrated today is
/// taken from here.
struct Book {
  std::map<std::string, double> g_per_L;
  std::optional<double> pH;
  std::string from;  ///< "log entry 12, 2026-03-01 22:10"
  /// The tank carried through what was logged since, whose levels `g_per_L` are; without it they are those of
  /// the last analysis, and nothing is reconciled with them.
  std::optional<Carried> carried{};
};

/// Works the readings out.
///   Several findings of one quantity are averaged; the uncertainty of the mean is that of one of them (root
///   mean square), or their scatter where that is larger: titrant and sample are shared, so it does not
///   shrink. A level that follows from others already (NiCl2.6H2O beside Cl^-) is compared with them and not
///   used. With a sample_temperature every level found is brought to the tank's temperature by the density of
///   the solution at both; the book's are of the tank already. Salt views and the counter-ion carry the
///   uncertainty of what they are made of, to first order, with its correlations: NiSO4.6H2O = Ni^2+ - 1/2
///   Cl^-. Every assumption is a note, everything that does not fit (by more than 3 standard uncertainties,
///   or a rule of sanity.hpp) a suspect; no figure is changed silently.
/// Fails, with every problem found, on: an unknown quantity or method, a method that does not measure the
/// quantity, a component of the bath with no level, readings that are not positive, no pH, a level below the
/// mark of a tank without a surface, levels that cannot be (see Chemistry::state_from).
Result<Analysis> evaluate(const Readings& readings, const bath::Tank& tank, const bath::Chemistry& chemistry,
                          const std::optional<Book>& book = std::nullopt);

}  // namespace bathwright::analysis
