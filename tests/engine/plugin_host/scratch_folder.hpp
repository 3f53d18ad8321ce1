// A folder that only this user can write, gone at the end of the test.
#pragma once

#include <stdlib.h>

#include <catch2/catch.hpp>
#include <filesystem>
#include <fstream>
#include <string>

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
