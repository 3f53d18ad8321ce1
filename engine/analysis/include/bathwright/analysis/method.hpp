// The titrations and other ways of finding a level the program knows (data/analysis/titrations.csv). Read
// next: titration.hpp, which works one out.
#pragma once

#include <bathwright/bath/bath_type.hpp>
#include <bathwright/units/quantity.hpp>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace bathwright::analysis {

/// What is read at the bench.
enum class Kind : std::uint8_t {
  direct,      ///< titrant until the end point
  back,        ///< a known excess of a reagent, less what a second titrant finds of it
  difference,  ///< two end points, weighed against each other: A - B
  weighed,     ///< the mass of a precipitate
  stated       ///< an instrument or a calibration gives the concentration itself
};

/// Which part of what is dissolved a method counts, where the free and the total are both spoken of.
enum class Share : std::uint8_t { any, free, total };

struct Method {
  std::string id;                    ///< "edta-nickel"
  std::vector<std::string> aliases;  ///< other ids in use, accepted everywhere
  std::vector<matter::Formula>
      analytes;  ///< formulae the result may be stated in, in equal amounts: NaCN, KCN
  Kind kind = Kind::direct;
  Share share = Share::any;
  std::string titrant;     ///< "EDTA"; back: the reagent in excess; weighed: the formula that is weighed
  double mol_per_mol = 1;  ///< mol of analyte per mol of `titrant`; titrants are counted in mol, never in N
  std::string back_titrant;
  double reagent_per_back = 0;                 ///< back: mol of reagent per mol of back titrant
  double times_burette = 1, times_second = 0;  ///< difference: weights of the two readings
  bool two_flasks = false;                     ///< difference: each reading has a sample of its own
  units::Litres usual_sample, usual_flask, usual_aliquot;  ///< 0 where nothing is diluted
  units::MolesPerLitre usual_titrant;
  std::string indicator, end_point, reaction, interferences, note, source;
  std::string safety;  ///< what it brings to the bench beyond strong acid and alkali; empty: nothing more
  std::vector<std::string> steps;
  double u_end_point_mL = 0.05;  ///< one standard uncertainty of the end point
  /// Repeatability as handbooks state it, relative. The reading, end-point and sampling terms of a titration
  /// are its causes, so it is not added to them; of what is weighed or stated it is all that is known.
  double u_method_rel = 0;
};

/// All methods, in the order of the table.
[[nodiscard]] const std::vector<Method>& methods();

/// The method of this id or alias; nullptr if there is none.
[[nodiscard]] const Method* method(std::string_view id);

/// mol of the quantity per mol of the method's analyte; nothing where the method does not find the quantity.
/// It does where the formula is one of the analytes, whatever components the quantity counts (free NaOH of a
/// zincate), and where the quantity counts a single component and that is an analyte (Cl^- finds NiCl2.6H2O,
/// half as much).
[[nodiscard]] std::optional<double> quantity_per_analyte(const Method& method,
                                                         const bath::Quantity& quantity);

/// Ids of the methods that find this quantity from what is read at the bench.
[[nodiscard]] std::vector<std::string> methods_for(const bath::Quantity& quantity);

}  // namespace bathwright::analysis
