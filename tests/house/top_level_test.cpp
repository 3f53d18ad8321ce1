#include <catch2/catch.hpp>
#include <set>

#include "scratch_tree.hpp"

namespace {

const std::set<std::string> agreed = {"CMakeLists.txt", "CMakePresets.json", "DEVELOPERS.md", "LICENSE",
                                      "README.md",      "SAFETY.md",         "app",           "baths",
                                      "engine",         "plugins",           "tests",         "third_party"};

/// What stands at the top of a tree, without dotfiles and the build folders that .gitignore names.
std::set<std::string> top_level(const std::filesystem::path& root) {
  std::set<std::string> names;
  for (const auto& entry : std::filesystem::directory_iterator(root)) {
    const std::string name = entry.path().filename();
    if (name.rfind('.', 0) != 0 && name != "build" && name.rfind("build-", 0) != 0) names.insert(name);
  }
  return names;
}

}  // namespace

TEST_CASE("the top level holds what was agreed and nothing else", "[unit][house]") {
  CHECK(top_level(PROJECT_DIR) == agreed);
}

TEST_CASE("the top level is read without dotfiles and build folders", "[unit][house]") {
  const house::ScratchTree tree;
  for (const char* file :
       {"README.md", "app/main.cpp", ".ci/run", ".gitignore", "build/a.o", "build-asan/a.o", "notes.txt"})
    tree.write(file, "");
  CHECK(top_level(tree.root()) == std::set<std::string>{"README.md", "app", "notes.txt"});
}
