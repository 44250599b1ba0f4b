// SPDX-License-Identifier: Apache-2.0
#include "pretreatment/savitzky_golay.hpp"

#include <fmt/format.h>

#include <cmath>

#include "base/error.hpp"
#include "numerics/decompositions.hpp"

namespace bandwright {
namespace {

[[noreturn]] void refuse(const char* field, const std::string& message) {
  throw Error(ErrorKind::Usage, message, {.file = {}, .line = 0, .field = field, .hint = {}});
}

/// d^order/dx^order x^power at x.
double monomial_derivative(Index power, Index order, double x) {
  double factor = 1.0;
  for (Index k = 0; k < order; ++k) factor *= static_cast<double>(power - k);
  return power < order ? 0.0 : factor * std::pow(x, static_cast<double>(power - order));
}

}  // namespace

void check_step(const SavitzkyGolay& options) {
  check_options(options);
  if (options.points % 2 == 0) refuse("points", fmt::format("{} must be odd", options.points));
  if (options.polynomial >= options.points)
    refuse("polynomial", fmt::format("{} must be below points ({})", options.polynomial, options.points));
  if (options.derivative > options.polynomial)
    refuse("derivative",
           fmt::format("{} must be at most polynomial ({})", options.derivative, options.polynomial));
}

Matrix savitzky_golay_weights(const SavitzkyGolay& options) {
  check_step(options);
  const Index m = options.points;
  const Index degree = options.polynomial;
  const double half = static_cast<double>(options.half_width());
  const auto scaled = [&](Index i) { return (static_cast<double>(i) - half) / half; };

  // Powers of positions in [-1, 1] keep the Vandermonde matrix well conditioned.
  Matrix powers(m, degree + 1);
  Matrix derivatives(m, degree + 1);
  for (Index i = 0; i < m; ++i) {
    for (Index k = 0; k <= degree; ++k) {
      powers(i, k) = monomial_derivative(k, 0, scaled(i));
      derivatives(i, k) = monomial_derivative(k, options.derivative, scaled(i));
    }
  }
  const Matrix fit = least_squares(powers, Matrix::Identity(m, m));  // ordinates -> polynomial
  const double unit_spacing = std::pow(half, -static_cast<double>(options.derivative));
  return derivatives.lazyProduct(fit) * unit_spacing;
}

}  // namespace bandwright
