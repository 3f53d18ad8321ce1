// Figures about values against what is asked of them, and about the laboratory that finds them.
#pragma once

#include <optional>
#include <span>
#include <utility>

namespace bathwright::trends {

/// How well values stay inside limits: min((high - mean), (mean - low)) / (3 sigma), over the limits that are
/// given; negative with the mean outside. Nothing without a limit or without spread. Source: common practice;
/// the index Cpk of statistical process control.
[[nodiscard]] std::optional<double> capability(double mean, double sigma, std::optional<double> low,
                                               std::optional<double> high);

/// Standard deviation of one finding, from samples that were analysed twice: sqrt(sum d^2 / 2n), in the unit
/// of the values. Nothing without a pair. Source: ISO 5725-2, repeatability of pairs (from memory).
[[nodiscard]] std::optional<double> precision_of(std::span<const std::pair<double, double>> pairs);

/// How far each value resembles the one before, -1 to 1: sum of products of neighbours' deviations from the
/// mean over the sum of squares. Nothing with fewer than three values or without spread. Source: Box and
/// Jenkins, Time Series Analysis, the autocorrelation at lag one (from memory).
[[nodiscard]] std::optional<double> resemblance(std::span<const double> values);

}  // namespace bathwright::trends
