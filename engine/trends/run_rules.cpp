#include "bathwright/trends/run_rules.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

namespace bathwright::trends {
namespace {

class Search {
 public:
  Search(std::span<const double> values, double mean, double sigma) {
    for (const double value : values) z_.push_back((value - mean) / sigma);
  }

  std::vector<Finding> run() {
    for (const double side : {1.0, -1.0}) {
      single(side);
      some_of(2, 3, 2, side, "Western Electric 2, Nelson 5");
      some_of(4, 5, 1, side, "Western Electric 3, Nelson 6");
      on_one_side(side);
      slope(side);
    }
    up_and_down();
    close_in();
    far_out();
    std::ranges::stable_sort(found_, {}, [](const Finding& finding) { return finding.points.front(); });
    return std::move(found_);
  }

 private:
  static std::string_view name(double side) { return side > 0 ? "above" : "below"; }

  void single(double side) {
    for (std::size_t i = 0; i < z_.size(); ++i)
      if (side * z_[i] > 3)
        found_.push_back({"Western Electric 1, Nelson 1",
                          fmt::format("one more than 3 sigma {} the mean", name(side)),
                          {i}});
  }

  /// At least `count` of `of` that follow each other.
  void some_of(std::size_t count, std::size_t of, double beyond, double side, const char* rule) {
    std::vector<std::size_t> out;
    for (std::size_t i = 0; i < z_.size(); ++i)
      if (side * z_[i] > beyond) out.push_back(i);
    Finding finding{
        rule,
        fmt::format("{} of {} in a row more than {:g} sigma {} the mean", count, of, beyond, name(side)),
        {}};
    const auto finish = [&] {
      if (!finding.points.empty()) found_.push_back(finding);
      finding.points.clear();
    };
    for (std::size_t last = count - 1; last < out.size(); ++last) {
      const std::size_t first = last + 1 - count;
      if (out[last] - out[first] >= of) continue;
      if (!finding.points.empty() && finding.points.back() < out[first]) finish();
      for (std::size_t i = first; i <= last; ++i)
        if (finding.points.empty() || finding.points.back() < out[i]) finding.points.push_back(out[i]);
    }
    finish();
  }

  /// Calls `found` with each longest stretch [first, end) of at least `least` points: `begins(i)`, point i
  /// may begin one; `goes_on(i)`, it belongs to the one that i - 1 is in. The last point of a stretch may be
  /// `shared`, as the first of the next.
  template <class Begins, class GoesOn, class Found>
  void stretches(std::size_t least, bool shared, Begins begins, GoesOn goes_on, Found found) {
    for (std::size_t first = 0; first < z_.size();) {
      if (!begins(first)) {
        ++first;
        continue;
      }
      std::size_t end = first + 1;
      while (end < z_.size() && goes_on(end)) ++end;
      if (end - first >= least) found(first, end);
      first = std::max(first + 1, shared ? end - 1 : end);
    }
  }

  void add(const char* rule, std::string what, std::size_t first, std::size_t end) {
    Finding finding{rule, std::move(what), {}};
    for (std::size_t i = first; i < end; ++i) finding.points.push_back(i);
    found_.push_back(std::move(finding));
  }

  void on_one_side(double side) {
    constexpr std::size_t western_electric = 8, nelson = 9;
    const auto there = [&](std::size_t i) { return side * z_[i] > 0; };
    stretches(western_electric, false, there, there, [&](std::size_t first, std::size_t end) {
      add(end - first >= nelson ? "Western Electric 4, Nelson 2" : "Western Electric 4",
          fmt::format("{} in a row {} the mean", end - first, name(side)), first, end);
    });
  }

  void slope(double side) {
    constexpr std::size_t least = 6;
    stretches(
        least, true, [](std::size_t) { return true; },
        [&](std::size_t i) { return side * (z_[i] - z_[i - 1]) > 0; },
        [&](std::size_t first, std::size_t end) {
          add("Nelson 3", fmt::format("{} in a row {}", end - first, side > 0 ? "rising" : "falling"), first,
              end);
        });
  }

  void up_and_down() {
    constexpr std::size_t least = 14;
    const auto step = [&](std::size_t i) { return z_[i] - z_[i - 1]; };
    std::size_t first = 0;
    for (std::size_t i = 1; i <= z_.size(); ++i) {
      const bool moves = i < z_.size() && step(i) != 0;
      if (moves && (i == first + 1 || step(i) * step(i - 1) < 0)) continue;
      if (i - first >= least)
        add("Nelson 4", fmt::format("{} in a row up and down by turns", i - first), first, i);
      first = moves ? i - 1 : i;
    }
  }

  void close_in() {
    constexpr std::size_t least = 15;
    const auto there = [&](std::size_t i) { return std::abs(z_[i]) < 1; };
    stretches(least, false, there, there, [&](std::size_t first, std::size_t end) {
      add("Nelson 7", fmt::format("{} in a row within 1 sigma of the mean", end - first), first, end);
    });
  }

  void far_out() {
    constexpr std::size_t least = 8;
    const auto there = [&](std::size_t i) { return std::abs(z_[i]) > 1; };
    stretches(least, false, there, there, [&](std::size_t first, std::size_t end) {
      const auto [low, high] = std::minmax_element(z_.begin() + static_cast<std::ptrdiff_t>(first),
                                                   z_.begin() + static_cast<std::ptrdiff_t>(end));
      if (*low < 0 && *high > 0)
        add("Nelson 8",
            fmt::format("{} in a row more than 1 sigma from the mean, on both sides", end - first), first,
            end);
    });
  }

  std::vector<double> z_;
  std::vector<Finding> found_;
};

}  // namespace

std::vector<Finding> run_rules(std::span<const double> values, double mean, double sigma) {
  if (!(sigma > 0)) return {};
  return Search(values, mean, sigma).run();
}

}  // namespace bathwright::trends
