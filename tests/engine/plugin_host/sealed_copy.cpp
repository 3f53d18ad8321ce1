// A file's way into sealed memory: what is refused before any of it is read, and what the copy withstands.
#include <fcntl.h>
#include <sys/mman.h>
#include <sys/stat.h>

#include "scratch_folder.hpp"

using namespace bathwright;
using namespace bathwright::plugin_host;
namespace fs = std::filesystem;

namespace {

void set_mode(const fs::path& path, unsigned bits) { fs::permissions(path, fs::perms(bits)); }

/// Refused, with `count` problems of which one says `what`.
void check_refused(const fs::path& file, const std::string& what, std::size_t count = 1,
                   Fault kind = Fault::refused) {
  const auto copy = sealed_copy(file, Above::to_the_root);
  REQUIRE_FALSE(copy);
  INFO(text(copy.problems()));
  CHECK(copy.problems().size() == count);
  CHECK(copy.problems().front().kind == kind);
  CHECK(text(copy.problems()).find(what) != std::string::npos);
}

}  // namespace

TEST_CASE("the hash is SHA-256 of the bytes", "[reference][plugin_host]") {
  // FIPS 180-2, appendix B.1: "abc".
  const ScratchFolder scratch;
  CHECK(sha256_of(scratch.write("abc", "abc")) ==
        "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad");
}

TEST_CASE("nobody can change a sealed copy", "[failure][plugin_host]") {
  const ScratchFolder scratch;
  const fs::path file = scratch.write("abc", "abc");
  const auto copy = sealed_copy(file, Above::to_the_root);
  REQUIRE(copy);
  const int memory = copy->memory.get();
  CHECK(::pwrite(memory, "x", 1, 0) < 0);
  CHECK(::ftruncate(memory, 1) < 0);
  CHECK(::ftruncate(memory, 10) < 0);
  CHECK(::mmap(nullptr, 3, PROT_READ | PROT_WRITE, MAP_SHARED, memory, 0) == MAP_FAILED);
  CHECK(::fcntl(memory, F_ADD_SEALS, F_SEAL_WRITE) < 0);
  std::ofstream(file) << "xyz";
  char first = 0;
  CHECK(::pread(memory, &first, 1, 0) == 1);
  CHECK(first == 'a');
}

TEST_CASE("what others can change is refused", "[failure][plugin_host]") {
  const ScratchFolder scratch;
  const fs::path file = scratch.put("sound", "deep/down/sound");
  const std::string writable = "can be written by group or others";
  CHECK(sealed_copy(file, Above::to_the_root));
  for (const unsigned bits : {0666u, 0664u, 0646u}) {
    INFO(std::oct << bits);
    set_mode(file, bits);
    check_refused(file, writable);
  }
  set_mode(file, 0644);
  for (const unsigned bits : {0777u, 0770u, 01777u}) {
    INFO(std::oct << bits);
    set_mode(scratch.path() / "deep/down", bits);
    check_refused(file, writable);
  }
  set_mode(scratch.path() / "deep/down", 0755);
  set_mode(scratch.path() / "deep", 0775);
  check_refused(file, (scratch.path() / "deep").string() + ": " + writable);
  CHECK(sealed_copy(file, Above::not_looked_at));
  set_mode(scratch.path() / "deep", 01777);  // as /tmp: nobody else can replace deep/down
  CHECK(sealed_copy(file, Above::to_the_root));
}

TEST_CASE("a refused file has all its reasons", "[failure][plugin_host]") {
  const ScratchFolder scratch;
  const fs::path file = scratch.write("large.bathtype.so", "");
  fs::resize_file(file, (16u << 20) + 1);
  check_refused(file, "is larger than 16 MiB");
  set_mode(file, 0666);
  set_mode(scratch.path(), 0777);
  check_refused(file, "is larger than 16 MiB", 3);
}

TEST_CASE("a file or folder of somebody else is refused", "[failure][plugin_host]") {
  if (::geteuid() != 0) return;  // nobody else can give a file away
  constexpr uid_t somebody = 12345;
  const ScratchFolder scratch;
  const fs::path file = scratch.put("sound", "deep/sound");
  REQUIRE(::chown(file.c_str(), somebody, 0) == 0);
  check_refused(file, "belongs to another user");
  REQUIRE(::chown(file.c_str(), 0, 0) == 0);
  REQUIRE(::chown(file.parent_path().c_str(), somebody, 0) == 0);
  check_refused(file, file.parent_path().string() + ": belongs to another user");
  REQUIRE(::chown(file.parent_path().c_str(), 0, 0) == 0);
  REQUIRE(::chown(scratch.path().c_str(), somebody, 0) == 0);
  set_mode(scratch.path(), 01777);  // the sticky bit does not bind the owner
  check_refused(file, scratch.path().string() + ": belongs to another user");
}

TEST_CASE("what is no file of bytes is refused", "[failure][plugin_host]") {
  const ScratchFolder scratch;
  const fs::path link = scratch.path() / "link.bathtype.so";
  fs::create_symlink(scratch.put("sound", "sound"), link);
  check_refused(link, "is a symbolic link");
  fs::create_directory(scratch.path() / "folder.bathtype.so");
  check_refused(scratch.path() / "folder.bathtype.so", "is not a regular file");
  REQUIRE(::mkfifo((scratch.path() / "pipe").c_str(), 0600) == 0);
  check_refused(scratch.path() / "pipe", "is not a regular file");
  check_refused(scratch.write("empty", ""), "is empty", 1, Fault::bad_input);
  check_refused(scratch.path() / "missing", "cannot be opened", 1, Fault::io);
  check_refused("/no/such/folder/x", "cannot be opened", 1, Fault::io);
}
