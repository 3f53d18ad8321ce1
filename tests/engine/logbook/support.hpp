// What the log's tests share: a folder that goes away, a clock that stands still, a raw SQLite connection.
#pragma once

#include <sqlite3.h>
#include <stdlib.h>

#include <catch2/catch.hpp>
#include <filesystem>
#include <string>

#include "bathwright/logbook/logbook.hpp"

namespace bathwright::logbook {

class TempFolder {
 public:
  TempFolder() {
    std::string pattern = (std::filesystem::temp_directory_path() / "logbook-XXXXXX").string();
    REQUIRE(mkdtemp(pattern.data()) != nullptr);
    path_ = pattern;
  }
  ~TempFolder() { std::filesystem::remove_all(path_); }
  TempFolder(const TempFolder&) = delete;
  TempFolder& operator=(const TempFolder&) = delete;
  std::filesystem::path operator/(const char* name) const { return path_ / name; }
  const std::filesystem::path& path() const { return path_; }

 private:
  std::filesystem::path path_;
};

inline UtcTime utc(int year, unsigned month, unsigned day, int hour, int minute) {
  return std::chrono::sys_days(std::chrono::year(year) / std::chrono::month(month) / std::chrono::day(day)) +
         std::chrono::hours(hour) + std::chrono::minutes(minute);
}

/// Shows what it was last set to.
struct HeldClock final : Clock {
  UtcTime now = utc(2026, 3, 2, 5, 40);
  Uptime on;
  UtcTime utc_now() const override { return now; }
  Uptime uptime() const override { return on; }
};

/// PINs that are quick to try.
inline constexpr PinCost cheap{.memory_KiB = 8, .passes = 1};

inline NewEntry note(const std::string& text = "anode bag torn") {
  return {.kind = EntryKind::note,
          .tank = "nickel-1",
          .shift = "night",
          .by = "M. Okafor",
          .body = "{\"text\":\"" + text + "\"}"};
}

inline NewEntry correction(std::int64_t corrects) {
  NewEntry entry = note();
  entry.kind = EntryKind::correction;
  entry.body = R"({"reason":"digits swapped"})";
  entry.about = corrects;
  return entry;
}

/// The value, or a failed test that shows the problems.
template <class T>
T must(Result<T> result) {
  if (!result) FAIL(text(result.problems()));
  return *std::move(result);
}

/// Someone with a database tool and no respect for the log.
class RawDatabase {
 public:
  explicit RawDatabase(const std::filesystem::path& path) {
    REQUIRE(sqlite3_open(path.c_str(), &handle_) == SQLITE_OK);
  }
  ~RawDatabase() { sqlite3_close(handle_); }
  RawDatabase(const RawDatabase&) = delete;
  RawDatabase& operator=(const RawDatabase&) = delete;

  int attempt(const std::string& sql) {
    sqlite3_exec(handle_, sql.c_str(), nullptr, nullptr, nullptr);
    return sqlite3_extended_errcode(handle_);
  }
  void execute(const std::string& sql) {
    const int code = attempt(sql);
    INFO(sql << ": " << sqlite3_errmsg(handle_));
    REQUIRE(code == SQLITE_OK);
  }

 private:
  sqlite3* handle_ = nullptr;
};

}  // namespace bathwright::logbook
