#include <unistd.h>

#include <bathwright/charts/page_file.hpp>
#include <catch2/catch.hpp>
#include <fstream>
#include <iterator>

using namespace bathwright;

namespace {

class Folder {
 public:
  Folder() : path_(std::filesystem::temp_directory_path() / ("charts-" + std::to_string(::getpid()))) {
    std::filesystem::create_directories(path_);
  }
  ~Folder() { std::filesystem::remove_all(path_); }
  Folder(const Folder&) = delete;
  Folder& operator=(const Folder&) = delete;
  [[nodiscard]] std::filesystem::path operator/(const char* name) const { return path_ / name; }

 private:
  std::filesystem::path path_;
};

std::string contents(const std::filesystem::path& file) {
  std::ifstream in(file, std::ios::binary);
  return {std::istreambuf_iterator<char>(in), {}};
}

charts::Page page_of(std::size_t count) {
  charts::Chart chart;
  chart.title = "nickel Ni²⁺";
  chart.lines = {{"", charts::Meaning::plain, {0, 1, 2}, {1, 4, 2}}};
  return {"N-07", {"words"}, std::vector<charts::Chart>(count, chart), "foot"};
}

}  // namespace

TEST_CASE("a page is written as the picture its name asks for", "[unit][charts]") {
  const Folder folder;
  for (const auto& [name, begins] : {std::pair{"a.svg", "<?xml"}, {"a.png", "\x89PNG"}, {"a.PDF", "%PDF-"}}) {
    INFO(name);
    const Outcome written = charts::write_page(folder / name, page_of(3));
    REQUIRE(written);
    CHECK(contents(folder / name).starts_with(begins));
  }
  CHECK_FALSE(std::filesystem::exists(folder / "a.svg.part"));
}

TEST_CASE("more charts than a sheet of paper holds go on the next", "[unit][charts]") {
  const Folder folder;
  const auto size = [&](std::size_t charts) {
    REQUIRE(charts::write_page(folder / "b.pdf", page_of(charts)));
    const std::string text = contents(folder / "b.pdf");
    // The page tree stands uncompressed at the end: "/Count 2".
    const auto at = text.find("/Count ");
    REQUIRE(at != std::string::npos);
    return text.substr(at, 8);
  };
  CHECK(size(6) == "/Count 1");
  CHECK(size(7) == "/Count 2");
}

TEST_CASE("another ending and a missing folder are told, and leave nothing behind", "[failure][charts]") {
  const Folder folder;
  const Outcome ending = charts::write_page(folder / "a.gif", page_of(1));
  REQUIRE_FALSE(ending);
  CHECK(ending.problems().front().kind == Fault::bad_input);
  const Outcome missing = charts::write_page((folder / "none") / "a.svg", page_of(1));
  REQUIRE_FALSE(missing);
  CHECK(missing.problems().front().kind == Fault::io);
  CHECK(std::filesystem::is_empty(folder / "."));
}
