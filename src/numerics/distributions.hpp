// SPDX-License-Identifier: Apache-2.0
#pragma once

/// Quantiles and tail probabilities, by Boost.Math. Degrees of freedom are positive and may be
/// fractions; 0 < p < 1. Every function throws Error(Numerical) naming its arguments when they are
/// outside these ranges or the result does not exist.

namespace bandwright {

/// x with P(X <= x) = p.
[[nodiscard]] double normal_quantile(double p);
[[nodiscard]] double t_quantile(double p, double df);
[[nodiscard]] double chi_squared_quantile(double p, double df);
[[nodiscard]] double f_quantile(double p, double df1, double df2);
[[nodiscard]] double beta_quantile(double p, double a, double b);

/// x with P(X > x) = tail; keeps its digits for tails far below 1e-16.
[[nodiscard]] double t_upper_quantile(double tail, double df);
[[nodiscard]] double chi_squared_upper_quantile(double tail, double df);
[[nodiscard]] double f_upper_quantile(double tail, double df1, double df2);

/// P(X > x).
[[nodiscard]] double normal_upper_tail(double x);
[[nodiscard]] double t_upper_tail(double x, double df);
[[nodiscard]] double f_upper_tail(double x, double df1, double df2);

/// Half-width factor of a two-sided interval: t with P(|T| <= t) = level.
[[nodiscard]] double t_two_sided(double level, double df);

}  // namespace bandwright
