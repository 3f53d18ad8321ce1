#include "desktop.hpp"

#include "context.hpp"
#include "model/desk.hpp"
#include "panels/panels.hpp"
#include "window/window.hpp"

namespace bathwright::desktop {

int run(const command::Context& context, const std::filesystem::path& folder) {
  auto opened = Window::open({});
  if (!opened) return command::fail(context, opened.problems());
  Window window = *std::move(opened);
  Desk desk(context, folder, Window::wake);
  desk.view().status.renderer = window.renderer() + (window.software() ? ", drawn in software" : "");
  PanelState state;
  Intents intents;
  window.run([&] {
    desk.update();
    intents.clear();
    draw_desk(desk.view(), state, {window.fonts(), palette(window.dark()), window.scale()}, intents);
    for (const Intent& intent : intents) desk.handle(intent);
  });
  return command::Exit::all_well;
}

}  // namespace bathwright::desktop
