// A display of our own for a window under test: Xvfb, started here and ended with the object.
#pragma once

#include <string>

namespace desktop_test {

class Display {
 public:
  /// Throws where Xvfb is not installed or does not start.
  Display(int width, int height);
  ~Display();
  Display(const Display&) = delete;
  Display& operator=(const Display&) = delete;

  [[nodiscard]] const std::string& name() const { return name_; }  ///< ":93"

 private:
  int process_ = -1;
  std::string name_;
};

}  // namespace desktop_test
