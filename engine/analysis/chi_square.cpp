#include "chi_square.hpp"

#include <cmath>
#include <numbers>

namespace bathwright::analysis {

double normal_tails(double value) { return std::erfc(std::abs(value) / std::numbers::sqrt2); }

double chi_square_tail(double value, int degrees_of_freedom) {
  if (degrees_of_freedom <= 0 || !(value > 0)) return 1;
  // Even: e^(-x/2) sum of (x/2)^r / r!;  odd: erfc(sqrt(x/2)) + sqrt(2x/pi) e^(-x/2) sum of x^r / (1 3 ..
  // 2r+1)
  const bool odd = degrees_of_freedom % 2 == 1;
  double term = odd ? std::sqrt(2 * value / std::numbers::pi) * std::exp(-value / 2) : std::exp(-value / 2);
  double sum = odd ? normal_tails(std::sqrt(value)) : 0;
  for (int next = odd ? 3 : 2; next <= degrees_of_freedom; next += 2) {
    sum += term;
    term *= value / next;
  }
  return sum;
}

}  // namespace bathwright::analysis
