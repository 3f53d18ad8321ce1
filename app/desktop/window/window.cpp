#include "window.hpp"

#include <GLFW/glfw3.h>
#include <backends/imgui_impl_glfw.h>
#include <backends/imgui_impl_opengl3.h>
#include <unistd.h>

#include <algorithm>
#include <array>
#include <cstdlib>
#include <cstring>
#include <fstream>
#include <iterator>
#include <string>
#include <vector>

#include "gl_function.hpp"
#include "theme.hpp"

namespace bathwright::desktop {
namespace {

constexpr const char* restarted =
    "BATHWRIGHT_SOFTWARE_PICTURE";  // set in the second start, so that there is no third
constexpr int least_width = 1100, least_height = 700;
constexpr int pictures_after_input = 3;  // a click is seen in the first, what it opens laid out in the next
constexpr double at_rest_s = 10;         // the clock on the shift strip shows minutes
constexpr double at_work_s = 0.2;        // how far work has come

std::string last_error() {
  const char* words = nullptr;
  glfwGetError(&words);
  return words ? words : "no reason was given";
}

bool has_display() { return std::getenv("DISPLAY") || std::getenv("WAYLAND_DISPLAY"); }

Problem no_window(std::string what) {
  return {Fault::io, "desktop", std::move(what), "",
          has_display()
              ? "Use the command line, which does the same: bathwright --help."
              : "Start it where a display is (DISPLAY is not set), or use the command line, which does the "
                "same: bathwright --help."};
}

/// The words this program was started with.
std::vector<std::string> own_arguments() {
  std::ifstream file("/proc/self/cmdline", std::ios::binary);
  const std::string all{std::istreambuf_iterator<char>(file), {}};
  std::vector<std::string> words;
  for (std::size_t at = 0; at < all.size(); at += words.back().size() + 1)
    words.emplace_back(all.c_str() + at);
  return words;
}

/// Becomes this program again, drawing in software. Returns only where that fails. What chose the driver that
/// failed is taken back: a driver named in the environment, or a vendor's library in front of Mesa's.
void start_again_in_software() {
  if (std::getenv(restarted)) return;
  ::setenv(restarted, "1", 1);
  ::setenv("LIBGL_ALWAYS_SOFTWARE", "1", 1);
  ::setenv("__GLX_VENDOR_LIBRARY_NAME", "mesa", 1);
  ::unsetenv("GALLIUM_DRIVER");
  ::unsetenv("MESA_LOADER_DRIVER_OVERRIDE");
  std::vector<std::string> words = own_arguments();
  std::vector<char*> raw;
  for (std::string& word : words) raw.push_back(word.data());
  raw.push_back(nullptr);
  ::execv("/proc/self/exe", raw.data());
}

const char* gl_text(unsigned name) {
  const auto get = gl<const unsigned char* (*)(unsigned)>("glGetString");
  const unsigned char* text = get ? get(name) : nullptr;
  return text ? reinterpret_cast<const char*>(text) : "";
}

/// The whole picture in one colour, without the triangles of a filled rectangle.
void clear(charts::Colour c) {
  static const auto set = gl<void (*)(float, float, float, float)>("glClearColor");
  static const auto all = gl<void (*)(GLbitfield)>("glClear");
  const ImVec4 ground = colour(c);
  if (set) set(ground.x, ground.y, ground.z, 1);
  if (all) all(GL_COLOR_BUFFER_BIT);
}

GLFWwindow* create(const Window::Wish& wish) {
  glfwWindowHint(GLFW_CONTEXT_VERSION_MAJOR, 3);
  glfwWindowHint(GLFW_CONTEXT_VERSION_MINOR, 2);
  glfwWindowHint(GLFW_OPENGL_PROFILE, GLFW_OPENGL_CORE_PROFILE);
  for (const int unused : {GLFW_DEPTH_BITS, GLFW_STENCIL_BITS, GLFW_SAMPLES}) glfwWindowHint(unused, 0);
  return glfwCreateWindow(wish.width, wish.height, "Bathwright", nullptr, nullptr);
}

}  // namespace

struct Window::Open {
  GLFWwindow* window = nullptr;
  ImGuiContext* context = nullptr;
  Fonts fonts;
  float scale = 1;
  bool dark = false, new_look = false;
  std::string renderer;
  int pictures_due = pictures_after_input;
  bool enter_down = false, enter_is_press = false;

  /// Enter presses what Space presses, but the Enter that ends the typing in a field does no more than that.
  void enter_presses() {
    ImGuiIO& io = ImGui::GetIO();
    const bool down = io.KeysDown[GLFW_KEY_ENTER] || io.KeysDown[GLFW_KEY_KP_ENTER];
    if (down && !enter_down) enter_is_press = !io.WantTextInput;
    enter_down = down;
    if (enter_down && enter_is_press) io.NavInputs[ImGuiNavInput_Activate] = 1;
  }

