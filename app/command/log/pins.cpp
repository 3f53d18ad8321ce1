#include "pins.hpp"

#include <termios.h>
#include <unistd.h>

#include <algorithm>
#include <cstdio>
#include <fstream>
#include <iostream>

#include "access.hpp"

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

Result<std::string> Pins::next(const std::string& whose) {
  std::string pin;
  if (file_.empty()) {
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
  if (file_ == "-") {
    if (!std::getline(std::cin, pin)) return no_pin("standard input", whose);
    return pin;
  }
  std::ifstream in(file_);
  if (!in)
    return Problem{Fault::io, file_, "the file cannot be read", "a file with one PIN a line",
                   "Check the path."};
  for (std::size_t line = 0; line <= taken_; ++line)
    if (!std::getline(in, pin)) return no_pin(file_ + ":" + std::to_string(line + 1), whose);
  ++taken_;
  return pin;
}

Result<logbook::Signatures> signatures_for(const Context& context, const logbook::Logbook& log, Pins& pins) {
  logbook::Signatures signatures;
  const auto people = log.people();
  if (!people) return people.problems();
  if (people->empty() && context.witness.empty()) return signatures;
  const std::string name = signer(context);
  for (const auto& [who, credential] :
       {std::pair{name, &signatures.by}, std::pair{context.witness, &signatures.witness}}) {
    if (who.empty()) continue;
    // A name the log does not know is answered by the log; its PIN is nobody's business.
    const bool known = std::ranges::find(*people, who, &logbook::Person::name) != people->end();
    auto pin = known ? pins.next("PIN of " + who) : Result<std::string>(std::string());
    if (!pin) return pin.problems();
    *credential = logbook::Credential{who, *std::move(pin)};
  }
  return signatures;
}

}  // namespace bathwright::command
