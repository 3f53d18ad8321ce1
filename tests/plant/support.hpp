// What the plant's tests share: a scratch folder, logs to send, the value or a failed test.
#pragma once

#include <cstdio>
#include <filesystem>
#include <stdexcept>
#include <string>

#include "bathwright/logbook/logbook.hpp"
#include "bathwright/plant/station.hpp"
#include "scratch.hpp"

namespace plant_test {

using namespace bathwright;

class TempFolder {
 public:
  explicit TempFolder(Where where = Where::memory) { path_ = scratch_folder(where); }
  ~TempFolder() { std::filesystem::remove_all(path_); }
  TempFolder(const TempFolder&) = delete;
  TempFolder& operator=(const TempFolder&) = delete;
  std::filesystem::path operator/(const std::string& name) const { return path_ / name; }
  [[nodiscard]] const std::filesystem::path& path() const { return path_; }

 private:
  std::filesystem::path path_;
};

/// The value; else the problems' words, and an exception that ends the test.
template <class T>
T must(Result<T> result) {
  if (!result) {
    const std::string words = text(result.problems());
    std::fprintf(stderr, "%s\n", words.c_str());  // Catch, as it is built here, shows no exception's words
    throw std::runtime_error(words);
  }
  return *std::move(result);
}

inline const logbook::SystemClock& wall_clock() {
  static const logbook::SystemClock clock;
  return clock;
}

/// PINs that are quick to try.
inline constexpr logbook::PinCost cheap{.memory_KiB = 8, .passes = 1};

inline logbook::Logbook open_log(const std::filesystem::path& path, const std::string& station = "line-a",
                                 logbook::OpenMode mode = logbook::OpenMode::create) {
  return must(logbook::Logbook::open(path, mode, wall_clock(),
                                     {.station = station, .program = "bathwright 0.1.0", .pin_cost = cheap}));
}

inline logbook::NewEntry note(const std::string& tank = "nickel-1",
                              const std::string& words = "anode bag torn") {
  return {.kind = logbook::EntryKind::note,
          .tank = tank,
          .shift = "night",
          .by = "M. Okafor",
          .body = "{\"text\":\"" + words + "\"}"};
}

}  // namespace plant_test
