#include "driver.hpp"

#include <GLFW/glfw3.h>
#include <X11/XKBlib.h>
#include <X11/Xlib.h>
#include <X11/Xutil.h>
#include <X11/extensions/XTest.h>
#include <X11/keysym.h>
#include <cairo.h>
#include <unistd.h>

#include <chrono>
#include <cstdlib>
#include <stdexcept>
#include <thread>

namespace desktop_test {

using namespace bathwright;
using namespace bathwright::desktop;
using Clock = std::chrono::steady_clock;

namespace {

bool is_page(const std::string& name) {
  for (const char* page :
       {"The shift", "Forecast", "Trends", "Log", "Hand over", "Bath types", "People", "Settings"})
    if (name == page) return true;
  return false;
}

double ms_since(Clock::time_point begin) {
  return std::chrono::duration<double, std::milli>(Clock::now() - begin).count();
}

}  // namespace

EmptyHome::EmptyHome() {
  std::string name = (std::filesystem::temp_directory_path() / "desk-XXXXXX").string();
  if (!::mkdtemp(name.data())) throw std::runtime_error("no folder to work in");
  path_ = name;
  for (const char* variable : {"XDG_DATA_HOME", "XDG_STATE_HOME", "XDG_CACHE_HOME"})
    ::setenv(variable, (path_ / variable).c_str(), 1);
  ::setenv("USER", "okafor", 1);
}

EmptyHome::~EmptyHome() {
  std::error_code failed;
  std::filesystem::remove_all(path_, failed);
}

/// The X server's side: where false input goes in and pixels come out.
struct Driver::Screen {
  ::Display* connection;

  explicit Screen(const std::string& name) : connection(XOpenDisplay(name.c_str())) {
    if (!connection) throw std::runtime_error("no connection to " + name);
  }
  ~Screen() { XCloseDisplay(connection); }
  Screen(const Screen&) = delete;
  Screen& operator=(const Screen&) = delete;

