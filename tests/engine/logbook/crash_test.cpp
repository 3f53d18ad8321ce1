// What was acknowledged stays, whatever happens to the process, the other process or the disk.
#include <sys/resource.h>
#include <sys/wait.h>
#include <unistd.h>

#include <csignal>
#include <cstdlib>
#include <cstring>
#include <map>
#include <random>
#include <thread>

#include "support.hpp"

using namespace bathwright;
using namespace bathwright::logbook;

namespace {

/// Runs `work` in a process of its own; its value is the process's exit status.
template <class Work>
pid_t start(Work work) {
  const pid_t child = fork();
  REQUIRE(child >= 0);
  if (child == 0) _exit(work());
  return child;
}

int exit_status(pid_t child) {
  int status = 0;
  REQUIRE(waitpid(child, &status, 0) == child);
  return WIFEXITED(status) ? WEXITSTATUS(status) : -1;
}

/// What a writer reports the moment append has returned; written in one piece (below PIPE_BUF).
struct Acknowledged {
  std::int64_t seq;
  char hash[64];
};

int append_until_killed(const std::filesystem::path& path, int pipe_end) {
  const SystemClock clock;
  auto log = Logbook::open(path, OpenMode::create, clock);
  if (!log) return 1;
  auto writer = *std::move(log);
  for (;;) {
    const auto entry = writer.append(note());
    if (!entry) return 1;
    Acknowledged acknowledged{entry->seq, {}};
    std::memcpy(acknowledged.hash, entry->hash.data(), sizeof acknowledged.hash);
    if (write(pipe_end, &acknowledged, sizeof acknowledged) != sizeof acknowledged) return 1;
  }
}

int kill_runs() {
  const char* wish = std::getenv("BATHWRIGHT_KILL_RUNS");
  return wish ? std::atoi(wish) : 60;
}

}  // namespace

TEST_CASE("nothing acknowledged is lost when the writer is killed", "[failure][logbook]") {
  INFO("seed " << Catch::rngSeed());
  std::mt19937 random(Catch::rngSeed());
  constexpr int runs_per_file = 5;  // fresh files, so that some writers die while the file is made
  const TempFolder folder;
  std::filesystem::path path;
  std::map<std::int64_t, std::string> acknowledged;
  std::size_t checked = 0;

  for (int run = 0; run < kill_runs(); ++run) {
    INFO("run " << run);
    if (run % runs_per_file == 0) {
      path = folder / ("shop-" + std::to_string(run) + ".log").c_str();
      acknowledged.clear();
    }
    int ends[2];
    REQUIRE(pipe(ends) == 0);
    const pid_t child = start([&] { return append_until_killed(path, ends[1]); });
    close(ends[1]);
    const auto keep = [&](const Acknowledged& one) { acknowledged[one.seq] = std::string(one.hash, 64); };
    Acknowledged next{};
    // Every second writer lives to its first acknowledgement, however slow the machine is.
    if (run % 2 == 1) {
      REQUIRE(read(ends[0], &next, sizeof next) == sizeof next);
      keep(next);
    }
    std::this_thread::sleep_for(std::chrono::microseconds(random() % 40'000));
    REQUIRE(kill(child, SIGKILL) == 0);
    REQUIRE(exit_status(child) == -1);  // it did not end by itself
    while (read(ends[0], &next, sizeof next) == sizeof next) keep(next);
    close(ends[0]);

    const SystemClock clock;
    const auto log = must(Logbook::open(path, OpenMode::create, clock));
    for (const auto& [seq, hash] : acknowledged) REQUIRE(must(log.find(seq)).hash == hash);
    checked += acknowledged.size();
    const Verification report = log.verify();
    REQUIRE(report.ok);
  }
  CHECK(checked > 0);
}

TEST_CASE("two processes that log at once get one chain", "[failure][logbook]") {
  constexpr std::size_t each = 200;
  const TempFolder folder;
  const auto log_all = [&](const char* station) {
    const SystemClock clock;
    auto log = Logbook::open(folder / "shop.log", OpenMode::create, clock, {.station = station});
    if (!log) return 1;
    auto writer = *std::move(log);
    for (std::size_t i = 0; i < each; ++i)
      if (!writer.append(note())) return 2;
    return 0;
  };
  const pid_t first = start([&] { return log_all("line-a"); });
  const pid_t second = start([&] { return log_all("line-b"); });
  CHECK(exit_status(first) == 0);
  CHECK(exit_status(second) == 0);

  const SystemClock clock;
  const auto log = must(Logbook::open(folder / "shop.log", OpenMode::read_only, clock));
  std::map<std::string, std::size_t> by_station;
  for (const Entry& entry : must(log.list())) ++by_station[entry.station];
  CHECK(by_station == std::map<std::string, std::size_t>{{"line-a", each}, {"line-b", each}});
  CHECK(log.verify().ok);
}

TEST_CASE("a full disk is named, loses nothing acknowledged, and the log goes on with space again",
          "[failure][logbook]") {
  const TempFolder folder;
  constexpr rlim_t small = 400'000;  // bytes a file may grow to: stands for the full disk
  constexpr int filled_after = 100;  // 100 entries of 10 kB do not fit
  int ends[2];
  REQUIRE(pipe(ends) == 0);
  const pid_t child = start([&] {
    std::signal(SIGXFSZ, SIG_IGN);
    rlimit limit{};
    getrlimit(RLIMIT_FSIZE, &limit);
    const SystemClock clock;
    auto opened = Logbook::open(folder / "shop.log", OpenMode::create, clock);
    if (!opened) return 1;
    auto log = *std::move(opened);
    const rlim_t before = limit.rlim_cur;
    limit.rlim_cur = small;
    if (setrlimit(RLIMIT_FSIZE, &limit) != 0) return 2;
    std::int64_t last = 0;
    for (int i = 0; i < filled_after; ++i) {
      const auto entry = log.append(note(std::string(10'000, 'x')));
      if (!entry) {
        if (entry.problems()[0].what != "the disk is full; nothing was logged") return 3;
        break;
      }
      last = entry->seq;
    }
    if (last == 0 || last == filled_after) return 4;
    limit.rlim_cur = before;
    if (setrlimit(RLIMIT_FSIZE, &limit) != 0) return 5;
    const auto entry = log.append(note());
    if (!entry || entry->seq != last + 1) return 6;
    return write(ends[1], &entry->seq, sizeof entry->seq) == sizeof entry->seq ? 0 : 7;
  });
  close(ends[1]);
  CHECK(exit_status(child) == 0);
  std::int64_t last = 0;
  REQUIRE(read(ends[0], &last, sizeof last) == sizeof last);
  close(ends[0]);

  const SystemClock clock;
  const auto log = must(Logbook::open(folder / "shop.log", OpenMode::read_only, clock));
  const Verification report = log.verify();
  CHECK(report.ok);
  CHECK(report.entries == last);
}
