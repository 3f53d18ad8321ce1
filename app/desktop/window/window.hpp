// One window with an OpenGL picture in it. On a machine whose OpenGL fails the program starts itself once
// more with Mesa's software renderer; it never needs a graphics processor.
#pragma once

#include <bathwright/base/result.hpp>
#include <functional>
#include <memory>

#include "fonts.hpp"

struct GLFWwindow;

namespace bathwright::desktop {

class Window {
 public:
  struct Wish {
    int width = 1280, height = 800;
    float scale = 0;  ///< of letters and spaces, 1 to 2; 0: what the display asks for
    bool dark = false;
  };

  /// Opens it. Fails (io) where there is no display or no OpenGL even from the software renderer, and names
  /// the command-line way. Does not return where the program starts itself again.
  static Result<Window> open(const Wish& wish);

  Window(Window&&) noexcept;
  Window& operator=(Window&&) noexcept;
  ~Window();

  /// Draws pictures until the window is closed. A picture is drawn after input, after `wake`, and a few times
  /// more for what settles (a focus, a size); some more while `draw` says that work goes on. Otherwise the
  /// program sleeps.
  void run(const std::function<bool()>& draw);
  /// One picture, whatever happens; false once the window is to be closed.
  bool picture(const std::function<void()>& draw);
  void close();

  /// From any thread: something has changed that must be drawn.
  static void wake();

  [[nodiscard]] const Fonts& fonts() const;
  [[nodiscard]] float scale() const;
  [[nodiscard]] bool dark() const;
  void set_look(float scale, bool dark);  ///< from the next picture on
  /// "llvmpipe, drawn in software": what draws, and that the machine's own OpenGL failed where it did.
  [[nodiscard]] std::string drawn_by() const;
  [[nodiscard]] GLFWwindow* handle() const;

 private:
  struct Open;
  explicit Window(std::unique_ptr<Open> open);
  std::unique_ptr<Open> open_;
};

}  // namespace bathwright::desktop
