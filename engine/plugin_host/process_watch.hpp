// What a plugin must leave as it is in the process that loads it.
#pragma once

#include <array>
#include <bathwright/base/result.hpp>
#include <cfenv>
#include <csignal>

#include "descriptor.hpp"

namespace bathwright::plugin_host {

/// Notices threads left running, another locale, floating-point mode or signal handler, standard streams
/// replaced, and anything written to standard output or error. For a process with no other threads.
class ProcessWatch {
 public:
  /// Standard output and error go into a pipe of our own from here on.
  ProcessWatch();

  /// One problem for each thing that is not as it was, and puts back what can be put back. `where` names the
  /// plugin, `during` ends the sentences: "while it was loaded".
  Problems changes(const std::string& where, const std::string& during);

 private:
  static constexpr int last_signal = 64;
  struct Stream {
    unsigned long device, inode;
    bool operator==(const Stream&) const = default;
  };

  [[nodiscard]] int thread_count() const;
  [[nodiscard]] bool threads_left() const;
  [[nodiscard]] static std::array<Stream, 3> streams();
  [[nodiscard]] std::string printed() const;
  static unsigned floating_point_mode();

  Descriptor chatter_, stat_;
  int threads_ = 0;
  std::string locale_;
  std::fenv_t floating_point_{};
  unsigned mode_ = 0;
  std::array<struct sigaction, last_signal + 1> handlers_{};
  std::array<Stream, 3> streams_{};
};

}  // namespace bathwright::plugin_host
