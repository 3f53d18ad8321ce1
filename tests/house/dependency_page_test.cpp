#include <catch2/catch.hpp>
#include <fstream>
#include <iterator>
#include <sstream>
#include <string>

namespace {

std::string read_file(const std::string& file) {
  std::ifstream in(file);
  return {std::istreambuf_iterator<char>(in), {}};
}

/// The packages the set-up script installs: the words of its array of this name.
std::istringstream packages_of(const std::string& script, const std::string& array) {
  const std::string opening = "\n" + array + "=(";
  const auto begin = script.find(opening);
  REQUIRE(begin != std::string::npos);
  const auto first = begin + opening.size();
  return std::istringstream(script.substr(first, script.find(')', first) - first));
}

}  // namespace

TEST_CASE("the dependency page names every package that is installed", "[unit][house]") {
  const std::string folder = PROJECT_DIR "/third_party/";
  const std::string page = read_file(folder + "README.md");
  for (const char* array : {"packages", "test_packages", "benchmark_packages"}) {
    std::istringstream packages = packages_of(read_file(folder + "setup"), array);
    int named = 0;
    for (std::string package; packages >> package; ++named) {
      INFO(package);
      CHECK(page.find("`" + package + "`") != std::string::npos);
    }
    CHECK(named > 0);
  }
}
