// The fuzz targets without a fuzzer: every seed, and seeds damaged at random, so that no target rots.
#include <algorithm>
#include <catch2/catch.hpp>
#include <filesystem>
#include <fstream>
#include <random>
#include <sstream>
#include <vector>

#include "targets.hpp"

namespace {

struct Target {
  std::string name;
  fuzz::BrokenPromise (*feed)(std::string_view);
  int damaged_inputs = 2000;
};

const std::vector<Target> targets = {
    {"tank_file", fuzz::tank_file},
    {"readings_file", fuzz::readings_file},
    {"solution_file", fuzz::solution_file},
    {"described_file", fuzz::described_file, 500},  // as plugin_tables; most inputs are no TOML
    {"fit_file", fuzz::fit_file, 500},              // each input that reads builds the equilibria anew
    {"formula", fuzz::formula},
    {"quantity", fuzz::quantity},
    {"csv_table", fuzz::csv_table},
    {"reaction", fuzz::reaction},
    {"plugin_tables", fuzz::plugin_tables, 200},  // each input resolves every equilibrium anew
    {"analyses_csv", fuzz::analyses_csv},
};

/// By name, so that the same seed is damaged in the same way everywhere.
std::vector<std::string> seeds_of(const Target& target) {
  std::vector<std::filesystem::path> files;
  for (const auto& entry :
       std::filesystem::directory_iterator(std::filesystem::path(FUZZ_SEEDS) / target.name))
    files.push_back(entry.path());
  std::ranges::sort(files);
  std::vector<std::string> seeds;
  for (const auto& file : files) {
    std::ostringstream content;
    content << std::ifstream(file, std::ios::binary).rdbuf();
    seeds.push_back(content.str());
  }
  return seeds;
}

class Damage {
 public:
  explicit Damage(std::uint32_t seed) : random_(seed) {}

  std::size_t below(std::size_t n) { return random_() % n; }

  /// Up to four bytes or pieces flipped, lost, doubled, moved or replaced by what the formats find special.
  std::string done_to(std::string text) {
    for (std::size_t changes = 1 + below(4); changes > 0 && !text.empty(); --changes) {
      const std::size_t at = below(text.size());
      switch (below(4)) {
        case 0:
          text[at] = static_cast<char>(below(256));
          break;
        case 1:
          text.erase(at, 1 + below(8));
          break;
        case 2:
          text.insert(at, text.substr(below(text.size()), 1 + below(40)));
          break;
        default:
          text[at] = special[below(special.size())];
      }
    }
    return text;
  }

 private:
  static constexpr std::string_view special = "\"'[]{}()=.,#^\n-+ eENM%0123456789";
  std::mt19937 random_;
};

}  // namespace

TEST_CASE("every reader keeps its promises on the fuzz seeds", "[property][fuzz]") {
  for (const Target& target : targets) {
    const auto seeds = seeds_of(target);
    REQUIRE_FALSE(seeds.empty());
    for (const std::string& seed : seeds) {
      INFO(target.name << ":\n" << seed);
      REQUIRE(target.feed(seed) == "");
    }
  }
}

TEST_CASE("every reader keeps its promises on damaged seeds", "[property][fuzz]") {
  constexpr std::uint32_t seed = 20260302;
  for (const Target& target : targets) {
    const auto seeds = seeds_of(target);
    REQUIRE_FALSE(seeds.empty());
    Damage damage(seed);
    for (int i = 0; i < target.damaged_inputs; ++i) {
      const std::string input = damage.done_to(seeds[damage.below(seeds.size())]);
      INFO(target.name << ", seed " << seed << ":\n" << input);
      REQUIRE(target.feed(input) == "");
    }
  }
}
