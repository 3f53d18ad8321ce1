#include "screen.hpp"

#include <X11/XKBlib.h>
#include <X11/Xlib.h>
#include <X11/Xutil.h>
#include <X11/extensions/XTest.h>
#include <cairo.h>

#include <algorithm>
#include <chrono>
#include <stdexcept>
#include <thread>

namespace desktop_test {

namespace {

std::uint32_t pixel(bathwright::charts::Colour colour) {
  return (static_cast<std::uint32_t>(colour.red) << 16) | (static_cast<std::uint32_t>(colour.green) << 8) |
         colour.blue;
}

}  // namespace

bool Shot::is(int x, int y, bathwright::charts::Colour colour) const {
  return x >= 0 && x < width && y >= 0 && y < height &&
         pixels[static_cast<std::size_t>(y) * static_cast<std::size_t>(width) +
                static_cast<std::size_t>(x)] == pixel(colour);
}

int Shot::count(bathwright::charts::Colour colour) const {
  return static_cast<int>(std::ranges::count(pixels, pixel(colour)));
}

Shot Shot::foot(int rows) const {
  return {width, rows, {pixels.end() - static_cast<std::ptrdiff_t>(rows) * width, pixels.end()}};
}

void Shot::save(const std::filesystem::path& file) const {
  cairo_surface_t* surface = cairo_image_surface_create(CAIRO_FORMAT_RGB24, width, height);
  unsigned char* row = cairo_image_surface_get_data(surface);
  for (int y = 0; y < height; ++y, row += cairo_image_surface_get_stride(surface))
    std::copy_n(pixels.begin() + static_cast<std::ptrdiff_t>(y) * width, width,
                reinterpret_cast<std::uint32_t*>(row));
  cairo_surface_mark_dirty(surface);
  const auto status = cairo_surface_write_to_png(surface, file.c_str());
  cairo_surface_destroy(surface);
  if (status != CAIRO_STATUS_SUCCESS) throw std::runtime_error("cannot write " + file.string());
}

Screen::Screen(const std::string& display) : connection_(XOpenDisplay(display.c_str())) {
  if (!connection_) throw std::runtime_error("no connection to " + display);
}

Screen::~Screen() { XCloseDisplay(connection_); }

void Screen::move_to(int x, int y) const { XTestFakeMotionEvent(connection_, -1, x, y, CurrentTime); }

void Screen::button(unsigned which, bool down) const {
  XTestFakeButtonEvent(connection_, which, down ? True : False, CurrentTime);
}

void Screen::key(unsigned long keysym, bool down) const {
  XTestFakeKeyEvent(connection_, XKeysymToKeycode(connection_, keysym), down ? True : False, CurrentTime);
}

bool Screen::is_shifted(unsigned long keysym) const {
  return XkbKeycodeToKeysym(connection_, XKeysymToKeycode(connection_, keysym), 0, 0) != keysym;
}

void Screen::flush() const {
  XSync(connection_, False);
  std::this_thread::sleep_for(std::chrono::milliseconds(2));
}

Shot Screen::shot() const {
  const ::Window root = DefaultRootWindow(connection_);
  const int width = DisplayWidth(connection_, DefaultScreen(connection_)),
            height = DisplayHeight(connection_, DefaultScreen(connection_));
  XImage* image = XGetImage(connection_, root, 0, 0, static_cast<unsigned>(width),
                            static_cast<unsigned>(height), AllPlanes, ZPixmap);
  if (!image) throw std::runtime_error("the display cannot be read");
  Shot shot{width, height, {}};
  shot.pixels.reserve(static_cast<std::size_t>(width) * static_cast<std::size_t>(height));
  for (int y = 0; y < height; ++y)
    for (int x = 0; x < width; ++x)
      shot.pixels.push_back(static_cast<std::uint32_t>(XGetPixel(image, x, y) & 0xFFFFFF));
  XDestroyImage(image);
  return shot;
}

}  // namespace desktop_test
