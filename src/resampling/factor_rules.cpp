// SPDX-License-Identifier: Apache-2.0
#include "resampling/factor_rules.hpp"

#include <cmath>

#include "base/error.hpp"
#include "numerics/distributions.hpp"
#include "numerics/sums.hpp"

namespace bandwright {
namespace {

constexpr double kEqual = 1e-9;             // values this close, relative, count as equal
constexpr double kFTestProbability = 0.75;  // alpha = 0.25, Haaland and Thomas

Vector column(const MatrixView& matrix, Index k) { return matrix.col(k); }

Vector press_of(const MatrixView& squared_errors) {
  Vector press(squared_errors.cols());
  for (Index k = 0; k < press.size(); ++k) press[k] = sum(values_of(column(squared_errors, k)));
  return press;
}

/// 0-based position of the first value that is not above `limit`, equality within kEqual.
Index first_within(const Vector& values, double limit) {
  for (Index k = 0; k < values.size(); ++k)
    if (values[k] <= limit * (1.0 + kEqual)) return k;
  throw Error(ErrorKind::Internal, "no number of factors meets a limit that one of them set");
}

Index first_below_f_limit(const Vector& press, Index minimum, double samples) {
  const double limit = f_quantile(kFTestProbability, samples, samples);
  for (Index k = 0; k < minimum; ++k)
    if (press[k] < limit * press[minimum]) return k;
  return minimum;
}

}  // namespace

Index choose_factors(FactorRule rule, const MatrixView& squared_errors) {
  const Index n = squared_errors.rows();
  if (n < 2 || squared_errors.cols() < 1 || !squared_errors.allFinite())
    throw Error(ErrorKind::Numerical, "a factor rule needs the held-out errors of at least two samples");
  const Vector press = press_of(squared_errors);
  const Index minimum = first_within(press, press.minCoeff());
  switch (rule) {
    case FactorRule::Minimum:
      return minimum + 1;
    case FactorRule::FTest:
      return first_below_f_limit(press, minimum, static_cast<double>(n)) + 1;
    case FactorRule::OneStandardError: {
      const double count = static_cast<double>(n);
      const double standard_error =
          standard_deviation(values_of(column(squared_errors, minimum))) / std::sqrt(count);
      return first_within(press, press[minimum] + standard_error * count) + 1;
    }
  }
  throw Error(ErrorKind::Internal, "a factor rule is not implemented");
}

}  // namespace bandwright
