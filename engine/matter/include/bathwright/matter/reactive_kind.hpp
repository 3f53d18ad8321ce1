// What a substance is when it meets another: acid, cyanide, oxidiser ... told by its formula. Read next:
// stock.hpp (Incompatibility), which says what kinds must not meet.
#pragma once

#include <string>
#include <string_view>
#include <vector>

namespace bathwright::matter {

/// A row of matter/reactive_kinds.csv.
struct ReactiveKind {
  std::string id, name;               ///< "chromium-6", "chromium(VI)"
  std::vector<std::string> formulas;  ///< whole formulae, crystal water apart
  std::vector<std::string> groups;    ///< parts of formulae: "CN"
  std::vector<std::string> except;    ///< parts that tell otherwise: "SCN"
  std::vector<std::string> in_acid;   ///< anions that are this acid in a solution below `below_pH`
  double below_pH = 0;                ///< NaN where no pH makes it so

  /// Whether a formula, "NaCN" or "CN^-", is of this kind.
  [[nodiscard]] bool is(std::string_view formula) const;
};

/// All kinds of the built-in table.
[[nodiscard]] const std::vector<ReactiveKind>& reactive_kinds();

/// The ids of the kinds a formula is of: {"acid", "chromium-6"} for CrO3.
[[nodiscard]] std::vector<std::string> kinds_of(std::string_view formula);

/// The name of a kind for people, "chromium(VI)"; the id itself where there is no such kind.
[[nodiscard]] std::string kind_name(std::string_view id);

/// Whether a formula is of a kind; false for a kind the table does not have.
[[nodiscard]] bool is_of_kind(std::string_view formula, std::string_view kind);

/// Cyanide in any form, free or bound.
[[nodiscard]] bool holds_cyanide(std::string_view formula);

}  // namespace bathwright::matter
