// A folder that only this user can write, gone at the end of the test.
#pragma once

#include <stdlib.h>

#include <bathwright/plugin_host/registry.hpp>
#include <catch2/catch.hpp>
#include <filesystem>
#include <fstream>
#include <string>

#include "sealed_copy.hpp"

class ScratchFolder {
 public:
  ScratchFolder() {
    std::string name = (std::filesystem::temp_directory_path() / "plugin_host_XXXXXX").string();
    REQUIRE(::mkdtemp(name.data()));
    path_ = name;
  }
  ~ScratchFolder() {
    std::error_code ignored;
    std::filesystem::remove_all(path_, ignored);
  }
  ScratchFolder(const ScratchFolder&) = delete;
  ScratchFolder& operator=(const ScratchFolder&) = delete;

  [[nodiscard]] const std::filesystem::path& path() const { return path_; }

  /// A copy of one of the test plugins.
  std::filesystem::path put(const std::string& plugin, const std::string& as) const {
    const auto file = path_ / (as + ".bathtype.so");
    std::filesystem::create_directories(file.parent_path());
    std::filesystem::copy_file(std::filesystem::path(TEST_PLUGINS) / (plugin + ".bathtype.so"), file);
    return file;
  }
  std::filesystem::path write(const std::string& name, const std::string& content) const {
    std::ofstream(path_ / name) << content;
    std::filesystem::permissions(path_ / name, std::filesystem::perms(0644));
    return path_ / name;
  }

 private:
  std::filesystem::path path_;
};

inline std::filesystem::path built(const std::string& plugin) {
  return std::filesystem::path(TEST_PLUGINS) / (plugin + ".bathtype.so");
}

inline std::string sha256_of(const std::filesystem::path& plugin) {
  const auto copy = bathwright::plugin_host::sealed_copy(plugin, bathwright::plugin_host::Above::to_the_root);
  REQUIRE(copy);
  return copy->sha256;
}

/// Named folders, with data, state and cache folders of their own and nothing allowed but what the test
/// allows.
class Bench {
 public:
  explicit Bench(const std::vector<std::filesystem::path>& folders = {}) {
    for (const auto& folder : folders)
      places.folders.push_back({folder, bathwright::plugin_host::Origin::named});
    places.data = home_.path() / "data";
    places.state = home_.path() / "state";
    places.cache = home_.path() / "cache";
    places.probe = bathwright::plugin_host::probe_program();
  }
  /// Allows one of the test plugins as if it had been built with the program.
  Bench& allow(const std::string& plugin) {
    hashes_.push_back(sha256_of(built(plugin)));
    views_.assign(hashes_.begin(), hashes_.end());
    places.allowed = views_;
    return *this;
  }
  [[nodiscard]] bathwright::plugin_host::BathTypes discover() const {
    return bathwright::plugin_host::BathTypes::discover(places);
  }

  bathwright::plugin_host::Places places;

 private:
  ScratchFolder home_;
  std::vector<std::string> hashes_;
  std::vector<std::string_view> views_;
};
