// Figures put into the text of a policy file, which stays a person's: comments, order and everything else are
// kept.
#pragma once

#include <string>
#include <vector>

namespace bathwright::command {

/// key = value of a table, the value as TOML writes it: "\"1.34 mL/dm2\"". With `entry`, the key's value is a
/// table itself, [table.key] or key = { ... }, and `entry` is what is set in it.
struct PolicyFigure {
  std::string table, key, value, entry = {};
};

/// `text` with each figure in place of what stood there; where nothing did, below the table's heading, or in
/// a table at the end. A table written in another way than under a [heading] of its own is not found: read
/// the text again and compare.
[[nodiscard]] std::string with_figures(const std::string& text, const std::vector<PolicyFigure>& figures);

/// Whether the text sets the figure's entry.
[[nodiscard]] bool has_figure(const std::string& text, const PolicyFigure& figure);

/// `text` without any [[name]].
[[nodiscard]] std::string without_tables(const std::string& text, const std::string& name);

}  // namespace bathwright::command
