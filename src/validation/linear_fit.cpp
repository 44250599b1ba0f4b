// SPDX-License-Identifier: Apache-2.0
#include "validation/linear_fit.hpp"

#include <fmt/format.h>

#include <cmath>

#include "base/error.hpp"
#include "numerics/decompositions.hpp"
#include "numerics/products.hpp"
#include "numerics/sums.hpp"

namespace bandwright {
namespace {

/// RSS computed from the residuals themselves, never as a difference of large sums.
double residual_sum_of_squares(const Matrix& X, const Vector& b, const Vector& y) {
  const Vector residuals = y - X.lazyProduct(b);
  return squared_norm(values_of(residuals));
}

}  // namespace

LinearFit fit_linear(const MatrixView& X, const VectorView& y) {
  const Index n = X.rows();
  const Index p = X.cols();
  if (y.size() != n || n <= p || p == 0)
    throw Error(ErrorKind::Input,
                fmt::format("a least-squares fit of {} coefficients needs more than {} values; there are {}",
                            p, p, n));
  Vector lengths(p);
  Matrix scaled(n, p);
  for (Index j = 0; j < p; ++j) {
    const Vector column = X.col(j);
    lengths[j] = std::sqrt(squared_norm(values_of(column)));
    if (lengths[j] == 0.0)
      throw Error(ErrorKind::Numerical, "the columns of a least-squares problem are linearly dependent");
    scaled.col(j) = column / lengths[j];
  }
  const Vector target = y;
  const auto solve = [&](const Vector& right_side) {
    return Vector(least_squares(scaled, Matrix(right_side)).col(0));
  };
  Vector b = solve(target);
  b += solve(target - scaled.lazyProduct(b));  // one step of refinement
  // The columns have length 1, so X'X of a few of them is well conditioned enough for standard errors.
  const Matrix inverse = least_squares(smaller_gram(scaled), Matrix::Identity(p, p));

  LinearFit fit;
  fit.degrees_of_freedom = static_cast<double>(n - p);
  fit.rss = residual_sum_of_squares(scaled, b, target);
  fit.residual_sd = std::sqrt(fit.rss / fit.degrees_of_freedom);
  fit.coefficients = b.cwiseQuotient(lengths);
  fit.standard_errors.resize(p);
  for (Index j = 0; j < p; ++j)
    fit.standard_errors[j] = fit.residual_sd * std::sqrt(inverse(j, j)) / lengths[j];
  return fit;
}

LinearFit fit_line(const VectorView& x, const VectorView& y) {
  Matrix X(x.size(), 2);
  X.col(0).setOnes();
  X.col(1) = x;
  return fit_linear(X, y);
}

}  // namespace bandwright
