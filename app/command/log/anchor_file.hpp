// Anchors of a log on paper or disk: a file with one "NUMBER HASH" a line, or a hash alone.
#pragma once

#include <bathwright/logbook/logbook.hpp>

namespace bathwright::command {

/// `against`: a hash of 64 hexadecimal digits, or the file's path.
Result<std::vector<logbook::Anchor>> read_anchors(const std::string& against);

/// Adds a line, on the disk when this returns.
Outcome add_anchor(const std::string& file, const logbook::Anchor& anchor);

}  // namespace bathwright::command
