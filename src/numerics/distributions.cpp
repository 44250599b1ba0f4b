// SPDX-License-Identifier: Apache-2.0
#include "numerics/distributions.hpp"

#include <fmt/format.h>

#include <boost/math/distributions/beta.hpp>
#include <boost/math/distributions/chi_squared.hpp>
#include <boost/math/distributions/fisher_f.hpp>
#include <boost/math/distributions/normal.hpp>
#include <boost/math/distributions/students_t.hpp>
#include <exception>
#include <stdexcept>

#include "base/error.hpp"

namespace bandwright {
namespace {

namespace bm = boost::math;

/// Runs the library call; its exceptions become ours and name what was asked.
template <class Call, class... Arguments>
double guarded(const char* name, Call&& call, Arguments... arguments) {
  try {
    return call();
  } catch (const std::exception&) {
    throw Error(ErrorKind::Numerical,
                fmt::format("{} does not exist for {}", name,
                            fmt::join(std::initializer_list<double>{arguments...}, ", ")));
  }
}

/// The same for a quantile: the library takes 0 and 1 as probabilities where the result is finite.
template <class Call, class... Arguments>
double guarded_quantile(const char* name, Call&& call, double p, Arguments... arguments) {
  const auto in_range = [&] {
    if (!(p > 0.0 && p < 1.0)) throw std::domain_error("not a probability");
    return call();
  };
  return guarded(name, in_range, p, arguments...);
}

/// By symmetry the median of F with equal degrees of freedom is 1. Said here because the root finder of
/// Boost 1.74 gives up on the median of F(10, 10); fifteen usual probabilities for all whole degrees up to
/// 150 showed no other case.
bool is_median_of_equals(double p, double df1, double df2) { return p == 0.5 && df1 == df2 && df1 > 0.0; }

}  // namespace

double normal_quantile(double p) {
  return guarded_quantile(
      "the normal quantile", [&] { return bm::quantile(bm::normal(), p); }, p);
}
double t_quantile(double p, double df) {
  return guarded_quantile(
      "the t quantile", [&] { return bm::quantile(bm::students_t(df), p); }, p, df);
}
double chi_squared_quantile(double p, double df) {
  return guarded_quantile(
      "the chi-squared quantile", [&] { return bm::quantile(bm::chi_squared(df), p); }, p, df);
}
double f_quantile(double p, double df1, double df2) {
  if (is_median_of_equals(p, df1, df2)) return 1.0;
  return guarded_quantile(
      "the F quantile", [&] { return bm::quantile(bm::fisher_f(df1, df2), p); }, p, df1, df2);
}
double beta_quantile(double p, double a, double b) {
  return guarded_quantile(
      "the beta quantile", [&] { return bm::quantile(bm::beta_distribution<>(a, b), p); }, p, a, b);
}

double t_upper_quantile(double tail, double df) {
  return guarded_quantile(
      "the t quantile", [&] { return bm::quantile(bm::complement(bm::students_t(df), tail)); }, tail, df);
}
double chi_squared_upper_quantile(double tail, double df) {
  return guarded_quantile(
      "the chi-squared quantile", [&] { return bm::quantile(bm::complement(bm::chi_squared(df), tail)); },
      tail, df);
}
double f_upper_quantile(double tail, double df1, double df2) {
  if (is_median_of_equals(tail, df1, df2)) return 1.0;
  return guarded_quantile(
      "the F quantile", [&] { return bm::quantile(bm::complement(bm::fisher_f(df1, df2), tail)); }, tail, df1,
      df2);
}

double normal_upper_tail(double x) {
  return guarded(
      "the normal tail", [&] { return bm::cdf(bm::complement(bm::normal(), x)); }, x);
}
double t_upper_tail(double x, double df) {
  return guarded(
      "the t tail", [&] { return bm::cdf(bm::complement(bm::students_t(df), x)); }, x, df);
}
double f_upper_tail(double x, double df1, double df2) {
  return guarded(
      "the F tail", [&] { return bm::cdf(bm::complement(bm::fisher_f(df1, df2), x)); }, x, df1, df2);
}

double t_two_sided(double level, double df) { return t_upper_quantile((1.0 - level) / 2.0, df); }

}  // namespace bandwright
