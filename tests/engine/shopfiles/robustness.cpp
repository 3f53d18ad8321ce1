// Whatever a file holds, reading it ends in values or in problems a person can read.
#include <algorithm>
#include <catch2/catch.hpp>
#include <fstream>
#include <random>
#include <sstream>
#include <string>

#include "read_any.hpp"

using namespace bathwright;

namespace {

struct GoodFile {
  std::string kind, content;
};

std::string content_of(const std::string& path) {
  std::ostringstream content;
  content << std::ifstream(path, std::ios::binary).rdbuf();
  return content.str();
}

std::vector<GoodFile> good_files() {
  return {{"tank", content_of(PROJECT_DIR "/baths/n-07.toml")},
          {"readings", content_of(PROJECT_DIR "/baths/readings/n-07-morning.toml")},
          {"solution",
           "temperature = \"25 degC\"\nmodel = \"auto\"\npH = 4.0\ncounter_ion = \"Cl^-\"\n[per_litre]\n"
           "\"NiSO4.6H2O\" = \"270 g/L\"\n[solids]\nallow = [\"H3BO3\"]\nexcess = [\"CaSO4.2H2O\"]\n"
           "[gases]\n\"CO2\" = 4.2e-4\n"}};
}

void check_messages(const GoodFile& file, const std::string& content) {
  for (const Problem& problem : shop_test::problems_of(file.kind, content)) {
    const std::string message = problem.text();
    INFO(content << "\n" << message);
    REQUIRE(problem.where.starts_with("file.toml"));
    REQUIRE_FALSE(problem.what.empty());
    REQUIRE(message.size() < 2000);
    REQUIRE(std::ranges::none_of(message, [](char c) { return c >= 0 && c < 0x20; }));
  }
}

}  // namespace

TEST_CASE("the files that are damaged below are good", "[property][shopfiles]") {
  for (const GoodFile& file : good_files())
    CHECK(text(shop_test::problems_of(file.kind, file.content)).empty());
}

TEST_CASE("a file cut off anywhere is read or refused in words", "[property][shopfiles]") {
  for (const GoodFile& file : good_files()) {
    for (std::size_t end = 0; end < file.content.size(); ++end)
      check_messages(file, file.content.substr(0, end));
  }
}

TEST_CASE("a file with flipped, lost, doubled or moved bytes is read or refused in words",
          "[property][shopfiles]") {
  constexpr std::uint32_t seed = 20260302;
  INFO("seed " << seed);
  std::mt19937 random(seed);
  const auto below = [&](std::size_t n) { return random() % n; };
  for (const GoodFile& file : good_files()) {
    for (int i = 0; i < 2000; ++i) {
      std::string content = file.content;
      for (std::size_t changes = 1 + below(4); changes > 0; --changes) {
        const std::size_t at = below(content.size());
        switch (below(4)) {
          case 0:
            content[at] = static_cast<char>(below(256));
            break;
          case 1:
            content.erase(at, 1 + below(8));
            break;
          case 2:
            content.insert(at, content.substr(below(content.size()), 1 + below(40)));
            break;
          default:
            content[at] = "\"'[]{}=.,#\n-+eE0123456789"[below(25)];
        }
        if (content.empty()) break;
      }
      check_messages(file, content);
    }
  }
}
