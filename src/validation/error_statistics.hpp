// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <optional>

#include "base/matrix.hpp"

namespace bandwright {

/// What a set of predicted and reference values says about the error of prediction. Errors are
/// predicted - reference. Definitions and sources of each: model/catalogue.hpp.
/// Not a number = cannot be computed from so few samples.
struct ErrorStatistics {
  Index n = 0;
  double rmsep = 0.0;
  double sep = 0.0;
  double bias = 0.0;
  double bias_t = 0.0;
  double bias_t_limit = 0.0;
  double bias_p = 0.0;
  double bias_limit = 0.0;
  double slope = 0.0;  ///< reference on predicted
  double intercept = 0.0;
  double line_residual_sd = 0.0;
  double slope_t = 0.0;
  double slope_t_limit = 0.0;
  double slope_low = 0.0;
  double slope_high = 0.0;
  double joint_f = 0.0;  ///< predicted on reference: intercept 0 and slope 1 together
  double joint_f_limit = 0.0;
  double reference_sd = 0.0;
  double reference_min = 0.0;
  double reference_max = 0.0;
  double r2 = 0.0;
  double correlation_squared = 0.0;
  double rpd = 0.0;
  double rer = 0.0;
  double concordance = 0.0;
};

/// All tests at the two-sided 95 % level. reference, predicted: n >= 2 finite values.
/// Throws Error(Input) for fewer samples or sizes that differ.
[[nodiscard]] ErrorStatistics error_statistics(const VectorView& reference, const VectorView& predicted);

/// Unexplained-error limit SEC sqrt(F(0.95; n - 1, sec_df)): a larger SEP is more than chance.
/// Formula of ISO 12099 with n - 1, the strict form (from memory).
[[nodiscard]] double sep_limit(double sec, double sec_df, Index samples);

/// p-value of two one-sided t tests that the bias lies inside +-margin; below 0.05: shown.
[[nodiscard]] double equivalence_p(const ErrorStatistics& statistics, double margin);

/// Which correction the errors ask for, by nested F tests (common practice, from memory).
struct CorrectionTests {
  double rss_none = 0.0;
  double rss_bias = 0.0;
  double rss_slope = 0.0;  ///< slope and bias
  double f_bias = 0.0;
  double f_bias_limit = 0.0;   ///< F(0.95; 1, n - 1)
  double f_slope = 0.0;        ///< slope given bias
  double f_slope_limit = 0.0;  ///< F(0.95; 1, n - 2)
};
/// Needs n >= 3.
[[nodiscard]] CorrectionTests correction_tests(const VectorView& reference, const VectorView& predicted);

}  // namespace bandwright
