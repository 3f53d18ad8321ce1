// The elements and the ligand tokens a formula may use. Private to matter.
#pragma once

#include <span>
#include <string>
#include <string_view>

namespace bathwright::matter {

struct Element {
  std::string symbol;
  int atomic_number;
  double g_per_mol;
};

/// A short name for a ligand: "cit" brings the atoms of C6H5O7.
struct Ligand {
  std::string token, formula;
};

std::span<const Element> elements();  ///< by atomic number; matter/atomic_weights.csv
std::span<const Ligand> ligands();    ///< matter/ligands.csv

const Element* find_element(std::string_view symbol);
const Ligand* find_ligand(std::string_view token);

/// What an unknown symbol or token was probably meant to be; "" where nothing is near.
std::string nearest_element(std::string_view symbol);
std::string nearest_ligand(std::string_view token);

}  // namespace bathwright::matter
