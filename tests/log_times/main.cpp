// log_times ENTRIES REPORT: makes a log of so many entries, times what is asked of one, and writes the
// figures.
#include <fmt/format.h>
#include <stdlib.h>
#include <sys/resource.h>

#include <algorithm>
#include <chrono>
#include <cstdio>
#include <filesystem>
#include <fstream>
#include <functional>
#include <random>
#include <string>
#include <vector>

#include "bathwright/logbook/logbook.hpp"

using namespace bathwright;
using namespace bathwright::logbook;

namespace {

/// Half a minute further with each look, as a plant of many tanks logs.
struct RunningClock final : Clock {
  mutable UtcTime now = std::chrono::sys_days(std::chrono::year(2016) / 1 / 4);
  UtcTime utc_now() const override { return now += std::chrono::seconds(30); }
  Uptime uptime() const override { return {"boot-1", now.time_since_epoch()}; }
};

template <class T>
T must(Result<T> result) {
  if (result) return *std::move(result);
  std::fputs(text(result.problems()).c_str(), stderr);
  std::exit(1);
}

double seconds_of(const std::function<void()>& work) {
  const auto begin = std::chrono::steady_clock::now();
  work();
  return std::chrono::duration<double>(std::chrono::steady_clock::now() - begin).count();
}

/// Entries like those of a shop: an analysis has some 700 bytes, the others few.
NewEntry made(std::mt19937& random, std::size_t number) {
  const auto one_of = [&](std::initializer_list<const char*> texts) {
    return std::string(texts.begin()[random() % texts.size()]);
  };
  NewEntry entry;
  entry.kind = std::vector{EntryKind::analysis, EntryKind::addition,     EntryKind::addition,
                           EntryKind::level,    EntryKind::ampere_hours, EntryKind::note}[random() % 6];
  entry.tank = fmt::format("tank-{:02}", random() % 25);
  entry.shift = one_of({"early", "late", "night"});
  entry.by = one_of({"M. Okafor", "J. Lindqvist", "S. Brandt", "A. Chemist"});
  entry.bath_type =
      "watts-nickel 1.0.0 sha256:2a1324b0c1d2e3f405162738495a6b7c8d9eaf0b1c2d3e4f5061728394a5b6c7";
  if (entry.kind == EntryKind::analysis) {
    std::string results;
    for (const char* quantity : {"NiSO4.6H2O", "NiCl2.6H2O", "H3BO3", "Na^+", "Ca^2+"})
      results += fmt::format(
          "{}{{\"quantity\":\"{}\",\"value\":{:.3f},\"unit\":\"g/L\",\"standard_uncertainty\":0.{},\"from\":\"titration\"}}",
          results.empty() ? "" : ",", quantity, 1e-3 * static_cast<double>(random() % 300000),
          random() % 999);
    entry.body = fmt::format("{{\"pH\":4.{},\"volume_L\":2340,\"temperature_C\":54,\"results\":[{}]}}",
                             random() % 90, results);
  } else {
    entry.body = fmt::format(
        "{{\"note\":\"{} {} kg, lot {}\"}}",
        one_of({"boric acid", "nickel sulfate", "brightener", "filter changed", "anode bag torn"}),
        random() % 500, 100000 + number);
  }
  return entry;
}

struct Row {
  std::string what;
  double seconds;
  std::string found;
};

}  // namespace

