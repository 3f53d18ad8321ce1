// Reads a solution written as formulae, for speciation without a tank. Every key: baths/README.md.
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/units/quantity.hpp>
#include <cstdint>
#include <map>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace bathwright::shopfiles {

/// A neutral substance in the solution; a hydrate brings its water.
struct Ingredient {
  std::string formula;     ///< readable by matter::Formula, without charge
  double amount = 0;       ///< >= 0; mol per kg of water, or per litre of solution
  bool per_litre = false;  ///< of solution; else per kg of water
  std::string where;       ///< file:line: key, for messages
};

enum class SolidsAllowed : std::uint8_t { all, none, listed };

struct SolutionFile {
  std::string file;  ///< where it was read from, for messages
  units::Celsius temperature;
  std::string model = "auto";  ///< "auto", "davies", "debye-huckel" or "pitzer"
  std::optional<double> pH;    ///< held, the charge balanced by `counter_ion`
  std::string counter_ion;     ///< "Cl^-"; set exactly where pH is
  std::vector<Ingredient>
      ingredients;  ///< in the order of the file, all per kg or all per litre; may be empty
  SolidsAllowed solids_allowed = SolidsAllowed::all;  ///< which solids may precipitate
  std::vector<std::string> allowed;                   ///< names of solids, where solids_allowed is `listed`
  std::vector<std::string> excess;          ///< solids that dissolve until the solution is saturated
  std::map<std::string, double> gases_atm;  ///< held partial pressures, by formula
};

/// The solution in the TOML file at `path`. Fails with every problem of the file, sorted by line, each with
/// `file:line: key`. Whether a solid or gas is in the tables is for the caller.
Result<SolutionFile> read_solution(const std::string& path);

/// The same from text already in memory; `name` stands for the file in messages.
Result<SolutionFile> read_solution_text(std::string_view name, std::string_view text);

}  // namespace bathwright::shopfiles
