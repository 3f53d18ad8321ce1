// What the probe of a plugin found, as the child process writes it, the host reads it and the cache keeps it.
#pragma once

#include <bathwright/base/result.hpp>
#include <string>
#include <vector>

namespace bathwright::plugin_host {

/// One thing that must hold for a plugin; it holds when there are no problems.
struct Check {
  std::string name;  ///< "entry: past the end it gives BW_END"
  Problems problems;
};

/// What a bath type says of itself.
struct Introduction {
  std::string id, name, version, author, licence;
};

struct ProbeReport {
  std::vector<Introduction> types;  ///< empty when the probe did not come so far
  std::vector<Check> checks;        ///< in the order made; the probe ends where the next would make no sense
  std::vector<std::string> notes;   ///< what the plugin had to say while loading
  /// False where another try may end otherwise: no child could be started, or it ran out of wall-clock time.
  bool repeatable = true;

  [[nodiscard]] Problems problems() const;  ///< of every check
};

[[nodiscard]] std::string encoded(const ProbeReport& report);

/// Fails on what is no such report.
Result<ProbeReport> decoded(const std::string& text);

}  // namespace bathwright::plugin_host
