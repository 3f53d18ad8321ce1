// What a plugin's file says of itself, read without running it.
#include <bathwright/conformance/conformance.hpp>
#include <catch2/catch.hpp>
#include <filesystem>
#include <fstream>

#include "shared_object.hpp"

using namespace bathwright;
using conformance::Check;

namespace {

std::string faults_of(const std::string& plugin) {
  std::string faults;
  for (const Check& check : conformance::check_binary(TEST_PLUGINS "/check-" + plugin + ".bathtype.so")) {
    CHECK(check.group == conformance::Group::file);
    for (const Problem& problem : check.problems) faults += check.what + ": " + problem.what + '\n';
  }
  return faults;
}

}  // namespace

TEST_CASE("a bath type as it is built has a file without fault", "[unit][conformance]") {
  CHECK(faults_of("as-built").empty());
  CHECK(conformance::check_binary(TEST_PLUGINS "/check-as-built.bathtype.so").size() == 4);
}

TEST_CASE("each fault of a plugin's file is named", "[failure][conformance]") {
  CHECK(faults_of("exports-more") == "exports bw_entry_1 and nothing else: exports helper\n");
  CHECK(faults_of("bound-late") == "is bound at once: looks functions up when they are first called\n");
  const std::string reaching = faults_of("prints-and-starts-threads");
  for (const char* what : {"uses puts, which prints", "uses thrd_create, which starts a thread",
                           "uses exit, which ends the program"}) {
    INFO(reaching);
    CHECK(reaching.find(what) != std::string::npos);
  }
}

TEST_CASE("text relocations are a fault", "[failure][conformance]") {
  // No compiler of this machine makes them any more; so the loader's word for it is tested alone.
  conformance::SharedObject object{{"bw_entry_1"}, {}, true, true};
  const auto checks = conformance::check_shared_object(object, "old.bathtype.so");
  CHECK(checks[1].failed());
  object.text_relocations = false;
  CHECK(conformance::check_shared_object(object, "old.bathtype.so")[1].passed());
}

TEST_CASE("what is no library, and what is cut off, is refused", "[failure][conformance]") {
  const std::filesystem::path folder = std::filesystem::temp_directory_path();
  const auto whole = [] {
    std::ifstream in(TEST_PLUGINS "/check-as-built.bathtype.so", std::ios::binary);
    return std::string{std::istreambuf_iterator<char>(in), {}};
  }();
  CHECK_FALSE(conformance::read_shared_object(folder / "not-there.bathtype.so"));
  const auto file = folder / "bathwright-cut-off.bathtype.so";
  for (std::size_t length = 0; length < whole.size(); length += 997) {
    std::ofstream(file, std::ios::binary) << whole.substr(0, length);
    const auto read = conformance::read_shared_object(file);  // a refusal or a part of it, never a crash
    CHECK((!read || read->exported.size() <= 1));
  }
  std::filesystem::remove(file);
}
