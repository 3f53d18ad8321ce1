// The pipe from the probe to the host: frames of a fixed head and a body of the length it states.
#pragma once

#include <cstddef>
#include <cstdint>

namespace bathwright::plugin_host {

/// Descriptors of the probe.
inline constexpr int probe_memory = 3, probe_report = 4;

struct FrameHead {
  static constexpr std::uint32_t current = 0x42570001;  ///< "BW", version 1
  enum Kind : std::uint32_t {
    stage = 1,  ///< what the plugin is about to do, as the end of a sentence: "while it was loaded"
    report = 2  ///< probe_report.hpp; once
  };
  std::uint32_t version, kind, length;
};

inline constexpr std::size_t longest_frame = 1 << 20;

// What a plugin may use up while it is probed.
inline constexpr int probe_cpu_s = 2, probe_wall_s = 5;
inline constexpr std::size_t probe_memory_MiB = 512;

}  // namespace bathwright::plugin_host