int main(int argc, char** argv) {
  if (argc != 3) return 2;
  const std::size_t count = std::stoul(argv[1]);
  std::string pattern = (std::filesystem::temp_directory_path() / "log-times-XXXXXX").string();
  if (!mkdtemp(pattern.data())) return 1;
  const std::filesystem::path folder(pattern), file = folder / "shop.log";
  const RunningClock clock;
  std::vector<Row> rows;
  std::mt19937 random(1);
  const Credential chemist{"A. Chemist", "271828"};
  {
    auto log = must(Logbook::open(file, OpenMode::create, clock));
    constexpr std::size_t batch = 10000;
    rows.push_back({"written, ten thousand in a transaction", seconds_of([&] {
                      for (std::size_t done = 0; done < count; done += batch) {
                        std::vector<NewEntry> entries;
                        for (std::size_t i = 0; i < std::min(batch, count - done); ++i)
                          entries.push_back(made(random, done + i));
                        (void)must(log.append_all(entries));
                      }
                    }),
                    fmt::format("{} entries", count)});
    std::vector<double> each;
    for (int i = 0; i < 200; ++i)
      each.push_back(seconds_of([&] { (void)must(log.append(made(random, count))); }));
    std::ranges::sort(each);
    rows.push_back({"one entry more, on the disk: median of 200", each[each.size() / 2],
                    fmt::format("worst {:.1f} ms", 1e3 * each.back())});
  }
  auto log = must(Logbook::open(file, OpenMode::read_only, clock));
  const auto page = [&](const std::string& what, Filter filter) {
    filter.limit = 50;
    std::vector<double> times;
    std::size_t found = 0;
    for (int i = 0; i < 5; ++i) times.push_back(seconds_of([&] { found = must(log.list(filter)).size(); }));
    std::ranges::sort(times);
    rows.push_back({"page of 50: " + what, times[2], fmt::format("{} entries", found)});
  };
  const auto middle = clock.now - std::chrono::seconds(30) * (count / 2);
  page("the newest", {.newest_first = true});
  page("the oldest", {});
  page("behind the middle", {.after_seq = static_cast<std::int64_t>(count / 2)});
  page("analyses of one tank, newest first",
       {.tank = "tank-07", .kind = EntryKind::analysis, .newest_first = true});
  page("of one tank, oldest first", {.tank = "tank-07"});
  page("by one person, newest first", {.by = "S. Brandt", .newest_first = true});
  page("one week in the middle", {.from = middle, .to = middle + std::chrono::days(7)});
  page("since the middle, oldest first", {.from = middle});
  page("up to the middle, newest first", {.to = middle, .newest_first = true});
  page("the last day, of one tank", {.tank = "tank-07", .from = clock.now - std::chrono::days(1)});
  page("a frequent text, newest first", {.text = "nickel sulfate", .newest_first = true});
  page("a lot number", {.text = fmt::format("lot {}", 100000 + count / 3), .newest_first = true});
  page("a text that is nowhere", {.text = "no such words", .newest_first = true});
  page("a text of two letters, newest first", {.text = "kg", .newest_first = true});
  page("a frequent text of one tank", {.tank = "tank-07", .text = "boric acid", .newest_first = true});
  page("a lot number of one tank in the middle",
       {.tank = "tank-07", .from = middle, .text = fmt::format("lot {}", 100000 + count / 3)});
  rows.push_back({"tanks", seconds_of([&] { (void)must(log.tanks()); }), ""});
  rows.push_back({"open slips", seconds_of([&] { (void)must(log.open_slips()); }), ""});
  Verification verification;
  const double verify_s = seconds_of([&] { verification = log.verify(); });
  rows.push_back(
      {"verify", verify_s,
       fmt::format("{} entries, {}", verification.entries, verification.ok ? "all as logged" : "PROBLEMS")});

  // The same with people: each entry bears a signature.
  const std::size_t signed_count = count / 50;
  auto with_people = must(Logbook::open(folder / "signed.log", OpenMode::create, clock));
  must(with_people.admit(chemist.name, Role::chemist, chemist.pin));
  std::vector<NewEntry> entries;
  for (std::size_t i = 0; i < signed_count; ++i) {
    entries.push_back(made(random, i));
    entries.back().by = chemist.name;
  }
  rows.push_back({"written with one PIN, signed each", seconds_of([&] {
                    (void)must(with_people.append_all(entries, {chemist, {}}));
                  }),
                  fmt::format("{} entries", signed_count)});
  entries.resize(1);
  rows.push_back({"one signed entry more, the PIN tried and on the disk", seconds_of([&] {
                    (void)must(with_people.append(entries.front(), {chemist, {}}));
                  }),
                  ""});
  Verification signed_verification;
  const double signed_s = seconds_of([&] { signed_verification = with_people.verify(); });
  rows.push_back({"verify of the signed log", signed_s,
                  fmt::format("{} entries, {}", signed_verification.entries,
                              signed_verification.ok ? "all as logged" : "PROBLEMS")});

  rusage usage{};
  getrusage(RUSAGE_SELF, &usage);
  std::string report = fmt::format(
      "# A log of {} entries: times\n\nGenerated by `log_times_report`; measured on the machine it ran on, two cores, Release. The entries are made up"
      " (some 40 % of the bytes are analyses). Aims: a page of a filtered list under 50 ms, verify of a million under 10 s.\n\n"
      "File {:.0f} MB; memory at most {:.0f} MB.\n\n| what | time | found |\n|---|---:|---|\n",
      count, 1e-6 * static_cast<double>(std::filesystem::file_size(file)),
      1e-3 * static_cast<double>(usage.ru_maxrss));
  for (const Row& row : rows)
    report += fmt::format(
        "| {} | {} | {} |\n", row.what,
        row.seconds < 1 ? fmt::format("{:.2f} ms", 1e3 * row.seconds) : fmt::format("{:.2f} s", row.seconds),
        row.found);
  std::ofstream(argv[2]) << report;
  std::fputs(report.c_str(), stdout);
  std::filesystem::remove_all(folder);
  return verification.ok && signed_verification.ok ? 0 : 1;
}
