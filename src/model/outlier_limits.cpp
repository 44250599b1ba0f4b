// SPDX-License-Identifier: Apache-2.0
#include "model/outlier_limits.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

#include "numerics/decompositions.hpp"
#include "numerics/distributions.hpp"
#include "numerics/products.hpp"
#include "numerics/sums.hpp"

namespace bandwright {
namespace {

constexpr double kNone = std::numeric_limits<double>::quiet_NaN();

/// theta_i = sum of the i-th powers of the eigenvalues.
struct Moments {
  double theta1 = 0.0;
  double theta2 = 0.0;
  double theta3 = 0.0;
};

Moments moments_of(std::span<const double> eigenvalues) {
  Moments m;
  for (const double value : eigenvalues) {
    m.theta1 += value;
    m.theta2 += value * value;
    m.theta3 += value * value * value;
  }
  return m;
}

}  // namespace

double t2_limit_new(Index samples, Index factors, double significance) {
  if (samples <= factors) return kNone;
  const auto n = static_cast<double>(samples);
  const auto k = static_cast<double>(factors);
  return k * (n * n - 1.0) / (n * (n - k)) * f_upper_quantile(significance, k, n - k);
}

double t2_limit_calibration(Index samples, Index factors, double significance) {
  if (samples <= factors + 1) return kNone;
  const auto n = static_cast<double>(samples);
  const auto k = static_cast<double>(factors);
  return (n - 1.0) * (n - 1.0) / n * beta_quantile(1.0 - significance, k / 2.0, (n - k - 1.0) / 2.0);
}

double q_limit_from_values(std::span<const double> q, double significance) {
  if (q.size() < 2) return kNone;
  const double m = mean(q);
  const double variance = sum_of_squared_deviations(q) / static_cast<double>(q.size() - 1);
  if (!(m > 0.0) || !(variance > 0.0)) return kNone;
  return variance / (2.0 * m) * chi_squared_upper_quantile(significance, 2.0 * m * m / variance);
}

double q_limit_box(std::span<const double> residual_eigenvalues, double significance) {
  const Moments m = moments_of(residual_eigenvalues);
  if (!(m.theta2 > 0.0)) return kNone;
  return m.theta2 / m.theta1 * chi_squared_upper_quantile(significance, m.theta1 * m.theta1 / m.theta2);
}

double q_limit_jackson_mudholkar(std::span<const double> residual_eigenvalues, double significance) {
  const Moments m = moments_of(residual_eigenvalues);
  if (!(m.theta2 > 0.0)) return kNone;
  const double h0 = 1.0 - 2.0 * m.theta1 * m.theta3 / (3.0 * m.theta2 * m.theta2);
  const double z = normal_quantile(1.0 - significance);
  const double base = z * std::sqrt(2.0 * m.theta2 * h0 * h0) / m.theta1 + 1.0 +
                      m.theta2 * h0 * (h0 - 1.0) / (m.theta1 * m.theta1);
  if (!(base > 0.0) || h0 == 0.0) return kNone;
  return m.theta1 * std::pow(base, 1.0 / h0);
}

Vector residual_eigenvalues(const MatrixView& residuals, Index samples) {
  const Matrix gram = smaller_gram(residuals) / static_cast<double>(samples - 1);
  // Rounding makes some zero eigenvalues slightly negative.
  return symmetric_eigenvalues(gram).cwiseMax(0.0);
}

}  // namespace bandwright
