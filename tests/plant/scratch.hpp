// A new folder for a test.
#pragma once

#include <stdlib.h>
#include <unistd.h>

#include <filesystem>
#include <stdexcept>
#include <string>

namespace plant_test {

/// In memory to be quick, where the machine has such a place; on the disk to be as slow as what lasts.
enum class Where { memory, disk };

inline std::filesystem::path scratch_folder(Where where) {
  const std::filesystem::path memory = "/dev/shm";
  const bool in_memory = where == Where::memory && access(memory.c_str(), W_OK) == 0;
  std::string pattern =
      ((in_memory ? memory : std::filesystem::temp_directory_path()) / "plant-XXXXXX").string();
  if (!mkdtemp(pattern.data())) throw std::runtime_error("no scratch folder");
  return pattern;
}

}  // namespace plant_test
