// What every bath type that ships must come with, judged through the program.
#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <filesystem>
#include <fstream>

#include "bath_table.hpp"

using bath_table::Row;

namespace {

const std::vector<Row>& tanks() {
  static const std::vector<Row> all = bath_table::demonstration_tanks();
  return all;
}

}  // namespace

TEST_CASE("every demonstration tank is solved, with its bath type at hand", "[unit][baths]") {
  for (const Row& row : tanks()) {
    INFO(row.file << ": " << row.message);
    CHECK((row.status == 0 || row.status == 1));  // 1: something crystallises when the tank idles
    CHECK(row.tank.contains("pH"));
  }
}

TEST_CASE("every bath type has a demonstration tank and its papers", "[unit][baths]") {
  for (const std::string& id : bath_table::shipped_bath_types()) {
    INFO(id);
    CHECK(std::ranges::any_of(tanks(), [&](const Row& row) {
      return row.type.is_object() && row.type.at("id").get<std::string>() == id;
    }));
    const std::filesystem::path folder = std::filesystem::path(PROJECT_DIR) / "plugins" / id;
    CHECK(std::filesystem::exists(folder / "README.md"));
    CHECK(std::filesystem::exists(folder / "examples.toml"));
  }
}

TEST_CASE("a tank at its aims is in its windows, its pH in that of the trade", "[unit][baths]") {
  for (const Row& row : tanks()) {
    if (!row.tank.contains("levels")) continue;
    INFO(row.file);
    for (const auto& level : row.tank.at("levels")) {
      INFO(level.dump());
      CHECK(level.at("state").get<std::string>() == "in window");
    }
    const auto [low, high] = bath_table::window(row.type, "pH");
    const double pH = row.tank.at("pH");
    CHECK_FALSE(pH < low);  // an open limit is NaN and compares false
    CHECK_FALSE(pH > high);
  }
}
