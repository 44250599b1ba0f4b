// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <span>

#include "base/matrix.hpp"

/// Limits for Hotelling's T2 and for the squared spectral residual Q. `significance` is the chance
/// that a good spectrum exceeds the limit.

namespace bandwright {

/// T2 of a new spectrum: k (n^2 - 1) / (n (n - k)) F(1 - a; k, n - k), n standards, k factors.
/// Not a number when n <= k. Source: Tracy, Young and Mason, J. Qual. Technol. 24 (1992) 88.
[[nodiscard]] double t2_limit_new(Index samples, Index factors, double significance);

/// T2 of a standard of the calibration itself: ((n - 1)^2 / n) Beta(1 - a; k/2, (n - k - 1)/2).
/// Not a number when n <= k + 1. Source: the same.
[[nodiscard]] double t2_limit_calibration(Index samples, Index factors, double significance);

/// Q by matching the mean m and variance v of given Q values to g chi-squared(h): g = v / 2m,
/// h = 2 m^2 / v, v with n - 1. Not a number for fewer than two values or without spread.
/// Source: Box, Ann. Math. Stat. 25 (1954) 290; Nomikos and MacGregor, Technometrics 37 (1995) 41.
[[nodiscard]] double q_limit_from_values(std::span<const double> q, double significance);

/// The same from residual eigenvalues: g = theta2 / theta1, h = theta1^2 / theta2.
[[nodiscard]] double q_limit_box(std::span<const double> residual_eigenvalues, double significance);

/// Q by the normal approximation of Jackson and Mudholkar, Technometrics 21 (1979) 341, from the
/// eigenvalues of the residual covariance matrix. Not a number without residual.
[[nodiscard]] double q_limit_jackson_mudholkar(std::span<const double> residual_eigenvalues,
                                               double significance);

/// Eigenvalues of E'E / (samples - 1), the non-zero ones by way of the smaller Gram matrix. E: residuals of
/// the standards (n x p), rows already multiplied by the square roots of their weights.
[[nodiscard]] Vector residual_eigenvalues(const MatrixView& residuals, Index samples);

}  // namespace bandwright
