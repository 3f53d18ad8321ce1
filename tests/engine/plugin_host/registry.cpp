// Which files are found, in which order, and what becomes of each.
#include <algorithm>
#include <bathwright/plugin_host/discovery.hpp>
#include <bathwright/plugin_host/registry.hpp>

#include "scratch_folder.hpp"

using namespace bathwright;
using namespace bathwright::plugin_host;
namespace fs = std::filesystem;

TEST_CASE("plugin files are found by folder, then by name, not in folders inside", "[unit][plugin_host]") {
  const ScratchFolder first, second;
  for (const char* name : {"b", "a", "inside/c"}) first.put("sound", name);
  second.put("sound", "a");
  first.write("a.so", "");
  first.write("notes.txt", "");
  const FoundFiles found = find_plugin_files({second.path(), first.path()});
  CHECK(found.problems.empty());
  CHECK(found.files == std::vector<fs::path>{second.path() / "a.bathtype.so", first.path() / "a.bathtype.so",
                                             first.path() / "b.bathtype.so"});
}

TEST_CASE("the working directory is not searched unasked", "[unit][plugin_host]") {
  const ScratchFolder here;
  here.put("sound", "a");
  const fs::path before = fs::current_path();
  fs::current_path(here.path());
  const FoundFiles unnamed = find_plugin_files({""});
  const std::vector<fs::path> built_in = built_in_folders();
  fs::current_path(before);
  CHECK(unnamed.files.empty());
  CHECK(unnamed.problems.size() == 1);
  CHECK(std::ranges::count(built_in, here.path()) == 0);
}

TEST_CASE("a folder that is not there is listed", "[failure][plugin_host]") {
  const BathTypes types = BathTypes::discover({"/no/such/folder"});
  REQUIRE(types.list().size() == 1);
  CHECK(types.list()[0].path == "/no/such/folder");
  CHECK(types.list()[0].state == State::refused);
  CHECK(types.list()[0].problems.front().kind == Fault::io);
}

TEST_CASE("the first folder wins an id and the others are listed as shadowed", "[unit][plugin_host]") {
  const ScratchFolder first, second;
  const fs::path winner = first.put("sound", "z"), loser = second.put("sound", "a");
  const BathTypes types = BathTypes::discover({first.path(), second.path()});
  REQUIRE(types.list().size() == 2);
  CHECK(types.list()[0].path == winner);
  CHECK(types.list()[0].state == State::ready);
  CHECK(types.list()[1].path == loser);
  CHECK(types.list()[1].state == State::shadowed);
  CHECK(types.list()[1].version == "1.2");
  CHECK(types.list()[1].problems.front().try_this.find(winner.string()) != std::string::npos);
  CHECK(types.ready().size() == 1);
}

TEST_CASE("a plugin at fault hinders no other", "[failure][plugin_host]") {
  const ScratchFolder scratch;
  scratch.put("throws", "a");
  scratch.put("sound", "b");
  scratch.put("no-entry", "c");
  const BathTypes types = BathTypes::discover({scratch.path()});
  REQUIRE(types.list().size() == 3);
  CHECK(types.list()[0].state == State::refused);
  CHECK(types.list()[1].state == State::ready);
  CHECK(types.list()[2].state == State::refused);
  CHECK(types.find("test-bath"));
  CHECK_FALSE(types.find("another-bath"));
}
