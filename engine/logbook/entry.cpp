#include "bathwright/logbook/entry.hpp"

#include <fmt/format.h>
#include <fmt/ranges.h>

#include <algorithm>

#include "bathwright/base/nearest.hpp"

namespace bathwright::logbook {

const std::vector<std::string>& entry_kind_names() {
  static const std::vector<std::string> names{"analysis",   "plan",          "slip",        "addition",
                                              "level",      "ampere-hours",  "dump",        "note",
                                              "correction", "slip-approved", "slip-closed", "hand-over",
                                              "person",     "setting",       "failed-pin"};
  return names;
}

std::string_view name(EntryKind kind) { return entry_kind_names()[static_cast<std::size_t>(kind)]; }

Result<EntryKind> entry_kind(std::string_view name) {
  const auto& names = entry_kind_names();
  const auto found = std::find(names.begin(), names.end(), name);
  if (found != names.end()) return static_cast<EntryKind>(found - names.begin());
  const auto near = nearest(name, names);
  return Problem{Fault::bad_input, "kind", fmt::format("\"{}\" is no kind of log entry", name),
                 fmt::format("one of {}", fmt::join(names, ", ")),
                 near ? "did you mean \"" + *near + "\"?" : ""};
}

}  // namespace bathwright::logbook
