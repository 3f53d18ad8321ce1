// PINs of those who sign: typed at the terminal, where they are not shown, or from a file.
#pragma once

#include "context.hpp"

namespace bathwright::command {

/// PINs one after the other, in the order they are asked for.
class Pins {
 public:
  /// With --pin-file they are its lines; "-" is standard input. Of the context the file is read when a PIN is
  /// asked for.
  explicit Pins(const Context& context) : context_(context) {}

  /// `whose` as it is to be asked: "PIN of M. Okafor".
  [[nodiscard]] Result<std::string> operator()(const std::string& whose);

 private:
  const Context& context_;
  std::size_t taken_ = 0;
};

}  // namespace bathwright::command
