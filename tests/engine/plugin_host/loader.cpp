// Opening plugin files: what loads, what is refused before its code runs, what is refused after.
#include <bathwright/plugin_host/loader.hpp>

#include "scratch_folder.hpp"

using namespace bathwright;
namespace fs = std::filesystem;

namespace {

/// The plugin is refused with exactly one problem that says `what`.
void check_refused(const fs::path& file, const std::string& what, Fault kind) {
  const auto loaded = plugin_host::load(file);
  REQUIRE_FALSE(loaded);
  INFO(text(loaded.problems()));
  REQUIRE(loaded.problems().size() == 1);
  CHECK(loaded.problems().front().what.find(what) != std::string::npos);
  CHECK(loaded.problems().front().kind == kind);
}

fs::path built(const std::string& plugin) { return fs::path(TEST_PLUGINS) / (plugin + ".bathtype.so"); }

}  // namespace

TEST_CASE("a sound plugin loads, with its notes", "[unit][plugin_host]") {
  const auto loaded = plugin_host::load(built("sound"));
  INFO((loaded ? std::string{} : text(loaded.problems())));
  REQUIRE(loaded);
  REQUIRE(loaded->types.size() == 1);
  CHECK(loaded->types[0].id == "test-bath");
  const std::vector<double> levels = {60, 72};
  bath::IndicatorView view{};
  view.quantity_g_per_L = levels;
  const auto value = loaded->types[0].indicators[0].evaluate(view);
  REQUIRE(value);
  CHECK(*value == 72);
  CHECK(loaded->notes == std::vector<std::string>{"water is known", "water is known"});
}

TEST_CASE("a plugin at fault is refused by name", "[failure][plugin_host]") {
  check_refused(built("no-entry"), "is no bath-type plugin of interface version 1", Fault::bad_input);
  check_refused(built("refuses"), "the plugin refuses to work; licence: no key found", Fault::refused);
  check_refused(built("odd-status"), "bw_entry_1 gave status 42", Fault::inconsistent_data);
  check_refused(built("endless"), "never ends its list", Fault::inconsistent_data);
  check_refused(built("throws"), "let out an exception", Fault::inconsistent_data);
  const auto unsound = plugin_host::load(built("unsound"));
  REQUIRE_FALSE(unsound);
  CHECK(unsound.problems().front().where == "unsound.bathtype.so: test-bath author");
}

TEST_CASE("what is no library is refused", "[failure][plugin_host]") {
  const ScratchFolder scratch;
  check_refused(scratch.write("text.bathtype.so", "nickel"), "is not a library that can be loaded",
                Fault::bad_input);
  check_refused(scratch.path() / "missing.bathtype.so", "cannot be opened", Fault::io);
  fs::create_directory(scratch.path() / "folder.bathtype.so");
  check_refused(scratch.path() / "folder.bathtype.so", "is not a regular file", Fault::refused);
}

TEST_CASE("what others can change is refused before it runs", "[failure][plugin_host]") {
  const ScratchFolder scratch;
  const fs::path file = scratch.put("sound", "sound");
  const auto mode = [](const fs::path& path, unsigned bits) { fs::permissions(path, fs::perms(bits)); };
  mode(file, 0644);
  CHECK(plugin_host::load(file));
  for (const unsigned bits : {0666u, 0664u, 0646u}) {
    INFO(std::oct << bits);
    mode(file, bits);
    check_refused(file, "can be written by group or others", Fault::refused);
  }
  mode(file, 0644);
  for (const unsigned bits : {0777u, 0770u, 01777u}) {
    INFO(std::oct << bits);
    mode(scratch.path(), bits);
    check_refused(file, "can be written by group or others", Fault::refused);
  }
  mode(scratch.path(), 0700);
  const fs::path link = scratch.path() / "link.bathtype.so";
  fs::create_symlink(file, link);
  check_refused(link, "is a symbolic link", Fault::refused);
}

TEST_CASE("a file too large for a bath type is refused", "[failure][plugin_host]") {
  const ScratchFolder scratch;
  const fs::path file = scratch.write("large.bathtype.so", "");
  fs::resize_file(file, (16u << 20) + 1);
  check_refused(file, "is larger than 16 MiB", Fault::refused);
}
