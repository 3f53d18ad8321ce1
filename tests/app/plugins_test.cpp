// A bath type that did not come with the program, from "not allowed yet" to forgotten.
#include <sys/stat.h>
#include <sstream>

#include <catch2/catch.hpp>

#include "program.hpp"

using app_test::Bench;
using Catch::Contains;
namespace fs = std::filesystem;

namespace {

fs::path put(const Bench& bench, const std::string& plugin) {
  const fs::path folder = bench.folder() / "work/mine";
  fs::create_directories(folder);
  fs::copy_file(fs::path(TEST_PLUGINS) / (plugin + ".bathtype.so"), folder / (plugin + ".bathtype.so"));
  return folder / (plugin + ".bathtype.so");
}

std::string state_of(const Bench& bench, const fs::path& file) {
  const auto list = bench.run("plugins list --plugins mine --json").json();
  for (const auto& plugin : list.at("plugins"))
    if (plugin.at("file") == file.string()) return plugin.at("state");
  return "not listed";
}

}  // namespace

TEST_CASE("a plugin of the user's is shown, allowed, used and forgotten", "[unit][command]") {
  const Bench bench;
  const fs::path file = put(bench, "sound");
  CHECK(state_of(bench, file) == "not allowed yet");
  CHECK_THAT(bench.run("plugins list --plugins mine").out, Contains("plugins allow"));

  const auto unasked = bench.run("plugins allow mine/sound.bathtype.so </dev/null");
  CHECK(unasked.status == 2);
  for (const char* shown :
       {"test-bath 1.2", "an author", "MIT", "A bath type is a program", "your own rights"})
    CHECK_THAT(unasked.out, Contains(shown));
  CHECK_THAT(unasked.err, Contains("nobody is here to say yes"));
  CHECK(state_of(bench, file) == "not allowed yet");

  CHECK(bench.run("plugins allow mine/sound.bathtype.so --yes").status == 0);
  CHECK(state_of(bench, file) == "ready");
  const fs::path list = bench.folder() / "work/data/bathwright/plugins.allow.toml";
  CHECK(fs::status(list).permissions() == fs::perms(0600));
  CHECK(bench.run("plugins show test-bath --plugins mine").status == 0);

  CHECK(bench.run("plugins forget test-bath").status == 0);
  CHECK(state_of(bench, file) == "not allowed yet");
  CHECK(bench.run("plugins forget test-bath").status == 2);
}

TEST_CASE("a plugin with a fault cannot be allowed", "[failure][command]") {
  const Bench bench;
  for (const char* plugin : {"prints", "crashes-at-load"}) {
    put(bench, plugin);
    const auto run = bench.run("plugins allow --yes mine/" + std::string(plugin) + ".bathtype.so");
    CHECK(run.status == 2);
    CHECK_THAT(run.err, Contains(std::string(plugin) + ".bathtype.so: "));
  }
  CHECK_FALSE(fs::exists(bench.folder() / "work/data/bathwright/plugins.allow.toml"));
}

TEST_CASE("the user's own folder is searched, the working directory is not", "[unit][command]") {
  const Bench bench;
  const fs::path file = put(bench, "sound"), own = bench.folder() / "work/data/bathwright/plugins";
  fs::create_directories(own);
  fs::copy_file(file, own / "sound.bathtype.so");
  fs::rename(file, bench.folder() / "work/sound.bathtype.so");
  CHECK(state_of(bench, own / "sound.bathtype.so") == "not allowed yet");
  CHECK(state_of(bench, bench.folder() / "work/sound.bathtype.so") == "not listed");
}

TEST_CASE("a plugin that kills the program is left alone at the next start, and all others work",
          "[failure][command]") {
  const Bench bench;
  const fs::path file = put(bench, "crashes-in-the-host");  // and not in the probe
  put(bench, "sound");
  const std::string allow = "plugins allow --yes mine/";
  REQUIRE(bench.run(allow + "sound.bathtype.so").status == 0);
  REQUIRE(bench.run(allow + "crashes-in-the-host.bathtype.so").status == 0);
  const std::string list = "plugins list --plugins mine";
  CHECK(bench.run(list).status > 3);  // killed

  const auto next = bench.run(list);
  CHECK(next.status == 0);
  std::istringstream words(next.out);  // a line may break anywhere
  std::string flat;
  for (std::string word; words >> word;) flat += word + ' ';
  CHECK_THAT(flat, Contains("the program died while loading it") && Contains("bathwright plugins allow"));
  CHECK(state_of(bench, file) == "quarantined");
  CHECK(state_of(bench, bench.folder() / "work/mine/sound.bathtype.so") == "ready");
  CHECK(bench.run("plugins show watts-nickel").status == 0);

  CHECK(bench.run(allow + "crashes-in-the-host.bathtype.so").status == 0);
  CHECK(bench.run(list).status > 3);
}
