// From readings to concentrations with their uncertainty, and from those to the tank's state.
#pragma once

#include <bathwright/analysis/readings.hpp>
#include <bathwright/bath/chemistry.hpp>

namespace bathwright::analysis {

enum class Origin : std::uint8_t { titration, found, book, electroneutrality };
[[nodiscard]] std::string_view name(Origin origin);

/// One quantity, in g/L of its formula.
struct LevelFound {
  std::string quantity;
  units::GramsPerLitre value;
  units::GramsPerLitre standard_uncertainty;  ///< one sigma
  Origin from = Origin::titration;
  std::string how;  ///< "23.80 mL of 0.1012 mol/L EDTA on 2.00 mL", for the sheet
};

/// Something in the readings that does not fit.
struct Suspect {
  std::string what, reason, try_this;
};

struct Analysis {
  units::Litres volume;
  std::string volume_from;  ///< "2400 L at the mark, 0.30 dm low on 200 dm2"
  units::Celsius temperature;
  double pH = 0;
  std::vector<LevelFound> results;  ///< measured quantities first, then salt views, then the counter-ion
  bath::TankState state;
  units::KilogramsPerLitre density_predicted;
  std::optional<units::KilogramsPerLitre> density_measured;
  std::vector<Suspect> suspects;
  std::vector<std::string> notes;  ///< assumptions made: temperature from the tank file, no pH given, ...
};

/// Levels known from the last logged analysis of the tank, g/L by quantity id; what nobody titrated today is
/// taken from here.
struct Book {
  std::map<std::string, double> g_per_L;
  std::optional<double> pH;
  std::string from;  ///< "log entry 12, 2026-03-01 22:10"
};

/// Works the readings out. Fails, with every problem found, on: an unknown quantity or method, a method that
/// does not measure the quantity, a missing level, readings that are not positive, levels that cannot be (see
/// Chemistry::state_from).
Result<Analysis> evaluate(const Readings& readings, const bath::Tank& tank, const bath::Chemistry& chemistry,
                          const std::optional<Book>& book = std::nullopt);

/// Titration methods known, by id; an id from common trade usage is accepted as an alias.
struct Method {
  std::string id;
  std::vector<std::string> aliases;
  std::string analyte;     ///< quantity measured, "Ni^2+"
  std::string titrant;     ///< "EDTA"
  double mol_per_mol = 1;  ///< mol of analyte per mol of titrant
  std::string indicator, end_point, reaction, interferences, source;
  double u_end_point_mL = 0.05;
  double u_method_rel = 0;  ///< repeatability of the method beyond reading and end point
};
[[nodiscard]] const std::vector<Method>& methods();
[[nodiscard]] const Method* method(std::string_view id);

}  // namespace bathwright::analysis