  void flush() const {
    XSync(connection, False);
    std::this_thread::sleep_for(std::chrono::milliseconds(2));  // on its way to the window
  }
};

Driver::Driver(int width, int height, float scale, const std::filesystem::path& shop)
    : display_(width, height), width_(width), height_(height) {
  work::Session session;
  desk_ = std::make_unique<Desk>(session, shop, desktop::Window::wake);
  auto window = desktop::Window::open({.width = width, .height = height, .scale = scale});
  if (!window) throw std::runtime_error(text(window.problems()));
  window_ = std::make_unique<desktop::Window>(*std::move(window));
  textures_ = std::make_unique<desktop::Textures>();
  desk_->drawn_by(window_->renderer());
  screen_ = std::make_unique<Screen>(display_.name());
  pictures(5);
}

Driver::~Driver() {
  screen_.reset();
  textures_.reset();
  window_.reset();
  desk_.reset();
}

void Driver::draw(Intents& intents) {
  desk_->update();
  places_.clear();
  textures_->forget_unused();
  draw_desk(desk_->view(), state_,
            {window_->fonts(), palette(window_->dark()), window_->scale(), &places_, textures_.get()},
            intents);
  for (const Intent& intent : intents) desk_->handle(intent);
}

PictureCost Driver::picture() {
  PictureCost cost;
  glfwPollEvents();
  const auto begin = Clock::now();
  Intents intents;
  window_->picture([&] {
    const auto ui = Clock::now();
    draw(intents);
    cost.ui_ms = ms_since(ui);
  });
  cost.all_ms = ms_since(begin);
  return cost;
}

void Driver::sleep_as_the_window_does(double seconds) {
  std::jthread bell([&, seconds] {
    std::this_thread::sleep_for(std::chrono::duration<double>(seconds));
    window_->close();
    desktop::Window::wake();
  });
  Intents intents;
  window_->run([&] {
    draw(intents);
    return desk_->working();
  });
}

void Driver::pictures(int count) {
  for (int i = 0; i < count; ++i) picture();
}

bool Driver::until(const std::function<bool()>& holds, double seconds) {
  const auto begin = Clock::now();
  while (!holds()) {
    if (ms_since(begin) > 1000 * seconds) {
      save(std::filesystem::temp_directory_path() / "waited-in-vain.png");
      return false;
    }
    picture();
    std::this_thread::sleep_for(std::chrono::milliseconds(5));
  }
  pictures(2);
  return true;
}

void Driver::move_to(double x, double y) {
  XTestFakeMotionEvent(screen_->connection, -1, static_cast<int>(x), static_cast<int>(y), CurrentTime);
  screen_->flush();
  picture();
}

void Driver::button(unsigned which, bool down) {
  XTestFakeButtonEvent(screen_->connection, which, down ? True : False, CurrentTime);
  screen_->flush();
  picture();
}

void Driver::bring_into_sight(const std::string& name, const std::string& list) {
  constexpr unsigned wheel_up = 4, wheel_down = 5;
  constexpr int most_turns = 400;
  for (int turn = 0; turn < most_turns; ++turn) {
    if (!places_.contains(name)) throw std::runtime_error("\"" + name + "\" is not drawn");
    const ImVec4 place = places_.at(name);
    const float scale = window_->scale(), pages = 46 * scale, strip = 100 * scale;
    float top = pages, bottom = static_cast<float>(height_) - strip, x = (place.x + place.z) / 2;
    if (!list.empty()) {
      const ImVec4 inside = places_.at(list);
      top = inside.y, bottom = inside.w, x = (inside.x + inside.z) / 2;
    } else if (is_page(name)) {
      return;  // always in sight
    }
    if (place.y >= top && place.w <= bottom) return;
    move_to(x, (top + bottom) / 2);
    const unsigned wheel = place.y < top ? wheel_up : wheel_down;
    button(wheel, true);
    button(wheel, false);
  }
  save(std::filesystem::temp_directory_path() / "out-of-sight.png");
  throw std::runtime_error("\"" + name + "\" does not come into sight: out-of-sight.png has the window");
}

void Driver::press(const std::string& name, double share) {
  const ImVec4 place = places_.at(name);
  move_to(place.x + share * (place.z - place.x), (place.y + place.w) / 2);
  button(1, true);
  button(1, false);
  picture();
}

void Driver::press_at(const std::string& name, double share) {
  bring_into_sight(name);
  press(name, share);
}

void Driver::click(const std::string& name, const std::string& list) {
  bring_into_sight(name, list);
  press(name, 0.5);
}

void Driver::key(unsigned long keysym, bool with_ctrl) {
  const auto press = [&](unsigned long which, bool down) {
    XTestFakeKeyEvent(screen_->connection, XKeysymToKeycode(screen_->connection, which), down ? True : False,
                      CurrentTime);
  };
  const KeyCode code = XKeysymToKeycode(screen_->connection, keysym);
  const bool shifted = XkbKeycodeToKeysym(screen_->connection, code, 0, 0) != keysym;
  if (with_ctrl) press(XK_Control_L, true);
  if (shifted) press(XK_Shift_L, true);
  press(keysym, true);
  screen_->flush();
  if (with_ctrl) picture();  // a shortcut is looked for once a picture
  press(keysym, false);
  if (shifted) press(XK_Shift_L, false);
  if (with_ctrl) press(XK_Control_L, false);
  screen_->flush();
  picture();
}

void Driver::type(const std::string& text) {
  for (const char c : text) key(static_cast<unsigned char>(c));  // Latin-1 is its own keysym
}

void Driver::put(const std::string& name, const std::string& text) {
  click(name);
  pictures(2);
  type(text);
  pictures(2);
}

int Driver::pixels_of(charts::Colour colour) const {
  XImage* image =
      XGetImage(screen_->connection, DefaultRootWindow(screen_->connection), 0, 0,
                static_cast<unsigned>(width_), static_cast<unsigned>(height_), AllPlanes, ZPixmap);
  if (!image) throw std::runtime_error("the window cannot be read");
  const unsigned long wanted = (static_cast<unsigned long>(colour.red) << 16) |
                               (static_cast<unsigned long>(colour.green) << 8) | colour.blue;
  int found = 0;
  for (int y = 0; y < height_; ++y)
    for (int x = 0; x < width_; ++x)
      if ((XGetPixel(image, x, y) & 0xFFFFFF) == wanted) ++found;
  XDestroyImage(image);
  return found;
}

void Driver::save(const std::filesystem::path& file) const {
  XImage* image =
      XGetImage(screen_->connection, DefaultRootWindow(screen_->connection), 0, 0,
                static_cast<unsigned>(width_), static_cast<unsigned>(height_), AllPlanes, ZPixmap);
  if (!image) throw std::runtime_error("the window cannot be read");
  cairo_surface_t* surface = cairo_image_surface_create(CAIRO_FORMAT_RGB24, width_, height_);
  unsigned char* row = cairo_image_surface_get_data(surface);
  for (int y = 0; y < height_; ++y, row += cairo_image_surface_get_stride(surface))
    for (int x = 0; x < width_; ++x)
      reinterpret_cast<std::uint32_t*>(row)[x] = static_cast<std::uint32_t>(XGetPixel(image, x, y));
  cairo_surface_mark_dirty(surface);
  const auto status = cairo_surface_write_to_png(surface, file.c_str());
  cairo_surface_destroy(surface);
  XDestroyImage(image);
  if (status != CAIRO_STATUS_SUCCESS) throw std::runtime_error("cannot write " + file.string());
}

}  // namespace desktop_test
