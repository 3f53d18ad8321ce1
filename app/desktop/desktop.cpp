#include "desktop.hpp"

#include "model/desk.hpp"
#include "panels/panels.hpp"
#include "window/textures.hpp"
#include "window/window.hpp"

namespace bathwright::desktop {

Outcome run(const work::Session& session, const std::filesystem::path& shop) {
  Desk desk(session, shop, Window::wake);
  auto opened = Window::open({.scale = desk.settings().scale, .dark = desk.settings().dark});
  if (!opened) return opened.problems();
  Window window = *std::move(opened);
  desk.drawn_by(window.drawn_by());
  PanelState state;
  Textures textures;
  Intents intents;
  window.run([&] {
    desk.update();
    intents.clear();
    textures.forget_unused();
    draw_desk(desk.view(), state,
              {window.fonts(), palette(window.dark()), window.scale(), nullptr, &textures}, intents);
    for (const Intent& intent : intents) {
      desk.handle(intent);
      if (const auto* look = std::get_if<SetLook>(&intent)) window.set_look(look->scale, look->dark);
    }
    if (!intents.empty()) Window::wake();
    return desk.working();
  });
  return Done{};
}

}  // namespace bathwright::desktop
