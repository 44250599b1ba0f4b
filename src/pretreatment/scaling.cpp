// SPDX-License-Identifier: Apache-2.0
#include "pretreatment/scaling.hpp"

#include <cmath>

#include "base/error.hpp"
#include "numerics/products.hpp"
#include "numerics/sums.hpp"

namespace bandwright {
namespace {

/// Column means of X under row weights d. The deviations from the first row are averaged, so that
/// a large common offset costs no digits.
Vector weighted_mean(const MatrixView& X, const VectorView& d, double total) {
  const Vector first = X.row(0).transpose();
  const Matrix deviations = X.rowwise() - first.transpose();
  return first + multiply_transposed(deviations, d) / total;
}

/// A spread below the rounding of the values themselves is no spread.
bool varies(double standard_deviation, double mean) {
  constexpr double kRounding = 1e-14;
  return standard_deviation > kRounding * std::abs(mean);
}

}  // namespace

Matrix FittedScaling::apply(const MatrixView& X) const {
  Matrix scaled(X.rows(), X.cols());
  for (Index i = 0; i < X.rows(); ++i)
    for (Index j = 0; j < X.cols(); ++j) scaled(i, j) = (X(i, j) - mean[j]) / scale[j];
  return scaled;
}

FittedScaling fit_scaling(Scaling scaling, const MatrixView& X, const VectorView& row_weights) {
  FittedScaling fitted{.mean = Vector::Zero(X.cols()), .scale = Vector::Ones(X.cols())};
  if (scaling == Scaling::None || X.rows() == 0) return fitted;
  const double total = sum(values_of(row_weights));
  fitted.mean = weighted_mean(X, row_weights, total);
  if (scaling == Scaling::Centre) return fitted;

  if (total <= 1.0) throw Error(ErrorKind::Numerical, "unit-variance scaling needs at least two samples");
  const Matrix squares = (X.rowwise() - fitted.mean.transpose()).array().square().matrix();
  const Vector variance = multiply_transposed(squares, row_weights) / (total - 1.0);
  for (Index j = 0; j < X.cols(); ++j) {
    const double deviation = std::sqrt(variance[j]);
    if (varies(deviation, fitted.mean[j])) fitted.scale[j] = deviation;
  }
  return fitted;
}

}  // namespace bandwright
