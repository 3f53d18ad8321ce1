// The X server's side of a window: where false input goes in and pixels come out.
#pragma once

#include <bathwright/charts/canvas.hpp>
#include <cstdint>
#include <filesystem>
#include <string>
#include <vector>

struct _XDisplay;

namespace desktop_test {

/// What a display shows, row by row from the top, 0xRRGGBB.
struct Shot {
  int width = 0, height = 0;
  std::vector<std::uint32_t> pixels;

  [[nodiscard]] bool is(int x, int y, bathwright::charts::Colour colour) const;
  [[nodiscard]] int count(bathwright::charts::Colour colour) const;
  /// The lowest rows of it.
  [[nodiscard]] Shot foot(int rows) const;
  /// As a PNG; throws where the file cannot be written.
  void save(const std::filesystem::path& file) const;
  bool operator==(const Shot&) const = default;
};

class Screen {
 public:
  /// Throws where the display does not answer.
  explicit Screen(const std::string& display);
  ~Screen();
  Screen(const Screen&) = delete;
  Screen& operator=(const Screen&) = delete;

  void move_to(int x, int y) const;
  void button(unsigned which, bool down) const;
  void key(unsigned long keysym, bool down) const;
  /// Whether Shift is held to type it on this keyboard.
  [[nodiscard]] bool is_shifted(unsigned long keysym) const;
  /// What was sent is on its way to the window.
  void flush() const;
  [[nodiscard]] Shot shot() const;

 private:
  _XDisplay* connection_;
};

}  // namespace desktop_test
