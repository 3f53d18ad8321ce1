#include "display.hpp"

#include <fcntl.h>
#include <signal.h>
#include <sys/prctl.h>
#include <sys/wait.h>
#include <unistd.h>

#include <cstdlib>
#include <stdexcept>

namespace desktop_test {

Display::Display(int width, int height) {
  int ends[2];
  if (::pipe(ends) != 0) throw std::runtime_error("no pipe");
  const std::string size = std::to_string(width) + "x" + std::to_string(height) + "x24";
  process_ = ::fork();
  if (process_ == 0) {
    ::close(ends[0]);
    const int nowhere = ::open("/dev/null", O_WRONLY);
    ::dup2(nowhere, STDOUT_FILENO);
    ::dup2(nowhere, STDERR_FILENO);
    ::prctl(PR_SET_PDEATHSIG, SIGTERM);  // a test that ends by force takes its display along
    const std::string fd = std::to_string(ends[1]);
    ::execlp("Xvfb", "Xvfb", "-displayfd", fd.c_str(), "-screen", "0", size.c_str(), "-nolisten", "tcp",
             static_cast<char*>(nullptr));
    ::_exit(127);
  }
  ::close(ends[1]);
  std::string number;
  char c = 0;
  while (::read(ends[0], &c, 1) == 1 && c != '\n') number += c;
  ::close(ends[0]);
  if (number.empty()) throw std::runtime_error("Xvfb did not start: install the package xvfb");
  name_ = ":" + number;
  ::setenv("DISPLAY", name_.c_str(), 1);
}

Display::~Display() {
  ::kill(process_, SIGTERM);
  ::waitpid(process_, nullptr, 0);
}

}  // namespace desktop_test
