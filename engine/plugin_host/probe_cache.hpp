// What probes found, kept by the hash of the plugin, so that a start probes only what is new to it.
#pragma once

#include <bathwright/plugin_host/probe_report.hpp>
#include <filesystem>
#include <optional>

namespace bathwright::plugin_host {

class ProbeCache {
 public:
  /// `folder`: made when something is first kept; empty, or one that others can change: nothing is found or
  /// kept. Reports of another version of this program, or of another build of `program`, do not count.
  ProbeCache(std::filesystem::path folder, const std::filesystem::path& program);

  [[nodiscard]] std::optional<ProbeReport> find(const std::string& sha256) const;
  void keep(const std::string& sha256, const ProbeReport& report) const;

 private:
  std::filesystem::path folder_;
  std::string maker_;  ///< version of this program, size and time of the probe
};

}  // namespace bathwright::plugin_host
