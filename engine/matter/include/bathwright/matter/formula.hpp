// A chemical formula as people write it in a bath file, and what follows from it: atoms, charge, molar mass.
// Molar masses are computed here and typed nowhere. Not for: names of substances, phase labels ("(alpha)").
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/units/quantity.hpp>
#include <string>
#include <string_view>
#include <vector>

namespace bathwright::matter {

struct Atom {
  std::string element;  ///< symbol, "Ni"
  double count;         ///< atoms per formula unit, > 0
  bool operator==(const Atom&) const = default;
};

class Formula {
 public:
  /// Reads a formula.
  ///   element symbols and counts   NiSO4, H3BO3
  ///   groups in ( ) or [ ]         Ni(NH2SO3)2, [Cu(NH3)4]^2+
  ///   parts joined by . or ·       NiSO4.6H2O, CaSO4.0.5H2O, NiCO3.2Ni(OH)2.4H2O, NiCO3.5.5H2O
  ///   charge after ^               Ni^2+, OH^-, Fe(CN)6^4-
  ///   ligand tokens                Ni(cit)^-, H2(edta)^2-, cit^3- (matter/ligands.csv); a token brings its
  ///   atoms
  ///                                but no charge: the charge is what stands after ^, 0 where nothing does
  /// Fails, naming the position, on an unknown element or token (with the nearest one), an unbalanced
  /// bracket, an empty text or part, a bad charge, a count of 0 or above 10000, a text longer than 200 bytes.
  static Result<Formula> parse(std::string_view text, std::string_view where = {});

  /// The neutral salt of two ions, in the least whole numbers: Al^3+ and SO4^2- give Al2(SO4)3.
  /// The first must be a cation, the second an anion.
  static Formula salt(const Formula& cation, const Formula& anion);

  [[nodiscard]] const std::string& text() const { return text_; }
  [[nodiscard]] const std::vector<Atom>& atoms() const { return atoms_; }  ///< sorted by atomic number
  [[nodiscard]] double count(std::string_view element) const;              ///< 0 where it has none
  [[nodiscard]] int charge() const { return charge_; }
  /// Sum of standard atomic weights; the mass of electrons (5.5e-4 g/mol each) is left out. Source:
  /// atomic_weights.csv.
  [[nodiscard]] units::GramsPerMole molar_mass() const { return molar_mass_; }
  [[nodiscard]] double crystal_water() const { return crystal_water_; }  ///< H2O per formula unit after a dot
  [[nodiscard]] const std::vector<std::string>& ligands() const { return ligands_; }  ///< tokens, sorted
  [[nodiscard]] std::string pretty() const;  ///< for people, UTF-8: Ni²⁺, CuSO₄·5H₂O

 private:
  std::string text_;
  std::vector<Atom> atoms_;
  int charge_ = 0;
  units::GramsPerMole molar_mass_{};
  double crystal_water_ = 0;
  std::vector<std::string> ligands_;
};

/// Whether two formulae have the same atoms (counts within 1e-9), however they are written; charge is not
/// compared.
[[nodiscard]] bool same_composition(const Formula& a, const Formula& b);

}  // namespace bathwright::matter
