// Patterns in a row of values that chance seldom makes.
#pragma once

#include <cstddef>
#include <span>
#include <string>
#include <vector>

namespace bathwright::trends {

/// A pattern that a rule names. One that goes on is one finding with all its points.
struct Finding {
  std::string rule;                 ///< "Western Electric 2, Nelson 5"
  std::string what;                 ///< "2 of 3 in a row more than 2 sigma above the mean"
  std::vector<std::size_t> points;  ///< places in the row, rising: those that make the pattern
};

/// By all rules of both sets, which share some. Beyond means farther out than, on one side; a value on the
/// mean is on neither side, equal neighbours neither rise nor fall. Without spread (sigma 0) nothing is
/// found.
///   Western Electric, Statistical Quality Control Handbook, 1956:
///     1  one beyond 3 sigma                3  four of five beyond 1 sigma
///     2  two of three beyond 2 sigma       4  eight in a row on one side
///   L. S. Nelson, Journal of Quality Technology 16 (1984) 237:
///     1  one beyond 3 sigma                5  two of three beyond 2 sigma
///     2  nine in a row on one side         6  four of five beyond 1 sigma
///     3  six in a row rising or falling    7  fifteen in a row within 1 sigma
///     4  fourteen in a row up and down     8  eight in a row beyond 1 sigma, on both sides
[[nodiscard]] std::vector<Finding> run_rules(std::span<const double> values, double mean, double sigma);

}  // namespace bathwright::trends