  ~Open() {
    if (context) {
      ImGui_ImplOpenGL3_Shutdown();
      ImGui_ImplGlfw_Shutdown();
      ImGui::DestroyContext(context);
    }
    if (window) glfwDestroyWindow(window);
    glfwTerminate();
  }
};

Window::Window(std::unique_ptr<Open> open) : open_(std::move(open)) {}
Window::Window(Window&&) noexcept = default;
Window& Window::operator=(Window&&) noexcept = default;
Window::~Window() = default;

Result<Window> Window::open(const Wish& wish) {
  if (!has_display()) return no_window("there is no display");
  if (!glfwInit()) return no_window("no window can be opened: " + last_error());
  auto open = std::make_unique<Open>();
  open->window = create(wish);
  if (!open->window) {
    const std::string why = last_error();
    start_again_in_software();
    return no_window("OpenGL 3.2 is not to be had, not from the software renderer either: " + why);
  }
  glfwSetWindowSizeLimits(open->window, least_width, least_height, GLFW_DONT_CARE, GLFW_DONT_CARE);
  glfwMakeContextCurrent(open->window);
  glfwSwapInterval(1);
  constexpr unsigned gl_renderer = 0x1F01;
  open->renderer = gl_text(gl_renderer);

  IMGUI_CHECKVERSION();
  open->context = ImGui::CreateContext();
  ImGuiIO& io = ImGui::GetIO();
  io.IniFilename = nullptr;  // what is kept is kept by us
  io.ConfigFlags |= ImGuiConfigFlags_NavEnableKeyboard;
  if (!ImGui_ImplGlfw_InitForOpenGL(open->window, true) || !ImGui_ImplOpenGL3_Init("#version 150")) {
    start_again_in_software();
    return no_window("the picture cannot be set up on " + open->renderer);
  }
  float display_scale = 1;
  glfwGetWindowContentScale(open->window, &display_scale, nullptr);
  open->scale = std::clamp(wish.scale > 0 ? wish.scale : display_scale, 1.0F, 2.0F);
  open->dark = wish.dark;
  auto fonts = load_fonts(open->scale);
  if (!fonts) return fonts.problems();
  open->fonts = *fonts;
  set_theme(palette(open->dark), open->scale);
  return Window(std::move(open));
}

bool Window::picture(const std::function<void()>& draw) {
  Open& open = *open_;
  if (open.new_look) {
    open.new_look = false;
    if (auto fonts = load_fonts(open.scale)) open.fonts = *fonts;
    ImGui_ImplOpenGL3_DestroyFontsTexture();
    ImGui_ImplOpenGL3_CreateFontsTexture();
    set_theme(palette(open.dark), open.scale);
  }
  ImGui_ImplOpenGL3_NewFrame();
  ImGui_ImplGlfw_NewFrame();
  open.enter_presses();
  ImGui::NewFrame();
  draw();
  ImGui::Render();
  clear(palette(open.dark).card);
  ImGui_ImplOpenGL3_RenderDrawData(ImGui::GetDrawData());
  glfwSwapBuffers(open.window);
  return !glfwWindowShouldClose(open.window);
}

void Window::run(const std::function<bool()>& draw) {
  Open& open = *open_;
  bool at_work = false;
  while (!glfwWindowShouldClose(open.window)) {
    const double before = glfwGetTime(), sleep_s = at_work ? at_work_s : at_rest_s;
    if (open.pictures_due > 0) {
      glfwPollEvents();
      --open.pictures_due;
    } else {
      glfwWaitEventsTimeout(sleep_s);
      constexpr double nearly = 0.95;  // a sleep that was not broken ends a little early or late
      if (glfwGetTime() - before < nearly * sleep_s) open.pictures_due = pictures_after_input;
    }
    picture([&] { at_work = draw(); });
  }
}

void Window::close() { glfwSetWindowShouldClose(open_->window, GLFW_TRUE); }
void Window::wake() { glfwPostEmptyEvent(); }
const Fonts& Window::fonts() const { return open_->fonts; }
float Window::scale() const { return open_->scale; }
bool Window::dark() const { return open_->dark; }
GLFWwindow* Window::handle() const { return open_->window; }
std::string Window::drawn_by() const {
  if (std::getenv(restarted))
    return open_->renderer + ", drawn in software: the OpenGL of this machine failed";
  const bool software = open_->renderer.find("llvmpipe") != std::string::npos;
  return open_->renderer + (software ? ", drawn in software" : "");
}

void Window::set_look(float scale, bool dark) {
  open_->scale = std::clamp(scale, 1.0F, 2.0F);
  open_->dark = dark;
  open_->new_look = true;
}

}  // namespace bathwright::desktop
