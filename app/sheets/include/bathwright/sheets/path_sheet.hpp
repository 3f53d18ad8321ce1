// What happens along an addition, as tables.
#pragma once

#include <bathwright/bath/chemistry.hpp>
#include <bathwright/sheets/shown_units.hpp>
#include <bathwright/sheets/text.hpp>

namespace bathwright::sheets {

/// One chemical that is stirred in, as it was asked for: 2 L of sulfuric acid.
struct PathAddition {
  std::string chemical;  ///< stock id
  std::string name;
  double amount = 0;
  std::string unit;   ///< "kg", or "L" for a liquid
  std::string asked;  ///< the amount as it was asked for: "500 mL"
};

/// The tank after so much of one addition; those before it are in completely.
struct PathPoint {
  std::optional<std::size_t> addition;  ///< which one; nothing: before the first
  double added = 0;                     ///< of it, in its unit
  double total_kg = 0;                  ///< of all so far
  bath::TankView view;
};

/// What the additions do that they should not, a sentence each: a solid that comes to form or forms more, a
/// quantity or pH that leaves its window or moves further out of it, more than the tank holds. What was so
/// before, and is no worse, is not among them.
///   points  the first before all additions
[[nodiscard]] std::vector<std::string> path_findings(const bath::Tank& tank, const bath::BathType& type,
                                                     const std::vector<PathAddition>& additions,
                                                     const std::vector<PathPoint>& points,
                                                     const Units& units = {});

/// A table for each addition, then `findings`.
///   changed_since  what the log has of changes that are not in the first point, a sentence each
[[nodiscard]] Lines path_sheet(const bath::Tank& tank, const std::vector<PathAddition>& additions,
                               const std::vector<PathPoint>& points,
                               const std::vector<std::string>& changed_since,
                               const std::vector<std::string>& findings, const Units& units = {});

}  // namespace bathwright::sheets
