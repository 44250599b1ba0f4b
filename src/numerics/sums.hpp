// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <span>

#include "base/matrix.hpp"

/// Sums in fixed lanes and index order: the same bits wherever the data lie in memory and however
/// the compiler vectorises. Eigen's own reductions change with alignment; use these for results.

namespace bandwright {

/// The values of a contiguous vector as a span, for the functions below.
[[nodiscard]] inline std::span<const double> values_of(const VectorView& v) {
  return {v.data(), static_cast<std::size_t>(v.size())};
}
/// The values of row i as a span.
[[nodiscard]] inline std::span<const double> row_of(const MatrixView& X, Index i) {
  return {X.data() + i * X.outerStride(), static_cast<std::size_t>(X.cols())};
}

[[nodiscard]] double sum(std::span<const double> x);
/// sum x_i y_i. Requires equal lengths.
[[nodiscard]] double dot(std::span<const double> x, std::span<const double> y);
[[nodiscard]] double squared_norm(std::span<const double> x);
/// Mean; not a number if empty.
[[nodiscard]] double mean(std::span<const double> x);
/// sum (x_i - mean)^2 by the corrected two-pass algorithm (Chan, Golub and LeVeque, Am. Stat. 37
/// (1983) 242, eq. 1.7).
[[nodiscard]] double sum_of_squared_deviations(std::span<const double> x);
/// Standard deviation with n - 1; not a number for fewer than two values.
[[nodiscard]] double standard_deviation(std::span<const double> x);

}  // namespace bandwright
