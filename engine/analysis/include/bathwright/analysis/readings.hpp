// What a person brings from the bench: burette readings, concentrations already worked out, pH, level,
// temperature.
#pragma once

#include <bathwright/units/concentration.hpp>
#include <bathwright/units/quantity.hpp>
#include <map>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace bathwright::analysis {

/// A key of a file as a person wrote it: "23.80 mL" at "morning.toml:12: titration.burette".
struct Written {
  std::string text, where;
};

/// By key. Empty where the figures were not read from a file.
struct AsWritten : std::map<std::string, Written, std::less<>> {
  /// The text of `key`, or else what stands for it.
  [[nodiscard]] std::string text(std::string_view key, const std::string& otherwise) const {
    const auto found = find(key);
    return found == end() ? otherwise : found->second.text;
  }
  [[nodiscard]] std::string where(std::string_view key, const std::string& otherwise) const {
    const auto found = find(key);
    return found == end() ? otherwise : found->second.where;
  }
};

/// A titrant standardised in this shop, for titrations to use by its name. What is not used is 0.
struct Standardised {
  std::string name;                       ///< "EDTA-2611"
  std::string titrant;                    ///< as methods name it: "EDTA"
  std::string against;                    ///< as data/analysis/standardisations.csv names it: "zinc"
  std::vector<units::Kilograms> weighed;  ///< of the standard, one for each run
  std::vector<units::Litres> taken;       ///< of a known solution, one for each run
  std::vector<units::Litres> burette;     ///< one for each run
  units::Litres blank;
  double assay = 1;                     ///< kg/kg, of what is weighed
  units::Litres diluted_to, aliquot;    ///< flask the standard was made up in, and what was titrated of it
  units::MolesPerLitre known_strength;  ///< of the known solution, actual
  std::string known_name;               ///< of one of these titrants, instead of known_strength
  std::string where;
  AsWritten written{};
  double known_u_rel = 0;  ///< of known_strength; that of a purchased titrant where a file states none
};

/// One titration as it was read, or one precipitate as it was weighed. What the method does not use is 0.
struct Titration {
  std::string quantity;          ///< "Ni^2+"
  std::string method;            ///< id of a titration method
  units::Litres sample;          ///< of the bath
  units::MolesPerLitre titrant;  ///< nominal strength
  double factor = 1;             ///< actual over nominal strength
  units::Litres burette;         ///< read at the end point
  units::Litres blank;           ///< used without sample
  std::string where;             ///< file:line, for messages
  AsWritten written{};           ///< by the keys of the file
  units::Litres diluted_to{},
      aliquot{};                   ///< flask the sample was made up in, and how much of that was titrated
  units::Litres second_burette{};  ///< the other end point of a difference
  units::Litres excess{};          ///< back titration: reagent added
  units::MolesPerLitre excess_strength{};    ///< of the reagent, actual
  units::Kilograms weighed{};                ///< precipitate
  std::string titrant_lot{}, titrated_by{};  ///< for the record; empty if not given
  double equivalents = 0;  ///< per mole, where the strength was typed as a normality; 0: it was not
  std::string titrant_name{}, excess_name{};  ///< a Standardised, instead of the strength
  std::string titrant_state{};  ///< "week-old", "old-caustic", ...: titrant_states(); empty: as purchased
  /// One standard uncertainty of the strengths; 0: of a purchased titrant with its certificate.
  double u_titrant_rel = 0, u_excess_rel = 0;
};

/// A concentration found by other means.
struct Found {
  std::string quantity;
  units::Concentration value;
  std::optional<units::Concentration> uncertainty;  ///< one standard uncertainty
  std::string where;
  std::string method{};  ///< id of the method it was found by; empty if not given
  std::string method_where{};
};

struct Readings {
  std::string file;
  std::string sampled;  ///< ISO 8601 local date and time, empty if not given
  std::optional<units::Litres> volume;
  std::optional<units::Decimetres> level_below_mark;
  std::optional<units::Celsius> temperature;
  std::optional<double> pH;
  std::optional<units::KilogramsPerLitre> density;  ///< hydrometer
  std::vector<Titration> titrations;
  std::vector<Found> found;
  AsWritten written{};                                 ///< level_below_mark, density
  std::string sample_number{}, sampled_by{};           ///< for the record; empty if not given
  std::optional<units::Celsius> sample_temperature{};  ///< when pipetted; nothing: as hot as the tank
  std::vector<Standardised> standardised{};
};

}  // namespace bathwright::analysis
