#include "mixing_terms.hpp"

#include <algorithm>
#include <array>
#include <cassert>
#include <cmath>

namespace bathwright::activity {
namespace {

LogJ from_series(double ln_x) {
  const double x = std::exp(ln_x);
  const JFunction J = j_function(x);
  return {J.value, x * J.first, x * (J.first + x * J.second)};
}

constexpr double step = 0.1, lowest = -8;
constexpr std::size_t intervals = 160;
using Quintic = std::array<double, 6>;

const std::array<Quintic, intervals>& table() {
  static const auto built = [] {
    std::array<Quintic, intervals> quintics;
    LogJ left = from_series(lowest);
    for (std::size_t k = 0; k < intervals; ++k) {
      const LogJ right = from_series(lowest + step * static_cast<double>(k + 1));
      const double a0 = left.value, a1 = left.first * step, a2 = left.second * step * step / 2;
      // What is left for the three highest terms at the right end, in value, slope and curvature.
      const double v = right.value - a0 - a1 - a2, s = right.first * step - a1 - 2 * a2,
                   c = right.second * step * step - 2 * a2;
      quintics[k] = {a0, a1, a2, 10 * v - 4 * s + c / 2, -15 * v + 7 * s - c, 6 * v - 3 * s + c / 2};
      left = right;
    }
    return quintics;
  }();
  return built;
}

LogJ look_up(const std::array<Quintic, intervals>& quintics, double ln_x) {
  const double at = (ln_x - lowest) / step;
  if (!(at >= 0 && at < static_cast<double>(intervals))) return from_series(ln_x);
  const auto k = static_cast<std::size_t>(at);
  const double u = at - static_cast<double>(k);
  const auto& [a0, a1, a2, a3, a4, a5] = quintics[k];
  return {a0 + u * (a1 + u * (a2 + u * (a3 + u * (a4 + u * a5)))),
          (a1 + u * (2 * a2 + u * (3 * a3 + u * (4 * a4 + u * 5 * a5)))) / step,
          (2 * a2 + u * (6 * a3 + u * (12 * a4 + u * 20 * a5))) / (step * step)};
}

}  // namespace

LogJ j_of_log(double ln_x) { return look_up(table(), ln_x); }

MixingTerms::MixingTerms(std::span<const int> charges, double a_phi) {
  const auto product = [&](int zz) {
    const double ln = std::log(6 * zz * a_phi);
    const auto found = std::find(ln_factor_.begin(), ln_factor_.end(), ln);
    if (found == ln_factor_.end()) ln_factor_.push_back(ln);
    return static_cast<std::uint8_t>(std::find(ln_factor_.begin(), ln_factor_.end(), ln) -
                                     ln_factor_.begin());
  };
  for (std::size_t i = 0; i < charges.size(); ++i)
    for (std::size_t j = i + 1; j < charges.size(); ++j) {
      const int z = charges[i], y = charges[j];
      if (z * y <= 0) continue;
      pairs_.push_back({static_cast<std::uint8_t>(i), static_cast<std::uint8_t>(j)});
      products_.push_back({product(z * y), product(z * z), product(y * y), static_cast<double>(z * y)});
    }
  assert(pairs_.size() <= max_pairs && ln_factor_.size() <= max_products);
}

void MixingTerms::evaluate(double I, std::span<MixingTerm> term) const {
  std::array<LogJ, max_products> J;
  const auto& quintics = table();
  const double half_ln_I = std::log(I) / 2;
  for (std::size_t k = 0; k < ln_factor_.size(); ++k) J[k] = look_up(quintics, ln_factor_[k] + half_ln_I);
  for (std::size_t k = 0; k < pairs_.size(); ++k) {
    const auto& [ij, ii, jj, zz] = products_[k];
    const double j = J[ij].value - (J[ii].value + J[jj].value) / 2;
    const double j1 = J[ij].first - (J[ii].first + J[jj].first) / 2;  // to t = ln x: dt = dI / (2 I)
    const double j2 = J[ij].second - (J[ii].second + J[jj].second) / 2;
    const double q = zz / (4 * I);
    term[k] = {q * j, q / I * (j1 / 2 - j), q / (I * I) * (2 * j - 1.5 * j1 + j2 / 4)};
  }
}

}  // namespace bathwright::activity
