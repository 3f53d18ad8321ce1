// A plugin that was being loaded when the program died.
#include <sys/wait.h>

#include <bathwright/plugin_host/registry.hpp>

#include "quarantine.hpp"
#include "scratch_folder.hpp"

using namespace bathwright;
using namespace bathwright::plugin_host;
namespace fs = std::filesystem;

namespace {

/// A process that dies while it is loading `sha256`.
void die_while_loading(const fs::path& data, const std::string& sha256) {
  const pid_t child = ::fork();
  if (child == 0) {
    const auto mark = Quarantine(data).mark(sha256, "x.bathtype.so");
    ::_exit(mark ? 0 : 1);
  }
  int status = 0;
  REQUIRE(::waitpid(child, &status, 0) == child);
  REQUIRE(status == 0);
}

}  // namespace

TEST_CASE("what a dead process was loading is in quarantine until it is released", "[failure][plugin_host]") {
  const ScratchFolder folder;
  folder.put("sound", "a");
  folder.put("another-sound", "b");
  Bench bench({folder.path()});
  bench.allow("sound").allow("another-sound");
  const std::string hash = sha256_of(built("sound"));
  die_while_loading(bench.places.state, hash);

  for (int start = 0; start < 2; ++start) {
    const BathTypes types = bench.discover();
    REQUIRE(types.list().size() == 2);
    CHECK(types.list()[0].state == State::quarantined);
    CHECK(text(types.list()[0].problems).find("the program died while loading it") != std::string::npos);
    CHECK(text(types.list()[0].problems).find("bathwright plugins allow '") != std::string::npos);
    CHECK(types.list()[1].state == State::ready);
  }
  release_from_quarantine(hash, bench.places);
  CHECK(bench.discover().list()[0].state == State::ready);
}

TEST_CASE("a load that ends leaves no mark", "[unit][plugin_host]") {
  const ScratchFolder folder;
  folder.put("sound", "a");
  Bench bench({folder.path()});
  bench.allow("sound");
  CHECK(bench.discover().list()[0].state == State::ready);
  CHECK(fs::is_empty(bench.places.state / "loading"));
}

TEST_CASE("what another process is loading now is no accident", "[unit][plugin_host]") {
  const ScratchFolder data;
  const Quarantine quarantine(data.path());
  {
    const auto mark = quarantine.mark("abc", "x.bathtype.so");
    REQUIRE(mark);
    quarantine.settle();
    CHECK_FALSE(quarantine.holds("abc"));
    CHECK(fs::exists(data.path() / "loading" / ("abc." + std::to_string(::getpid()))));
  }
  quarantine.settle();
  CHECK_FALSE(quarantine.holds("abc"));
}

TEST_CASE("a mark that cannot be written is told and stops nothing", "[failure][plugin_host]") {
  const ScratchFolder folder, data;
  folder.put("sound", "a");
  Bench bench({folder.path()});
  bench.allow("sound");
  bench.places.state = data.path();
  data.write("loading", "a file in the way");
  fs::permissions(data.path() / "loading", fs::perms(0666));
  const BathTypes types = bench.discover();
  REQUIRE(types.list().size() == 1);
  CHECK(types.list()[0].state == State::ready);
  REQUIRE(types.list()[0].notes.size() == 1);
  CHECK(types.list()[0].notes[0].find("loading") != std::string::npos);
}
