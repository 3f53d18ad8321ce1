// What a plugin's file says of itself, read without running it.
#include "binary.hpp"

#include <catch2/catch.hpp>
#include <fstream>
#include <iterator>

using namespace bathwright;
using conformance::Check;
using plugin_host::read_shared_object;

namespace {

std::string content_of(const std::string& plugin) {
  std::ifstream in(TEST_PLUGINS "/check-" + plugin + ".bathtype.so", std::ios::binary);
  return {std::istreambuf_iterator<char>(in), {}};
}

Result<plugin_host::SharedObject> read(const std::string& content) {
  return read_shared_object(std::as_bytes(std::span(content)));
}

std::string faults_of(const std::string& plugin) {
  const auto object = read(content_of(plugin));
  REQUIRE(object);
  CHECK(object->exported == std::vector<std::string>{"bw_entry_1"});
  std::string faults;
  for (const Check& check : conformance::check_shared_object(*object, plugin)) {
    CHECK(check.group == conformance::Group::file);
    for (const Problem& problem : check.problems) faults += check.what + ": " + problem.what + '\n';
  }
  return faults;
}

}  // namespace

TEST_CASE("a bath type as it is built has a file without fault", "[unit][conformance]") {
  CHECK(faults_of("as-built").empty());
}

TEST_CASE("each fault of a plugin's file is named", "[failure][conformance]") {
  CHECK(faults_of("bound-late") == "is bound at once: looks functions up when they are first called\n");
  const std::string reaching = faults_of("prints-and-starts-threads");
  for (const char* what : {"uses puts, which prints", "uses thrd_create, which starts a thread",
                           "uses exit, which ends the program"}) {
    INFO(reaching);
    CHECK(reaching.find(what) != std::string::npos);
  }
}

TEST_CASE("text relocations are a fault", "[failure][conformance]") {
  // Made by hand: the linker of this machine refuses to write them.
  const plugin_host::SharedObject object{{"bw_entry_1"}, {}, true, true};
  const auto checks = conformance::check_shared_object(object, "old.bathtype.so");
  REQUIRE(checks.front().failed());
  CHECK(checks.front().problems.front().what == "has text relocations");
}

TEST_CASE("what is no library, cut off or damaged is refused or read, and never a crash",
          "[failure][conformance]") {
  const std::string whole = content_of("as-built");
  CHECK_FALSE(read(""));
  CHECK_FALSE(read("nickel"));
  for (std::size_t length = 0; length < whole.size(); length += 97)
    if (const auto object = read(whole.substr(0, length))) CHECK(object->exported.size() <= 1);
  std::string damaged = whole;
  unsigned seed = 1;
  for (int round = 0; round < 5000; ++round) {
    seed = seed * 1664525u + 1013904223u;  // Numerical Recipes' generator; any would do
    const std::size_t place = seed % whole.size();
    damaged[place] = static_cast<char>(seed >> 24);
    (void)read(damaged);
    if (round % 8 == 7) damaged = whole;
  }
}
