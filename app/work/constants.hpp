// Every constant about a species, solid or gas, with where it came from.
#pragma once

#include <bathwright/sheets/text.hpp>
#include <string>
#include <vector>

namespace bathwright::work {

/// One constant with its source.
struct Constant {
  std::string table, what, set, t_C, values, quality, source, note;
  bool interaction = false;  ///< of solutes with each other
};

/// Those about a subject as the tables write it, "Ni^2+"; `names` gets every name the tables have, to look
/// for the nearest.
[[nodiscard]] std::vector<Constant> constants_about(const std::string& subject,
                                                    std::vector<std::string>& names);

/// "set X, t_C 25, log10_K 3.1".
[[nodiscard]] std::string values_with_set(const Constant& constant);

/// Whether totals are counted in it, so that no constant forms it.
[[nodiscard]] bool is_basis(const std::string& name);

[[nodiscard]] sheets::Lines sources_sheet(const std::string& subject, const std::vector<Constant>& rows);

}  // namespace bathwright::work
