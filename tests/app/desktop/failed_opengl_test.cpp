// A machine whose OpenGL fails: the program starts itself again with Mesa's software renderer and says so.
#include <fcntl.h>
#include <signal.h>
#include <sys/wait.h>
#include <unistd.h>

#include <bathwright/charts/palette.hpp>
#include <catch2/catch.hpp>
#include <chrono>
#include <cstdlib>
#include <fstream>
#include <iterator>
#include <thread>

#include "driver.hpp"

using namespace bathwright;
using desktop_test::Driver;
using desktop_test::Shot;

namespace {

constexpr int width = 1280, height = 800, status_line = 22;

/// The program with the demonstration tanks, started with variables of its own; ended with the object.
class Started {
 public:
  Started(const std::vector<std::pair<const char*, const char*>>& variables, std::filesystem::path errors)
      : errors_(std::move(errors)) {
    process_ = ::fork();
    if (process_ != 0) return;
    for (const auto& [name, value] : variables) ::setenv(name, value, 1);
    ::dup2(::open(errors_.c_str(), O_WRONLY | O_CREAT | O_TRUNC, 0600), STDERR_FILENO);
    ::execl(PROGRAM, "bathwright", "--shop", PROJECT_DIR "/baths", static_cast<char*>(nullptr));
    ::_exit(127);
  }
  ~Started() {
    if (process_ < 0) return;
    ::kill(process_, SIGTERM);
    ::waitpid(process_, nullptr, 0);
  }
  Started(const Started&) = delete;
  Started& operator=(const Started&) = delete;

  [[nodiscard]] bool runs() const {
    siginfo_t ended{};
    ::waitid(P_PID, static_cast<id_t>(process_), &ended, WEXITED | WNOHANG | WNOWAIT);
    return ended.si_pid == 0;
  }
  [[nodiscard]] std::string variables() const {
    return all_of("/proc/" + std::to_string(process_) + "/environ");
  }
  [[nodiscard]] std::string errors() const { return all_of(errors_); }
  /// Waits for its end.
  int status() {
    int status = 0;
    ::waitpid(process_, &status, 0);
    process_ = -1;
    return WIFEXITED(status) ? WEXITSTATUS(status) : -1;
  }

 private:
  static std::string all_of(const std::filesystem::path& file) {
    std::ifstream in(file, std::ios::binary);
    return {std::istreambuf_iterator<char>(in), {}};
  }

  std::filesystem::path errors_;
  int process_ = -1;
};

}  // namespace

TEST_CASE("where the machine's OpenGL fails the window is drawn in software and says so",
          "[desktop][window]") {
  const desktop_test::EmptyHome home;
  Shot as_always, as_it_should;
  {
    Driver driver(width, height, 1, PROJECT_DIR "/baths");
    REQUIRE(driver.until([&] { return !driver.desk().working(); }));
    as_always = driver.shot().foot(status_line);
    driver.desk().drawn_by(driver.view().status.renderer + ": the OpenGL of this machine failed");
    driver.pictures(2);
    as_it_should = driver.shot().foot(status_line);
  }
  REQUIRE(as_it_should != as_always);

  const desktop_test::Display display(width, height);
  const desktop_test::Screen screen(display.name());
  // A driver that does not exist: the first start gets no OpenGL from Mesa.
  const Started program({{"GALLIUM_DRIVER", "no-such-driver"}}, home.path() / "errors");
  const auto says_so = [&] {
    for (int tenths = 0; tenths < 200 && program.runs(); ++tenths) {
      if (screen.shot().foot(status_line) == as_it_should) return true;
      std::this_thread::sleep_for(std::chrono::milliseconds(100));
    }
    screen.shot().save(std::filesystem::temp_directory_path() / "failed-opengl.png");
    return false;
  };
  CHECK(says_so());
  CHECK(program.variables().find("BATHWRIGHT_SOFTWARE_PICTURE=1") != std::string::npos);
  CHECK(screen.shot().count(charts::day_palette.card) > width * height / 4);
}

TEST_CASE("a window that cannot be opened at all ends in words and status 3", "[desktop][window]") {
  const desktop_test::EmptyHome home;
  {
    const desktop_test::Display display(width, height);
    // Where no driver is found, the software renderer is not found either.
    Started program({{"LIBGL_DRIVERS_PATH", "/no-such-folder"}}, home.path() / "errors");
    CHECK(program.status() == 3);
    CHECK_THAT(program.errors(), Catch::Contains("not from the software renderer either") &&
                                     Catch::Contains("command line") && Catch::Contains("bathwright --help"));
  }
  // The display that has just gone.
  Started program({}, home.path() / "errors");
  CHECK(program.status() == 3);
  CHECK_THAT(program.errors(), Catch::Contains("no window can be opened") &&
                                   Catch::Contains(std::getenv("DISPLAY")) &&
                                   Catch::Contains("bathwright --help"));
}
