// What other people and programs do around a log that is open or is to be opened.
#include <fmt/format.h>
#include <sqlite3.h>
#include <unistd.h>

#include <algorithm>
#include <chrono>
#include <functional>
#include <optional>

#include "processes.hpp"
#include "trials.hpp"

namespace faults {
namespace {

namespace fs = std::filesystem;
using logbook::Logbook, logbook::OpenMode;

constexpr int before = 5, after = 5;  // entries logged before the fault and tried under it

/// Logs `count` entries; what was refused is said.
void log_some(Logbook& log, int count, const fs::path& path, const Channel& parent) {
  for (int i = 0; i < count; ++i) {
    if (const auto entry = log.append(numbered_note(i, 100)))
      parent.acknowledge(*entry);
    else
      parent.say(words(entry.problems(), path));
  }
}

/// Permissions do not bind root.
bool become_ordinary_user() {
  constexpr unsigned nobody = 65534;
  return geteuid() != 0 || (setgid(nobody) == 0 && setuid(nobody) == 0);
}

/// A writer without rights of its own has logged some entries when something `happens`. It goes on with the
/// log it has open, or with `reopen` has closed it and opens it again. Then the fault is mended.
struct Meeting {
  const char* fault;
  const char* made;
  std::function<void(const fs::path&folder)> happens, mended;
  bool reopen = false;
  /// What must be said: a part of the message; empty where nothing is wrong for the writer.
  std::string message{};
};

FaultRow meet(const Meeting& meeting) {
  FaultRow row{.fault = meeting.fault, .made = meeting.made};
  const Scratch outer;
  const fs::path folder = outer / "logs", path = folder / "shop.log";
  fs::permissions(outer.path(), fs::perms::all);
  fs::create_directory(folder);
  fs::permissions(folder, fs::perms::all);

  int turn[2];  // a byte in it: the fault has been made
  if (pipe(turn) != 0) throw std::runtime_error("no pipe");
  Processes writer(1, [&](int, const Channel& parent) {
    if (!become_ordinary_user()) return 1;
    auto opened = open_log(path);
    if (!opened) return 2;
    std::optional<Logbook> log(*std::move(opened));
    log_some(*log, before, path, parent);
    if (meeting.reopen) log.reset();
    parent.say("ready");
    char made = 0;
    if (read(turn[0], &made, 1) != 1) return 3;
    if (meeting.reopen) {
      auto again = open_log(path, OpenMode::read_write);
      if (!again) {
        parent.say(words(again.problems(), path));
        const auto reader = open_log(path, OpenMode::read_only);
        const auto entries = reader ? reader->list() : reader.problems();
        parent.say(entries ? fmt::format("read {}", entries->size()) : words(entries.problems(), path));
        return 0;
      }
      log.emplace(*std::move(again));
    }
    log_some(*log, after, path, parent);
    return 0;
  });
  writer.wait_for_words();
  meeting.happens(folder);
  if (write(turn[1], "x", 1) != 1) throw std::runtime_error("no turn");
  Heard heard = writer.finish();
  close(turn[0]);
  close(turn[1]);
  meeting.mended(folder);

  row.runs = 1;
  if (heard.statuses != std::vector<int>{0}) row.breaks("writer", "it could not begin");
  for (const std::string& line : heard.words)
    if (line != "ready") row.messages.insert(line);
  const bool said = std::any_of(row.messages.begin(), row.messages.end(), [&](const std::string& message) {
    return message.find(meeting.message) != std::string::npos;
  });
  if (meeting.message.empty() ? !row.messages.empty() : !said)
    row.breaks("message",
               meeting.message.empty() ? "there should be none" : "\"" + meeting.message + "\" is missing");
  constexpr std::size_t in_flight = 0;
  check_kept(path, heard.acknowledged, in_flight, "afterwards", row);
  return row;
}

void may(const fs::path& path, fs::perms rights) { fs::permissions(path, rights); }

constexpr fs::perms readable = fs::perms::owner_read | fs::perms::group_read | fs::perms::others_read;
constexpr fs::perms enterable = fs::perms::owner_exec | fs::perms::group_exec | fs::perms::others_exec;

std::vector<FaultRow> met_by_a_writer() {
  const auto give_all = [](const fs::path& folder) {
    may(folder, fs::perms::all);
    for (const auto& file : fs::directory_iterator(folder)) may(file.path(), fs::perms::all);
  };
  const auto read_only_folder = [](const fs::path& folder) { may(folder, readable | enterable); };
  const auto read_only_files = [](const fs::path& folder) {
    for (const auto& file : fs::directory_iterator(folder)) may(file.path(), readable);
  };
  const auto no_access = [](const fs::path& folder) { may(folder, fs::perms::none); };
  const auto moved_away = [](const fs::path& folder) { fs::rename(folder, folder.string() + "-old"); };
  const auto brought_back = [](const fs::path& folder) {
    fs::remove_all(folder);
    fs::rename(folder.string() + "-old", folder);
  };
  const auto in_its_place = [moved_away](const fs::path& folder) {
    moved_away(folder);
    fs::create_directory(folder);
    fs::copy_file(folder.string() + "-old/shop.log", folder / "shop.log");
  };
  const std::string moved = "no longer to be found";
  std::vector<FaultRow> rows;
  for (const Meeting& meeting : std::vector<Meeting>{
           {"folder made read-only under an open log", "chmod of the folder; the writer goes on",
            read_only_folder, give_all},
           {"file made read-only under an open log", "chmod of the files; the writer goes on",
            read_only_files, give_all},
           {"folder closed to the writer of an open log", "chmod 0 of the folder; the writer goes on",
            no_access, give_all, false, moved},
           {"read-only folder", "chmod of the folder; the writer opens the log again", read_only_folder,
            give_all, true, "may not be written"},
           {"read-only file", "chmod of the files; the writer opens the log again", read_only_files, give_all,
            true, "may be read but not written"},
           {"no access to the folder", "chmod 0 of the folder; the writer opens the log again", no_access,
            give_all, true, "you may not look into the folder"},
           {"folder moved away under an open log", "rename of the folder; afterwards back", moved_away,
            brought_back, false, moved},
           {"another file put in the place of an open log",
            "folder moved away, a copy without what was still in the "
            "write-ahead log in its place; afterwards back",
            in_its_place, brought_back, false, moved},
       })
    rows.push_back(meet(meeting));
  return rows;
}

/// rm -rf while the log is open: what was acknowledged before went with the files; nothing may be afterwards.
FaultRow removed_while_open() {
  FaultRow row{.fault = "folder removed under an open log",
               .made = "removal with all files; the writer goes on"};
  const Scratch outer;
  const fs::path folder = outer / "logs", path = folder / "shop.log";
  fs::create_directory(folder);
  auto log = must(open_log(path));
  must(log.append(numbered_note(1, 100)));
  fs::remove_all(folder);
  row.runs = 1;
  if (const auto entry = log.append(numbered_note(2, 100)); entry) {
    ++row.acknowledged;
    row.breaks("append", "acknowledged into a file that is gone");
  } else {
    row.messages.insert(words(entry.problems(), path));
  }
  return row;
}

/// "-wal" looks like rubbish to some; without it the entries not yet in the main file are gone.
FaultRow helper_file_removed() {
  FaultRow row{.fault = "write-ahead file removed under an open log",
               .made = "removal of shop.log-wal; the writer goes on, then closes the log"};
  const Scratch folder;
  const fs::path path = folder / "shop.log";
  Acknowledged acknowledged;
  {
    auto log = must(open_log(path));
    const auto first = must(log.append(numbered_note(1, 100)));
    acknowledged[first.seq] = first.hash;
    fs::remove(folder / "shop.log-wal");
    if (const auto entry = log.append(numbered_note(2, 100)); entry)
      row.breaks("append", "acknowledged into a file that is gone");
    else
      row.messages.insert(words(entry.problems(), path));
  }
  row.runs = 1;
  constexpr std::size_t in_flight = 0;
  check_kept(path, acknowledged, in_flight, "afterwards", row);
  return row;
}

FaultRow locked() {
  constexpr std::chrono::milliseconds wait(300);
  FaultRow row{.fault = "locked by another program",
               .made = fmt::format("another connection holds the write lock; wait of {} ms", wait.count())};
  const Scratch folder;
  const fs::path path = folder / "shop.log";
  auto log = must(open_log(path, OpenMode::create, wait));
  Acknowledged acknowledged;
  const auto first = must(log.append(numbered_note(1, 100)));
  acknowledged[first.seq] = first.hash;
  sqlite3* other = nullptr;
  sqlite3_open(path.c_str(), &other);
  sqlite3_exec(other, "BEGIN IMMEDIATE", nullptr, nullptr, nullptr);
  const auto begin = std::chrono::steady_clock::now();
  const auto refused = log.append(numbered_note(2, 100));
  const auto waited = std::chrono::steady_clock::now() - begin;
  sqlite3_close(other);
  row.runs = 1;
  if (refused)
    row.breaks("append", "went through the lock");
  else
    row.messages.insert(words(refused.problems(), path));
  if (waited < wait) row.breaks("append", "did not wait");
  if (!log.list() || log.list()->size() != 1) row.breaks("list", "reading must go on under a lock");
  row.note =
      fmt::format("waited {} ms", std::chrono::duration_cast<std::chrono::milliseconds>(waited).count());
  constexpr std::size_t in_flight = 0;
  check_kept(path, acknowledged, in_flight, "afterwards", row);
  return row;
}

FaultRow clock_set() {
  struct SetClock final : logbook::Clock {
    logbook::UtcTime now = std::chrono::sys_days(std::chrono::year(2026) / 3 / 2);
    [[nodiscard]] logbook::UtcTime utc_now() const override { return now; }
  } clock;
  FaultRow row{.fault = "wall clock set",
               .made = "by -10 years, -1 h, -1 ms, +1 h, +10 years, two entries after each"};
  const Scratch folder;
  const fs::path path = folder / "shop.log";
  Acknowledged acknowledged;
  std::size_t set_back = 0;
  {
    auto log = must(open_log(path, OpenMode::create, patience, &clock));
    using namespace std::chrono_literals;
    const std::vector<std::chrono::milliseconds> steps{0ms, -87'660h, -1h, -1ms, 1h, 87'660h};
    for (const auto step : steps) {
      clock.now += step;
      if (step < 0ms) ++set_back;
      for (int i = 0; i < 2; ++i) {
        const auto entry = must(log.append(numbered_note(i, 100)));
        acknowledged[entry.seq] = entry.hash;
      }
      ++row.runs;
    }
    const auto report = log.verify();
    if (report.clock_steps.size() != set_back)
      row.breaks("verify", fmt::format("saw {} of {} steps back", report.clock_steps.size(), set_back));
    if (!report.clock_steps.empty()) row.messages.insert(report.clock_steps.front().words);
  }
  row.note = fmt::format("{} steps back seen by verify", set_back);
  constexpr std::size_t in_flight = 0;
  check_kept(path, acknowledged, in_flight, "afterwards", row);
  return row;
}

}  // namespace

std::vector<FaultRow> surroundings() {
  std::vector<FaultRow> rows = met_by_a_writer();
  rows.push_back(removed_while_open());
  rows.push_back(helper_file_removed());
  rows.push_back(locked());
  rows.push_back(clock_set());
  return rows;
}

}  // namespace faults
