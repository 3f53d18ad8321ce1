#include "driver.hpp"

#include <GLFW/glfw3.h>
#include <X11/keysym.h>
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

Driver::Driver(int width, int height, float scale, const std::filesystem::path& shop, bool dark)
    : display_(width, height), width_(width), height_(height) {
  work::Session session;
  desk_ = std::make_unique<Desk>(session, shop, desktop::Window::wake);
  auto window = desktop::Window::open({.width = width, .height = height, .scale = scale, .dark = dark});
  if (!window) throw std::runtime_error(text(window.problems()));
  window_ = std::make_unique<desktop::Window>(*std::move(window));
  textures_ = std::make_unique<desktop::Textures>();
  desk_->drawn_by(window_->drawn_by());
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

#if defined(__SANITIZE_THREAD__) || defined(__SANITIZE_ADDRESS__)
constexpr double patience = 20;  // what watches every access slows the chemistry down by as much
#else
constexpr double patience = 1;
#endif

bool Driver::until(const std::function<bool()>& holds, double seconds) {
  const auto begin = Clock::now();
  while (!holds()) {
    if (ms_since(begin) > 1000 * seconds * patience) {
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
  screen_->move_to(static_cast<int>(x), static_cast<int>(y));
  screen_->flush();
  picture();
}

void Driver::button(unsigned which, bool down) {
  screen_->button(which, down);
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
  if (with_ctrl) screen_->key(XK_Control_L, true);
  screen_->key(keysym, true);
  screen_->flush();
  picture();  // what a key does beyond its letter is looked for once a picture
  screen_->key(keysym, false);
  if (with_ctrl) screen_->key(XK_Control_L, false);
  screen_->flush();
  picture();
}

std::string Driver::focused() const {
  const auto focus = places_.find(desktop::the_focus);
  if (focus == places_.end()) return {};
  const auto same = [&](const ImVec4& other) {
    return other.x == focus->second.x && other.y == focus->second.y && other.z == focus->second.z &&
           other.w == focus->second.w;
  };
  for (const auto& [name, place] : places_)
    if (name != desktop::the_focus && same(place)) return name;
  return {};
}

bool Driver::focus_is_seen() const {
  const auto focus = places_.find(desktop::the_focus);
  if (focus == places_.end()) return false;
  const ImVec4 place = focus->second;
  const Shot now = shot();
  const auto width = static_cast<int>(place.z - place.x);
  for (int away = 0; away < 6; ++away) {
    const int y = static_cast<int>(place.y) - away;
    int ringed = 0;
    for (int x = static_cast<int>(place.x); x < static_cast<int>(place.z); ++x)
      ringed += now.is(x, y, palette(window_->dark()).accent) ? 1 : 0;
    if (ringed > width * 9 / 10) return true;
  }
  return false;
}

void Driver::walk_to(const std::string& name) {
  constexpr int most = 150;
  for (int i = 0; i < most && focused() != name; ++i) {
    if (!places_.contains(name)) throw std::runtime_error("\"" + name + "\" is not drawn");
    const ImVec4 to = places_.at(name);
    const auto focus = places_.find(desktop::the_focus);
    const ImVec4 at = focus == places_.end() ? ImVec4{} : focus->second;
    const float middle = (to.y + to.w) / 2;
    key(middle > at.w ? XK_Down : middle < at.y ? XK_Up : at.x < to.x ? XK_Right : XK_Left);
    picture();
  }
  if (focused() != name) throw lost(name);
}

void Driver::tab_to(const std::string& name) {
  constexpr int most = 40;
  for (int i = 0; i < most && focused() != name; ++i) {
    key(XK_Tab);
    picture();
  }
  if (focused() != name) throw lost(name);
}

std::runtime_error Driver::lost(const std::string& name) const {
  save(std::filesystem::temp_directory_path() / "no-focus.png");
  return std::runtime_error("the focus does not come to \"" + name + "\" and is at \"" + focused() +
                            "\": no-focus.png has the window");
}

void Driver::type(const std::string& text) {
  for (const char c : text) {
    const auto letter = static_cast<unsigned char>(c);  // Latin-1 is its own keysym
    const bool shifted = screen_->is_shifted(letter);
    if (shifted) screen_->key(XK_Shift_L, true);
    screen_->key(letter, true);
    screen_->key(letter, false);
    if (shifted) screen_->key(XK_Shift_L, false);
    screen_->flush();
    picture();
  }
}

void Driver::put(const std::string& name, const std::string& text) {
  click(name);
  pictures(2);
  type(text);
  pictures(2);
}

Shot Driver::shot() const { return screen_->shot(); }
void Driver::save(const std::filesystem::path& file) const { shot().save(file); }

}  // namespace desktop_test
