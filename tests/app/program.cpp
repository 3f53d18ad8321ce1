#include "program.hpp"

#include <sys/wait.h>
#include <unistd.h>

#include <algorithm>
#include <cstdlib>
#include <fstream>
#include <iterator>
#include <sstream>

namespace app_test {
namespace fs = std::filesystem;

std::string content_of(const fs::path& file) {
  std::ostringstream content;
  content << std::ifstream(file, std::ios::binary).rdbuf();
  return content.str();
}

Bench::Bench() {
  static int count = 0;
  folder_ = fs::temp_directory_path() /
            ("bathwright-app-" + std::to_string(::getpid()) + "-" + std::to_string(count++));
  fs::remove_all(folder_);
  fs::create_directories(folder_ / "work");
}

Bench::~Bench() { fs::remove_all(folder_); }

Run Bench::run(const std::string& arguments) const {
  const std::string out = (folder_ / "out").string(), err = (folder_ / "err").string();
  const std::string command = "cd '" + (folder_ / "work").string() + "' && unset DISPLAY WAYLAND_DISPLAY && XDG_DATA_HOME='" +
                              (folder_ / "work/data").string() + "' XDG_STATE_HOME='" +
                              (folder_ / "state").string() +
                              "' XDG_CACHE_HOME='" TEST_CACHE "' USER=tester '" PROGRAM "' " + arguments +
                              " >'" + out + "' 2>'" + err + "'";
  const int status = std::system(command.c_str());
  return {WIFEXITED(status) ? WEXITSTATUS(status) : -1, content_of(out), content_of(err)};
}

void Bench::write(const std::string& file, const std::string& content) const {
  std::ofstream(folder_ / "work" / file) << content;
}

std::string Bench::read(const std::string& file) const {
  std::ifstream in(folder_ / "work" / file, std::ios::binary);
  return {std::istreambuf_iterator<char>(in), {}};
}

std::vector<std::string> Bench::listing() const {
  std::vector<std::string> all;
  for (const auto& entry : fs::recursive_directory_iterator(folder_ / "work"))
    all.push_back(entry.path().string() + (entry.is_regular_file() ? "\n" + content_of(entry.path()) : ""));
  std::sort(all.begin(), all.end());
  return all;
}

std::size_t widest_line(const std::string& text) {
  std::size_t widest = 0;
  std::istringstream lines(text);
  for (std::string line; std::getline(lines, line);)
    widest = std::max(widest, static_cast<std::size_t>(std::count_if(line.begin(), line.end(), [](char c) {
                        return (static_cast<unsigned char>(c) & 0xC0) != 0x80;
                      })));
  return widest;
}

}  // namespace app_test
