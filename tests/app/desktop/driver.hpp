// The desktop in a real window, worked with mouse and keys as a person works it.
#pragma once

#include <functional>
#include <memory>
#include <stdexcept>
#include <string>
#include <vector>

#include "display.hpp"
#include "model/desk.hpp"
#include "panels/panels.hpp"
#include "screen.hpp"
#include "window/textures.hpp"
#include "window/window.hpp"

namespace desktop_test {

/// Folders of the user that hold nothing, made for one test and gone with it.
class EmptyHome {
 public:
  EmptyHome();
  ~EmptyHome();
  EmptyHome(const EmptyHome&) = delete;
  EmptyHome& operator=(const EmptyHome&) = delete;
  [[nodiscard]] const std::filesystem::path& path() const { return path_; }

 private:
  std::filesystem::path path_;
};

/// What one picture cost.
struct PictureCost {
  double ui_ms = 0, all_ms = 0;  ///< the panels' code alone; with drawing in software and showing it
};

class Driver {
 public:
  /// Throws where no window can be opened.
  Driver(int width, int height, float scale, const std::filesystem::path& shop, bool dark = false);
  ~Driver();
  Driver(const Driver&) = delete;
  Driver& operator=(const Driver&) = delete;

  PictureCost picture();
  void pictures(int count);
  /// As the program does while nobody touches it: pictures only when something asks for one.
  void sleep_as_the_window_does(double seconds);
  /// Pictures until it holds or the seconds are over; whether it held.
  bool until(const std::function<bool()>& holds, double seconds = 30);

  /// The middle of the thing of that name, brought into sight first. Throws where it is not drawn.
  /// `list`: the open list it is in.
  void click(const std::string& name, const std::string& list = {});
  /// Puts the pointer on a share of the width of the thing and presses.
  void press_at(const std::string& name, double share);
  void type(const std::string& text);
  /// Clicks into a field, whose whole text is then selected, and types.
  void put(const std::string& name, const std::string& text);
  void key(unsigned long keysym, bool with_ctrl = false);
  /// The thing that has the keyboard's focus and shows it; empty where none does.
  [[nodiscard]] std::string focused() const;
  /// Whether a line in the accent's colour runs above what has the focus.
  [[nodiscard]] bool focus_is_seen() const;
  /// Leads the focus there with the arrow keys, as somebody does who sees it. Throws where it does not come.
  void walk_to(const std::string& name);
  /// Presses Tab until the field has the focus. Throws where it does not come.
  void tab_to(const std::string& name);
  /// Scrolls until the thing is in sight. Throws where it is not drawn.
  void bring_into_sight(const std::string& name, const std::string& list = {});

  [[nodiscard]] Shot shot() const;
  /// The window as a PNG.
  void save(const std::filesystem::path& file) const;

  [[nodiscard]] bathwright::desktop::Desk& desk() { return *desk_; }
  [[nodiscard]] const bathwright::desktop::DeskView& view() const { return desk_->view(); }

 private:
  void press(const std::string& name, double share);
  void move_to(double x, double y);
  void button(unsigned which, bool down);
  void draw(bathwright::desktop::Intents& intents);
  [[nodiscard]] std::runtime_error lost(const std::string& name) const;

  Display display_;
  std::unique_ptr<bathwright::desktop::Desk> desk_;
  std::unique_ptr<bathwright::desktop::Window> window_;
  std::unique_ptr<bathwright::desktop::Textures> textures_;
  std::unique_ptr<Screen> screen_;
  bathwright::desktop::PanelState state_;
  bathwright::desktop::Places places_;
  int width_, height_;
};

}  // namespace desktop_test
