// PINs of those who sign: typed at the terminal, where they are not shown, or from a file.
#pragma once

#include <bathwright/logbook/logbook.hpp>

#include "context.hpp"

namespace bathwright::command {

/// PINs one after the other, in the order they are asked for.
class Pins {
 public:
  /// With --pin-file they are its lines; "-" is standard input.
  explicit Pins(const Context& context) : file_(context.pin_file) {}

  /// `whose` as it is to be asked: "PIN of M. Okafor".
  [[nodiscard]] Result<std::string> next(const std::string& whose);

 private:
  std::string file_;
  std::size_t taken_ = 0;
};

/// Signatures of --by and --witness for a log; none where the log has no people and nobody is named as
/// witness.
Result<logbook::Signatures> signatures_for(const Context& context, const logbook::Logbook& log, Pins& pins);

}  // namespace bathwright::command
