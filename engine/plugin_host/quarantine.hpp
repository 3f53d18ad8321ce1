// Plugins that were being loaded when the program died, which are not loaded again unasked.
#pragma once

#include <bathwright/base/result.hpp>
#include <filesystem>

#include "descriptor.hpp"

namespace bathwright::plugin_host {

/// Says, on disk, that a plugin is being loaded by this process. Gone when it is over; what a dead process
/// left is found by settle().
class LoadingMark {
 public:
  LoadingMark() = default;
  LoadingMark(LoadingMark&& other) noexcept = default;
  LoadingMark& operator=(LoadingMark&& other) noexcept = delete;
  ~LoadingMark();

 private:
  friend class Quarantine;
  std::filesystem::path file_;
  Descriptor lock_;  ///< held for as long as the process lives
};

class Quarantine {
 public:
  /// `folder`: of the user's own; empty: nothing is ever marked or held.
  explicit Quarantine(std::filesystem::path folder) : folder_(std::move(folder)) {}

  /// Puts every plugin into quarantine that a process which is no more was loading.
  void settle() const;
  [[nodiscard]] bool holds(const std::string& sha256) const;
  /// Whether it was held.
  bool release(const std::string& sha256) const;
  /// Marks the plugin as being loaded. Fails where the mark cannot be written.
  Result<LoadingMark> mark(const std::string& sha256, const std::filesystem::path& plugin) const;

 private:
  [[nodiscard]] std::filesystem::path loading() const { return folder_ / "loading"; }
  [[nodiscard]] std::filesystem::path held() const { return folder_ / "quarantine"; }
  std::filesystem::path folder_;
};

}  // namespace bathwright::plugin_host
