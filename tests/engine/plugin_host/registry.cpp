// Which files are found, in which order, and what becomes of each.
#include <algorithm>
#include <chrono>

#include "scratch_folder.hpp"

using namespace bathwright;
using namespace bathwright::plugin_host;
namespace fs = std::filesystem;

namespace {

std::vector<fs::path> paths_of(const FoundFiles& found) {
  std::vector<fs::path> paths;
  for (const FoundFile& file : found.files) paths.push_back(file.path);
  return paths;
}

/// When the cache last had something put into it.
fs::file_time_type last_kept(const Bench& bench, const std::string& plugin) {
  return fs::last_write_time(bench.places.cache / sha256_of(built(plugin)));
}

}  // namespace

TEST_CASE("plugin files are found by folder, then by name, not in folders inside", "[unit][plugin_host]") {
  const ScratchFolder first, second;
  for (const char* name : {"b", "a", "inside/c"}) first.put("sound", name);
  second.put("sound", "a");
  first.write("a.so", "");
  first.write("notes.txt", "");
  const FoundFiles found =
      find_plugin_files({{second.path(), Origin::program}, {first.path(), Origin::named}});
  CHECK(found.problems.empty());
  CHECK(paths_of(found) == std::vector<fs::path>{second.path() / "a.bathtype.so",
                                                 first.path() / "a.bathtype.so",
                                                 first.path() / "b.bathtype.so"});
}

TEST_CASE("the working directory is not searched unasked", "[unit][plugin_host]") {
  const ScratchFolder here;
  here.put("sound", "a");
  const fs::path before = fs::current_path();
  fs::current_path(here.path());
  const FoundFiles unnamed = find_plugin_files({{"", Origin::named}});
  const std::vector<SearchFolder> built_in = program_folders();
  fs::current_path(before);
  CHECK(unnamed.files.empty());
  CHECK(unnamed.problems.size() == 1);
  CHECK(std::ranges::count(built_in, here.path(), &SearchFolder::path) == 0);
}

TEST_CASE("a named folder that is not there is listed, the user's is not", "[failure][plugin_host]") {
  Bench bench({"/no/such/folder"});
  bench.places.folders.push_back({"/no/such/folder", Origin::user});
  const BathTypes types = bench.discover();
  REQUIRE(types.list().size() == 1);
  CHECK(types.list()[0].path == "/no/such/folder");
  CHECK(types.list()[0].state == State::refused);
  CHECK(types.list()[0].problems.front().kind == Fault::io);
}

TEST_CASE("a plugin in no list of allowed ones is not run", "[failure][plugin_host]") {
  const ScratchFolder folder;
  const fs::path file = folder.put("crashes-at-load", "a");
  const Bench bench({folder.path()});
  const BathTypes types = bench.discover();
  REQUIRE(types.list().size() == 1);
  CHECK(types.list()[0].state == State::not_allowed);
  CHECK(types.list()[0].sha256 == sha256_of(file));
  CHECK(text(types.list()[0].problems).find("bathwright plugins allow '" + file.string() + "'") !=
        std::string::npos);
  CHECK_FALSE(fs::exists(bench.places.cache));
}

TEST_CASE("a plugin that is allowed is ready, with hash, version and notes", "[unit][plugin_host]") {
  const ScratchFolder folder;
  folder.put("sound", "a");
  const BathTypes types = Bench({folder.path()}).allow("sound").discover();
  REQUIRE(types.list().size() == 1);
  INFO(text(types.list()[0].problems));
  CHECK(types.list()[0].state == State::ready);
  CHECK(types.list()[0].version == "1.2");
  CHECK(types.list()[0].notes.empty());
  const bath::BathType* type = types.find("test-bath");
  REQUIRE(type);
  const std::vector<double> levels = {60, 72};
  bath::IndicatorView view{};
  view.quantity_g_per_L = levels;
  const auto value = type->indicators[0].evaluate(view);
  REQUIRE(value);
  CHECK(*value == 2);
}

TEST_CASE("the first folder wins an id and the others are listed as shadowed", "[unit][plugin_host]") {
  const ScratchFolder first, second;
  const fs::path winner = first.put("another-sound", "z"), loser = second.put("sound", "a");
  const BathTypes types =
      Bench({first.path(), second.path()}).allow("sound").allow("another-sound").discover();
  REQUIRE(types.list().size() == 2);
  CHECK(types.list()[0].path == winner);
  CHECK(types.list()[0].state == State::ready);
  CHECK(types.list()[1].path == loser);
  CHECK(types.list()[1].state == State::shadowed);
  CHECK(types.list()[1].version == "1.2");
  CHECK(types.list()[1].problems.front().try_this.find(winner.string()) != std::string::npos);
  REQUIRE(types.ready().size() == 1);
  CHECK(types.ready()[0].version == "1.3");
}

TEST_CASE("one changed byte is another plugin", "[failure][plugin_host]") {
  const ScratchFolder folder;
  const fs::path file = folder.put("sound", "a");
  Bench bench({folder.path()});
  bench.allow("sound");
  std::ofstream(file, std::ios::app) << ' ';
  CHECK(bench.discover().list()[0].state == State::not_allowed);
}

TEST_CASE("a second start probes nothing, but another build of the probe does", "[unit][plugin_host]") {
  const ScratchFolder folder, programs;
  folder.put("sound", "a");
  folder.put("prints", "b");
  Bench bench({folder.path()});
  bench.allow("sound").allow("prints");
  const fs::path program = programs.path() / "probe";
  fs::copy_file(bench.places.probe, program);
  bench.places.probe = program;
  CHECK(bench.discover().ready().size() == 1);

  fs::rename(program, programs.path() / "elsewhere");
  CHECK(bench.discover().ready().empty());  // asked anew, for the probe that answered is not there
  fs::rename(programs.path() / "elsewhere", program);
  const auto kept = last_kept(bench, "sound");
  CHECK(bench.discover().ready().size() == 1);
  CHECK(last_kept(bench, "sound") == kept);
  CHECK(last_kept(bench, "prints") <= kept + std::chrono::seconds(10));

  fs::last_write_time(program, fs::last_write_time(program) + std::chrono::seconds(1));
  CHECK(bench.discover().ready().size() == 1);
  CHECK(last_kept(bench, "sound") > kept);
}

TEST_CASE("a spoilt or foreign cache is not believed", "[failure][plugin_host]") {
  const ScratchFolder folder;
  folder.put("prints", "a");
  Bench bench({folder.path()});
  bench.allow("prints");
  CHECK(bench.discover().list()[0].state == State::refused);
  const fs::path kept = bench.places.cache / sha256_of(built("prints"));
  const auto size = fs::file_size(kept);
  fs::resize_file(kept, size / 2);
  CHECK(bench.discover().list()[0].state == State::refused);
  CHECK(fs::file_size(kept) == size);

  fs::permissions(bench.places.cache, fs::perms(0777));
  std::ofstream(kept) << "0.1.0";
  CHECK(bench.discover().list()[0].state == State::refused);
  CHECK(fs::file_size(kept) == 5);
}

TEST_CASE("no user folder is needed", "[unit][plugin_host]") {
  const ScratchFolder folder;
  folder.put("sound", "a");
  Bench bench({folder.path()});
  bench.allow("sound");
  bench.places.data.clear();
  bench.places.state.clear();
  bench.places.cache.clear();
  CHECK(bench.discover().list()[0].state == State::ready);
}
