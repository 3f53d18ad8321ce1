// Files with a fault, and the message a person gets. Those in broken/ carry in their first line what the
// message must hold, pieces separated by " | "; the name begins with the kind of file.
#include <algorithm>
#include <catch2/catch.hpp>
#include <filesystem>
#include <fstream>
#include <sstream>
#include <string>
#include <vector>

#include "read_any.hpp"

using namespace bathwright;
using shop_test::problems_of;

namespace {

std::string content_of(const std::filesystem::path& path) {
  std::ostringstream content;
  content << std::ifstream(path, std::ios::binary).rdbuf();
  return content.str();
}

std::vector<std::string> expected_pieces(const std::string& content) {
  const std::string mark = "# expected: ", bar = " | ";
  std::vector<std::string> pieces;
  std::string rest = content.substr(0, content.find('\n'));
  if (!rest.starts_with(mark)) return pieces;
  rest.erase(0, mark.size());
  for (std::size_t at = rest.find(bar); at != std::string::npos; at = rest.find(bar)) {
    pieces.push_back(rest.substr(0, at));
    rest.erase(0, at + bar.size());
  }
  pieces.push_back(rest);
  return pieces;
}

std::string repeated(const std::string& text, int times) {
  std::string all;
  for (int i = 0; i < times; ++i) all += text;
  return all;
}

}  // namespace

TEST_CASE("every broken file gets its message, with the line", "[failure][shopfiles]") {
  int files = 0;
  for (const auto& file : std::filesystem::directory_iterator(TEST_DIR "/broken")) {
    const std::string name = file.path().filename().string(), content = content_of(file.path());
    const std::string message = text(problems_of(name, content));
    INFO(name << "\n" << message);
    const auto pieces = expected_pieces(content);
    CHECK(pieces.size() >= 2);
    for (const std::string& piece : pieces) CHECK_THAT(message, Catch::Contains(piece));
    ++files;
  }
  CHECK(files >= 30);
}

TEST_CASE("what is no shop file at all gets a message", "[failure][shopfiles]") {
  struct Row {
    std::string what, content, message;
  };
  const std::vector<Row> rows = {
      {"empty", "", "file.toml:1: holds no key"},
      {"only a comment", "# nothing\n", "file.toml:1: holds no key"},
      {"a picture", std::string("\x89PNG\r\n\x1a\n\0\0\0\rIHDR", 16), "file.toml:3: a zero byte"},
      {"UTF-16", std::string("\xff\xfep\0H\0", 6), "a zero byte"},
      {"Latin-1", "name = \"Nickel \xfc\"", "file.toml:1: cannot be read as TOML"},
      {"too large", repeated("# pad\n", 200000), "larger than 1 MiB"},
      {"too long a text", "name = \"" + repeated("n", 1001) + '"', "file.toml:1: name is too long a text"},
      {"too long a key", repeated("n", 101) + " = 1", "is too long a key"},
      {"a line break in a text", "name = \"N\\n1\"", "name holds control characters"},
      {"deep dotted key", "a" + repeated(".a", 3000) + " = 1", "nested too deep"},
      {"deeper dotted key", "a" + repeated(".a", 300000) + " = 1", "more than 4000 dots and brackets"},
      {"deep lists", "a = " + repeated("[", 3000), "cannot be read as TOML"},
      {"deep tables", "a = " + repeated("{a=", 3000), "cannot be read as TOML"}};
  for (const Row& row : rows) {
    for (const char* kind : {"tank", "readings", "solution"}) {
      INFO(row.what << " as " << kind);
      CHECK_THAT(text(problems_of(kind, row.content)), Catch::Contains(row.message));
    }
  }
}

TEST_CASE("every problem of a file is reported at once, sorted by line", "[failure][shopfiles]") {
  const auto problems =
      problems_of("readings",
                  "pH = 41\nvolum = \"1 L\"\n[[titration]]\nsample = \"2 L\"\nsample_size = 1\n"
                  "burette = -3\n[[found]]\nquantity = \"Cl^-\"\nvalue = \"1 ppm\"\n");
  std::vector<int> lines;
  for (const Problem& p : problems) {
    REQUIRE(p.where.starts_with("file.toml:"));
    lines.push_back(std::stoi(p.where.substr(10)));
  }
  INFO(text(problems));
  CHECK(lines == std::vector<int>{1, 2, 3, 3, 3, 5, 6, 9});
}

TEST_CASE("a file that is not there or is a folder is named", "[failure][shopfiles]") {
  for (const std::string path : {TEST_DIR "/no-such-file.toml", TEST_DIR}) {
    const auto read = shopfiles::read_readings(path);
    REQUIRE_FALSE(read);
    CHECK(read.problems()[0].kind == Fault::io);
    CHECK(read.problems()[0].where == path);
  }
}
