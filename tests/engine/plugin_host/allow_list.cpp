// The file in which the user's word is kept.
#include <sys/stat.h>

#include <bathwright/plugin_host/allow_list.hpp>

#include "scratch_folder.hpp"

using namespace bathwright;
using namespace bathwright::plugin_host;
namespace fs = std::filesystem;

namespace {

const std::string some_hash(64, 'a'), other_hash(64, 'b');

}  // namespace

TEST_CASE("what is allowed is read back, from a file for the user alone", "[unit][plugin_host]") {
  const ScratchFolder scratch;
  const fs::path file = allow_list_file(scratch.path() / "not/there/yet");
  AllowList list;
  list.add({some_hash, "/a/\"quoted\"/x.bathtype.so", "tin", "Bo\n", "MIT"});
  list.add({other_hash, "", "", "", ""});
  list.add({some_hash, "/a/x.bathtype.so", "tin", "Bo \\", "MIT"});
  REQUIRE(list.write(file));
  CHECK(fs::status(file).permissions() == fs::perms(0600));
  const auto back = AllowList::read(file);
  REQUIRE(back);
  REQUIRE(back->all().size() == 2);
  CHECK(back->holds(some_hash));
  CHECK(back->holds(other_hash));
  CHECK(back->all()[1].author == "Bo \\");
  CHECK(back->all()[1].file == "/a/x.bathtype.so");

  AllowList shorter = *back;
  shorter.remove(some_hash);
  shorter.remove(other_hash);
  REQUIRE(shorter.write(file));
  REQUIRE(AllowList::read(file));
  CHECK(AllowList::read(file)->all().empty());
}

TEST_CASE("nothing is allowed by a file that is not there, wrong or open to others",
          "[failure][plugin_host]") {
  const ScratchFolder scratch;
  REQUIRE(AllowList::read(scratch.path() / "none"));
  CHECK(AllowList::read(scratch.path() / "none")->all().empty());
  for (const char* wrong : {"[[plugin]]\nid = \"x\"\n", "[[plugin]]\nsha256 = \"abc\"\n", "[[plugin\n",
                            "allowed = 1\n", "plugin = [1]\n"}) {
    INFO(wrong);
    CHECK_FALSE(AllowList::read(scratch.write("wrong.toml", wrong)));
  }
  const fs::path file = allow_list_file(scratch.path());
  AllowList list;
  list.add({some_hash, "", "", "", ""});
  REQUIRE(list.write(file));
  fs::permissions(file, fs::perms(0660));
  const auto open = AllowList::read(file);
  REQUIRE_FALSE(open);
  CHECK(open.problems().front().what.find("can be written by group or others") != std::string::npos);
}

TEST_CASE("the user's list allows a plugin", "[unit][plugin_host]") {
  const ScratchFolder folder;
  folder.put("sound", "a");
  const Bench bench({folder.path()});
  AllowList list;
  list.add({sha256_of(built("sound")), "", "", "", ""});
  REQUIRE(list.write(allow_list_file(bench.places.data)));
  CHECK(bench.discover().list()[0].state == State::ready);
  fs::permissions(allow_list_file(bench.places.data), fs::perms(0666));
  const BathTypes types = bench.discover();
  REQUIRE(types.list().size() == 2);
  CHECK(types.list()[0].path == allow_list_file(bench.places.data));
  CHECK(types.list()[1].state == State::not_allowed);
}
