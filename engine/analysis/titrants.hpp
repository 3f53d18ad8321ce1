// The titrants of one set of readings: those standardised in the shop by name, and a titration with the
// strengths it was done with.
#pragma once

#include <bathwright/analysis/method.hpp>
#include <bathwright/analysis/standardisation.hpp>
#include <map>

namespace bathwright::analysis {

class Titrants {
 public:
  /// Fails with every standardisation that cannot be used, as strength_of, and on a name that is used twice
  /// or not known yet.
  static Result<Titrants> of(const std::vector<Standardised>& standardised);

  /// The titration with the strengths and their uncertainties filled in. Fails on a titrant that is not
  /// there, is not what the method titrates with or is typed as a normality the method's titrant does not
  /// have, and on a state nobody knows.
  [[nodiscard]] Result<Titration> filled_in(Titration titration, const Method& method) const;

  /// "EDTA-2611: 0.1003 mol/L EDTA, +/- 0.0002, mean of 3 against zinc, scatter 0.12 %"
  [[nodiscard]] const std::vector<std::string>& notes() const { return notes_; }

 private:
  struct Known {
    std::string titrant;
    Strength strength;
  };
  [[nodiscard]] Result<Known> known(const std::string& name, const std::string& where) const;

  std::map<std::string, Known> known_;
  std::vector<std::string> notes_;
};

}  // namespace bathwright::analysis
