#include "pins.hpp"

#include <termios.h>
#include <unistd.h>

#include <cstdio>
#include <fstream>
#include <iostream>

namespace bathwright::command {
namespace {

/// The terminal without its echo while this lives.
class NoEcho {
 public:
  NoEcho() {
    tcgetattr(STDIN_FILENO, &before_);
    termios silent = before_;
    silent.c_lflag &= ~static_cast<tcflag_t>(ECHO);
    tcsetattr(STDIN_FILENO, TCSAFLUSH, &silent);
  }
  ~NoEcho() { tcsetattr(STDIN_FILENO, TCSAFLUSH, &before_); }
  NoEcho(const NoEcho&) = delete;
  NoEcho& operator=(const NoEcho&) = delete;

 private:
  termios before_{};
};

Problem no_pin(const std::string& where, const std::string& whose) {
  return {Fault::bad_input, where, "there is no " + whose, "one PIN a line, the signer's first", ""};
}

}  // namespace

Result<std::string> Pins::operator()(const std::string& whose) {
  std::string pin;
  if (context_.pin_file.empty()) {
    if (isatty(STDIN_FILENO) == 0)
      return Problem{Fault::bad_input, "--pin-file",
                     "the " + whose + " can not be asked for: this is no terminal",
                     "a file with one PIN a line, the signer's first; - for standard input", ""};
    std::fprintf(stderr, "%s: ", whose.c_str());
    const NoEcho no_echo;
    std::getline(std::cin, pin);
    std::fprintf(stderr, "\n");
    return pin;
  }
  if (context_.pin_file == "-") {
    if (!std::getline(std::cin, pin)) return no_pin("standard input", whose);
    return pin;
  }
  std::ifstream in(context_.pin_file);
  if (!in)
    return Problem{Fault::io, context_.pin_file, "the file cannot be read", "a file with one PIN a line",
                   "Check the path."};
  for (std::size_t line = 0; line <= taken_; ++line)
    if (!std::getline(in, pin)) return no_pin(context_.pin_file + ":" + std::to_string(line + 1), whose);
  ++taken_;
  return pin;
}

}  // namespace bathwright::command
