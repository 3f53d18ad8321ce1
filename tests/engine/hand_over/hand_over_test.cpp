// What a shift tells the next, from a log of one night.
#include "bathwright/hand_over/hand_over.hpp"

#include <stdlib.h>

#include <catch2/catch.hpp>
#include <filesystem>

using namespace bathwright;
using std::chrono::hours;

namespace {

template <class T>
T must(Result<T> result) {
  if (!result) FAIL(text(result.problems()));
  return *std::move(result);
}

/// The night from 2026-03-02 22:00 to 06:00, in a shop that keeps UTC.
struct Night final : logbook::Clock {
  std::filesystem::path folder;
  shifts::UtcTime begin = std::chrono::sys_days(std::chrono::year(2026) / 3 / 2) + hours(22), now = begin;
  shifts::Calendar calendar = must(shifts::Calendar::of(must(shifts::ready_made("3x8", "Etc/UTC"))));
  std::optional<logbook::Logbook> log;
  bath::Tank tank;

  Night() {
    std::string pattern = (std::filesystem::temp_directory_path() / "hand-over-XXXXXX").string();
    REQUIRE(mkdtemp(pattern.data()) != nullptr);
    folder = pattern;
    log.emplace(must(logbook::Logbook::open(folder / "shop.log", logbook::OpenMode::create, *this)));
    tank.name = "N-1";
    tank.aims = {
        {"Ni^2+", 75, 70, 80, 24.0}, {"pH", 4.2, 3.8, 4.6, 8.0}, {"H3BO3", 42, 38, 45, std::nullopt}};
  }
  ~Night() override { std::filesystem::remove_all(folder); }
  Night(const Night&) = delete;
  Night& operator=(const Night&) = delete;
  shifts::UtcTime utc_now() const override { return now; }

  std::int64_t write(logbook::EntryKind kind, const std::string& body,
                     std::optional<std::int64_t> about = {}) {
    logbook::NewEntry entry;
    entry.kind = kind;
    entry.tank = "N-1";
    entry.by = "M. Okafor";
    entry.body = body;
    entry.about = about;
    return must(log->append(entry)).seq;
  }
  std::int64_t analysis(double nickel, double pH, const std::string& from = "titration") {
    return write(logbook::EntryKind::analysis, "{\"pH\":" + std::to_string(pH) +
                                                   ",\"results\":[{\"quantity\":\"Ni^2+\",\"value\":" +
                                                   std::to_string(nickel) + ",\"from\":\"" + from + "\"}]}");
  }
  hand_over::HandOver tell() {
    const auto shift = must(hand_over::latest_shift(calendar, now));
    return must(hand_over::hand_over(*log, calendar, shift, {tank}, now));
  }
};

}  // namespace

TEST_CASE("a hand-over tells what its shift logged, left open and found out of its window",
          "[unit][hand_over]") {
  using enum logbook::EntryKind;
  Night night;
  night.now = night.begin - hours(1);
  night.write(note, "{}");  // of the shift before
  night.now = night.begin + hours(1);
  const auto found = night.analysis(66, 4.2);
  const auto slip_seq = night.write(slip, "{}");
  auto told = night.tell();
  CHECK(told.shift.label == "2026-03-02 night");
  CHECK(told.entries.size() == 2);
  REQUIRE(told.open_slips.size() == 1);
  CHECK(told.open_slips[0].slip.seq == slip_seq);
  REQUIRE(told.out_of_window.size() == 1);
  CHECK(told.out_of_window[0].quantity == "Ni^2+");
  CHECK(told.out_of_window[0].found == 66);
  CHECK(told.out_of_window[0].seq == found);
  CHECK(told.head->seq == slip_seq);

  night.write(slip_closed, R"({"outcome":"done"})", slip_seq);
  night.analysis(74, 4.2);
  told = night.tell();
  CHECK(told.open_slips.empty());
  CHECK(told.out_of_window.empty());

  night.now = night.begin + hours(9);  // the next morning
  told = night.tell();
  CHECK(told.shift.label == "2026-03-03 early");
  CHECK(told.entries.empty());
}

TEST_CASE("what falls due follows the last analysis that stands", "[unit][hand_over]") {
  Night night;
  const auto due = [&] {
    std::vector<std::string> all;
    for (const auto& one : night.tell().due) all.push_back(one.what + (one.last ? "" : ", never done"));
    return all;
  };
  CHECK(due() == std::vector<std::string>{"analysis of Ni^2+, never done", "analysis of pH, never done"});
  night.analysis(74, 4.2, "book");  // the nickel was carried over, not analysed
  CHECK(due() == std::vector<std::string>{"analysis of Ni^2+, never done", "analysis of pH"});
  const auto real = night.analysis(74, 4.2);
  CHECK(due() == std::vector<std::string>{"analysis of pH"});
  night.now += hours(20);
  CHECK(night.tell().due[0].overdue);
  night.write(logbook::EntryKind::correction, R"({"reason":"another tank's sample"})", real);
  CHECK(due() == std::vector<std::string>{"analysis of pH", "analysis of Ni^2+, never done"});
}
