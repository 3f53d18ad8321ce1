// Who works, with which log and which bath types: what the command line and the desktop both start from.
#pragma once

#include <bathwright/base/result.hpp>
#include <functional>
#include <string>
#include <vector>

namespace bathwright::work {

struct Session {
  std::string log_file;  ///< empty: not given
  std::vector<std::string> plugin_folders;
  std::string by, witness, shift;
  /// The PIN of somebody, asked for as "PIN of M. Okafor". Called only where the log has people.
  std::function<Result<std::string>(const std::string& whose)> pin;
};

/// "bathwright 0.1.0".
[[nodiscard]] std::string program_and_version();

/// Who signs: the session's name, else the user of the computer, else "unsigned".
[[nodiscard]] std::string signer(const Session& session);

}  // namespace bathwright::work
