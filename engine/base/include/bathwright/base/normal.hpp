// Random deviates that are the same on every platform: std::normal_distribution is not. Not for: secrets.
#pragma once

#include <cmath>
#include <cstdint>
#include <numbers>
#include <random>

namespace bathwright {

class Normal {
 public:
  explicit Normal(std::uint64_t seed) : random_(seed) {}

  /// Mean 0, standard deviation 1. Source: Box & Muller 1958, Ann. Math. Stat. 29:610.
  double operator()() {
    const double u = uniform(), v = uniform();
    return std::sqrt(-2 * std::log(u)) * std::cos(2 * std::numbers::pi * v);
  }

 private:
  double uniform() { return (static_cast<double>(random_() >> 11) + 0.5) * 0x1p-53; }
  std::mt19937_64 random_;
};

}  // namespace bathwright
