#include <atomic>
#include <catch2/catch.hpp>
#include <chrono>

#include "model/latest_job.hpp"

using bathwright::desktop::LatestJob;
using namespace std::chrono_literals;

namespace {

template <class Condition>
bool soon(Condition condition) {
  for (int i = 0; i < 2000 && !condition(); ++i) std::this_thread::sleep_for(1ms);
  return condition();
}

}  // namespace

TEST_CASE("only the newest question is answered", "[unit][desktop]") {
  std::atomic<int> begun = 0, told = 0;
  LatestJob<int, int> job(
      [&](int question, const std::stop_token& stop, const auto& give) {
        ++begun;
        while (question == 1 && !stop.stop_requested()) std::this_thread::sleep_for(1ms);
        give(10 * question);
      },
      [&] { ++told; });
  job.ask(1);
  REQUIRE(soon([&] { return begun == 1; }));
  job.ask(2);
  job.ask(3);
  REQUIRE(soon([&] { return told >= 1 && !job.working(); }));
  CHECK(job.take() == 30);
  CHECK_FALSE(job.take().has_value());
}

TEST_CASE("a better answer may follow a first one", "[unit][desktop]") {
  std::atomic<bool> go_on = false;
  LatestJob<int, int> job(
      [&](int question, const std::stop_token&, const auto& give) {
        give(question);
        while (!go_on) std::this_thread::sleep_for(1ms);
        give(question + 1);
      },
      [] {});
  job.ask(5);
  std::optional<int> first;
  REQUIRE(soon([&] { return first || (first = job.take()); }));
  CHECK(first == 5);
  CHECK(job.working());
  go_on = true;
  REQUIRE(soon([&] { return !job.working(); }));
  CHECK(job.take() == 6);
}

TEST_CASE("the end of the program stops what runs", "[unit][desktop]") {
  std::atomic<bool> begun = false, stopped = false;
  {
    LatestJob<int, int> job(
        [&](int, const std::stop_token& stop, const auto&) {
          begun = true;
          while (!stop.stop_requested()) std::this_thread::sleep_for(1ms);
          stopped = true;
        },
        [] {});
    job.ask(1);
    REQUIRE(soon([&] { return begun.load(); }));
  }
  CHECK(stopped);
}
