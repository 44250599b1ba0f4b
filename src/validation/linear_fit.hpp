// SPDX-License-Identifier: Apache-2.0
#pragma once

#include "base/matrix.hpp"

namespace bandwright {

/// Ordinary least squares of y on the columns of a design matrix.
struct LinearFit {
  Vector coefficients;       ///< p
  Vector standard_errors;    ///< p
  double residual_sd = 0.0;  ///< sqrt(RSS / (n - p))
  double rss = 0.0;
  double degrees_of_freedom = 0.0;  ///< n - p
};

/// X: n x p, full rank, n > p; y: n. By QR with columns scaled to length 1.
/// Throws Error(Input) if the sizes do not fit, Error(Numerical) if columns are linearly dependent.
[[nodiscard]] LinearFit fit_linear(const MatrixView& X, const VectorView& y);

/// The straight line y = intercept + slope x: coefficients are {intercept, slope}.
[[nodiscard]] LinearFit fit_line(const VectorView& x, const VectorView& y);

}  // namespace bandwright
