// Symmetric matrices over kinds of solutes that are zero except for a block: what every cation does to every
// anion, say. Products and sums run along rows without branches, so that compilers use vector registers.
#pragma once

#include <cstddef>
#include <vector>

namespace bathwright::activity {

class BlockMatrix {
 public:
  /// value (n x n, row by row, symmetric): kept as its rows, each from its first to its last entry that is
  /// not zero.
  BlockMatrix(const std::vector<double>& value, std::size_t n);

  [[nodiscard]] bool empty() const { return rows_.empty(); }
  /// product += M x
  void multiply(const double* x, double* product) const;
  /// target (n x n) += factor M
  void add_to(double* target, double factor) const;

 private:
  struct Row {
    std::size_t row, first, count, at;  ///< at: of its first entry in value_
  };
  std::size_t n_;
  std::vector<Row> rows_;
  std::vector<double> value_;
};

inline BlockMatrix::BlockMatrix(const std::vector<double>& value, std::size_t n) : n_(n) {
  for (std::size_t row = 0; row < n; ++row) {
    std::size_t first = 0, last = n;
    while (first < n && value[row * n + first] == 0) ++first;
    while (last > first && value[row * n + last - 1] == 0) --last;
    if (first == last) continue;
    rows_.push_back({row, first, last - first, value_.size()});
    value_.insert(value_.end(), &value[row * n + first], &value[row * n + first] + (last - first));
  }
}

inline void BlockMatrix::multiply(const double* x, double* product) const {
  // Symmetric: the sum of its rows times x, each added along its length.
  for (const Row& row : rows_) {
    const double factor = x[row.row];
    if (factor == 0) continue;
    const double* from = &value_[row.at];
    double* to = product + row.first;
    for (std::size_t k = 0; k < row.count; ++k) to[k] += factor * from[k];
  }
}

inline void BlockMatrix::add_to(double* target, double factor) const {
  for (const Row& row : rows_) {
    const double* from = &value_[row.at];
    double* to = target + row.row * n_ + row.first;
    for (std::size_t k = 0; k < row.count; ++k) to[k] += factor * from[k];
  }
}

}  // namespace bathwright::activity
