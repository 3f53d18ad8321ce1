// The titrations the program knows (data/analysis/titrations.csv). Read next: titration.hpp, which works one
// out.
#pragma once

#include <bathwright/units/quantity.hpp>
#include <string>
#include <string_view>
#include <vector>

namespace bathwright::analysis {

struct Method {
  std::string id;                    ///< "edta-nickel"
  std::vector<std::string> aliases;  ///< other ids in use, accepted everywhere
  std::string analyte;               ///< id of the quantity the result is stated in, "Ni^2+"
  std::string titrant;               ///< "EDTA"
  double mol_per_mol = 1;            ///< mol of analyte per mol of titrant
  units::Litres usual_sample;
  units::MolesPerLitre usual_titrant;
  std::string indicator, end_point, reaction, interferences, source;
  double u_end_point_mL = 0.05;  ///< one standard uncertainty of the end point
  /// Repeatability as handbooks state it, relative; for information. The reading, end-point and sampling
  /// terms of a result are its causes, so it is not added to them.
  double u_method_rel = 0;
};

/// All methods, in the order of the table.
[[nodiscard]] const std::vector<Method>& methods();

/// The method of this id or alias; nullptr if there is none.
[[nodiscard]] const Method* method(std::string_view id);

/// Ids of the methods whose result is stated in this quantity.
[[nodiscard]] std::vector<std::string> methods_for(std::string_view quantity);

}  // namespace bathwright::analysis
