// Linear systems of the size of a bath (5 to 50 unknowns) with many right-hand sides, solved in place and
// without allocation. Rows are padded, so that every inner loop runs along a row.
#pragma once

#include <algorithm>
#include <cmath>
#include <cstddef>
#include <utility>

namespace bathwright::speciation {

/// A row length that keeps rows aligned to four doubles.
[[nodiscard]] constexpr std::size_t padded(std::size_t n) { return (n + 3) / 4 * 4; }

/// Gauss-Jordan elimination with partial pivoting of [M | B]: M is n x n, the row continues with the
/// right-hand sides to `width` columns in all; rows lie `stride` apart. On success the columns from n on hold
/// M^-1 B. False when M is singular to rounding.
inline bool eliminate(double* a, std::size_t n, std::size_t width, std::size_t stride) {
  for (std::size_t k = 0; k < n; ++k) {
    std::size_t pivot = k;
    double largest = std::abs(a[k * stride + k]);
    for (std::size_t r = k + 1; r < n; ++r)
      if (const double size = std::abs(a[r * stride + k]); size > largest) largest = size, pivot = r;
    if (!(largest > 1e-300) || !std::isfinite(largest)) return false;
    double* row = a + k * stride;
    if (pivot != k)
      for (std::size_t c = k; c < width; ++c) std::swap(row[c], a[pivot * stride + c]);
    const double scale = 1 / row[k];
    for (std::size_t r = k + 1; r < n; ++r) {
      double* other = a + r * stride;
      const double factor = other[k] * scale;
      if (factor == 0) continue;
      for (std::size_t c = k + 1; c < width; ++c) other[c] -= factor * row[c];
    }
  }
  for (std::size_t k = n; k-- > 0;) {
    double* row = a + k * stride;
    for (std::size_t r = k + 1; r < n; ++r) {
      const double factor = row[r];
      if (factor == 0) continue;
      const double* solved = a + r * stride;
      for (std::size_t c = n; c < width; ++c) row[c] -= factor * solved[c];
    }
    const double scale = 1 / row[k];
    for (std::size_t c = n; c < width; ++c) row[c] *= scale;
  }
  return true;
}

/// Cholesky solution of H y = g for a symmetric positive definite H (n x n, rows `stride` apart, lower half
/// used and overwritten); g becomes y. A pivot that rounding has pushed below `least` is raised to it (y is
/// then a descent direction all the same). False when a pivot is not positive.
inline bool solve_positive_definite(double* h, double* g, std::size_t n, std::size_t stride,
                                    double least = 0) {
  for (std::size_t k = 0; k < n; ++k) {
    double* row = h + k * stride;
    for (std::size_t c = 0; c <= k; ++c) {
      const double* other = h + c * stride;
      double sum = row[c];
      for (std::size_t i = 0; i < c; ++i) sum -= row[i] * other[i];
      if (c < k) {
        row[c] = sum * other[c];  // the diagonal holds its reciprocal
      } else {
        sum = std::max(sum, least);
        if (!(sum > 0)) return false;
        row[c] = 1 / std::sqrt(sum);
      }
    }
  }
  for (std::size_t k = 0; k < n; ++k) {
    double sum = g[k];
    for (std::size_t i = 0; i < k; ++i) sum -= h[k * stride + i] * g[i];
    g[k] = sum * h[k * stride + k];
  }
  for (std::size_t k = n; k-- > 0;) {
    double sum = g[k];
    for (std::size_t i = k + 1; i < n; ++i) sum -= h[i * stride + k] * g[i];
    g[k] = sum * h[k * stride + k];
  }
  return true;
}

}  // namespace bathwright::speciation
