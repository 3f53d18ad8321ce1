// Pictures on the graphics side, for as long as they are shown.
#pragma once

#include <imgui.h>

#include <bathwright/sheets/picture.hpp>
#include <map>
#include <memory>

namespace bathwright::desktop {

/// Lives and dies while the window's OpenGL context is current.
class Textures {
 public:
  Textures() = default;
  ~Textures();
  Textures(const Textures&) = delete;
  Textures& operator=(const Textures&) = delete;

  /// Brought there on the first call.
  [[nodiscard]] ImTextureID of(const std::shared_ptr<const sheets::Picture>& picture);
  /// Before each picture of the window: what the last one did not show goes.
  void forget_unused();

 private:
  struct Held {
    std::shared_ptr<const sheets::Picture> picture;
    unsigned name = 0;
    bool used = false;
  };
  std::map<const sheets::Picture*, Held> held_;
};

}  // namespace bathwright::desktop
