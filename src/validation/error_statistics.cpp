// SPDX-License-Identifier: Apache-2.0
#include "validation/error_statistics.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <limits>

#include "base/error.hpp"
#include "base/number_text.hpp"
#include "numerics/distributions.hpp"
#include "numerics/sums.hpp"
#include "validation/linear_fit.hpp"

namespace bandwright {
namespace {

constexpr double kLevel = 0.95;
constexpr double kNone = std::numeric_limits<double>::quiet_NaN();

void check_sizes(const VectorView& reference, const VectorView& predicted, Index fewest) {
  if (reference.size() != predicted.size())
    throw Error(ErrorKind::Input, fmt::format("{} reference values, but {} predicted ones", reference.size(),
                                              predicted.size()));
  if (reference.size() < fewest)
    throw Error(ErrorKind::Input,
                fmt::format("predicted and reference values exist for {}; at least {} are needed",
                            counted(reference.size(), "sample", "samples"), fewest));
}

double spread(const VectorView& values) { return sum_of_squared_deviations(values_of(values)); }

/// sum (x - mean x)(y - mean y), as the polarisation of three spreads would lose digits.
double joint_spread(const VectorView& x, const VectorView& y) {
  const Vector dx = x.array() - mean(values_of(x));
  const Vector dy = y.array() - mean(values_of(y));
  return dot(values_of(dx), values_of(dy));
}

void add_bias_test(ErrorStatistics& s) {
  const auto n = static_cast<double>(s.n);
  s.bias_t_limit = t_two_sided(kLevel, n - 1.0);
  s.bias_limit = s.bias_t_limit * s.sep / std::sqrt(n);
  s.bias_t = s.sep > 0.0 ? std::abs(s.bias) * std::sqrt(n) / s.sep : kNone;
  s.bias_p = s.sep > 0.0 ? 2.0 * t_upper_tail(s.bias_t, n - 1.0) : kNone;
}

void add_slope_test(ErrorStatistics& s, const VectorView& reference, const VectorView& predicted) {
  s.slope = s.intercept = s.line_residual_sd = s.slope_t = s.slope_t_limit = s.slope_low = s.slope_high =
      kNone;
  if (s.n < 3 || !(spread(predicted) > 0.0)) return;
  const LinearFit line = fit_line(predicted, reference);
  s.intercept = line.coefficients[0];
  s.slope = line.coefficients[1];
  s.line_residual_sd = line.residual_sd;
  s.slope_t_limit = t_two_sided(kLevel, line.degrees_of_freedom);
  const double slope_error = line.standard_errors[1];
  s.slope_t = slope_error > 0.0 ? std::abs(s.slope - 1.0) / slope_error : kNone;
  s.slope_low = s.slope - s.slope_t_limit * slope_error;
  s.slope_high = s.slope + s.slope_t_limit * slope_error;
}

/// F of the hypothesis intercept 0, slope 1 for predicted on reference:
/// [n a^2 + 2 a (b - 1) sum x + (b - 1)^2 sum x^2] / (2 s^2).
void add_joint_test(ErrorStatistics& s, const VectorView& reference, const VectorView& predicted) {
  s.joint_f = s.joint_f_limit = kNone;
  if (s.n < 3 || !(spread(reference) > 0.0)) return;
  const LinearFit line = fit_line(reference, predicted);
  s.joint_f_limit = f_quantile(kLevel, 2.0, line.degrees_of_freedom);
  const Vector off = line.coefficients[0] + (line.coefficients[1] - 1.0) * reference.array();
  const double variance = line.residual_sd * line.residual_sd;
  if (variance > 0.0) s.joint_f = squared_norm(values_of(off)) / (2.0 * variance);
}

void add_agreement(ErrorStatistics& s, const VectorView& reference, const VectorView& predicted, double sse) {
  const auto n = static_cast<double>(s.n);
  const double s_rr = spread(reference);
  const double s_pp = spread(predicted);
  const double s_rp = joint_spread(reference, predicted);
  s.reference_sd = std::sqrt(s_rr / (n - 1.0));
  s.reference_min = reference.minCoeff();
  s.reference_max = reference.maxCoeff();
  s.r2 = s_rr > 0.0 ? 1.0 - sse / s_rr : kNone;
  s.correlation_squared = s_rr > 0.0 && s_pp > 0.0 ? s_rp * s_rp / (s_rr * s_pp) : kNone;
  s.concordance = 2.0 * s_rp / (s_rr + s_pp + n * s.bias * s.bias);
  s.rpd = s.sep > 0.0 ? s.reference_sd / s.sep : kNone;
  s.rer = s.sep > 0.0 ? (s.reference_max - s.reference_min) / s.sep : kNone;
}

}  // namespace

ErrorStatistics error_statistics(const VectorView& reference, const VectorView& predicted) {
  check_sizes(reference, predicted, 2);
  const Vector errors = predicted - reference;
  const double sse = squared_norm(values_of(errors));
  ErrorStatistics s;
  s.n = errors.size();
  s.rmsep = std::sqrt(sse / static_cast<double>(s.n));
  s.bias = mean(values_of(errors));
  s.sep = standard_deviation(values_of(errors));
  add_bias_test(s);
  add_slope_test(s, reference, predicted);
  add_joint_test(s, reference, predicted);
  add_agreement(s, reference, predicted, sse);
  return s;
}

double sep_limit(double sec, double sec_df, Index samples) {
  return sec * std::sqrt(f_quantile(kLevel, static_cast<double>(samples - 1), sec_df));
}

double equivalence_p(const ErrorStatistics& s, double margin) {
  if (!(s.sep > 0.0)) return std::abs(s.bias) < margin ? 0.0 : 1.0;
  const double nearest = (margin - std::abs(s.bias)) * std::sqrt(static_cast<double>(s.n)) / s.sep;
  return t_upper_tail(nearest, static_cast<double>(s.n - 1));
}

CorrectionTests correction_tests(const VectorView& reference, const VectorView& predicted) {
  check_sizes(reference, predicted, 3);
  const auto n = static_cast<double>(reference.size());
  const Vector errors = predicted - reference;
  CorrectionTests tests;
  tests.rss_none = squared_norm(values_of(errors));
  tests.rss_bias = spread(errors);
  tests.rss_slope = fit_line(predicted, reference).rss;
  tests.f_bias = (tests.rss_none - tests.rss_bias) / (tests.rss_bias / (n - 1.0));
  tests.f_bias_limit = f_quantile(kLevel, 1.0, n - 1.0);
  tests.f_slope = (tests.rss_bias - tests.rss_slope) / (tests.rss_slope / (n - 2.0));
  tests.f_slope_limit = f_quantile(kLevel, 1.0, n - 2.0);
  return tests;
}

}  // namespace bandwright
