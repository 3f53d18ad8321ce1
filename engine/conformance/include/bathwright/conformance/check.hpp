// One line of a conformance report, and how a report is counted. Read next: conformance.hpp, which makes
// them.
#pragma once

#include <bathwright/base/result.hpp>
#include <cstdint>
#include <string>
#include <string_view>
#include <vector>

namespace bathwright::conformance {

enum class Group : std::uint8_t { file, tables, entry, functions, examples, docs };
[[nodiscard]] std::string_view name(Group group);

/// One thing that must hold for a bath type.
struct Check {
  Group group = Group::file;
  std::string what;       ///< "exports bw_entry_1 and nothing else"
  std::string found{};    ///< figures to show with it: computed against expected; may be empty
  Problems problems{};    ///< none: it holds
  std::string skipped{};  ///< why it was not looked at; such a check counts neither way

  [[nodiscard]] bool passed() const { return problems.empty() && skipped.empty(); }
  [[nodiscard]] bool failed() const { return !problems.empty(); }
};

/// What becomes of a bath type before it is given away.
struct Strictness {
  bool release = false;  ///< placeholder sources and missing README.md or examples.toml are failures
};

}  // namespace bathwright::conformance
