// Runs the built program in a folder of its own.
#pragma once

#include <filesystem>
#include <nlohmann/json.hpp>
#include <string>
#include <vector>

namespace app_test {

struct Run {
  int status = -1;
  std::string out, err;

  [[nodiscard]] nlohmann::json json() const { return nlohmann::json::parse(out, nullptr, false); }
};

/// A scratch folder that is gone at the end of its test; the program runs in it, with its data folder inside.
/// What is known of the bath types from probing them is kept between the tests.
class Bench {
 public:
  Bench();
  ~Bench();
  Bench(const Bench&) = delete;
  Bench& operator=(const Bench&) = delete;

  /// arguments: as typed into a shell.
  [[nodiscard]] Run run(const std::string& arguments) const;
  void write(const std::string& file, const std::string& content) const;
  [[nodiscard]] std::string read(const std::string& file) const;
  /// Names and contents of everything in the folder.
  [[nodiscard]] std::vector<std::string> listing() const;
  [[nodiscard]] const std::filesystem::path& folder() const { return folder_; }

 private:
  std::filesystem::path folder_;
};

/// The demonstration tank and its readings.
inline const std::string tank = PROJECT_DIR "/baths/n-07.toml";
inline const std::string readings = PROJECT_DIR "/baths/readings/n-07-morning.toml";

[[nodiscard]] std::string content_of(const std::filesystem::path& file);

/// Columns of the widest line, counted in code points.
[[nodiscard]] std::size_t widest_line(const std::string& text);

}  // namespace app_test
