// SPDX-License-Identifier: Apache-2.0
#include "numerics/sums.hpp"

#include <array>
#include <cmath>
#include <limits>

namespace bandwright {
namespace {

constexpr std::size_t kLanes = 8;

double lanes_total(const std::array<double, kLanes>& lane) {
  return ((lane[0] + lane[1]) + (lane[2] + lane[3])) + ((lane[4] + lane[5]) + (lane[6] + lane[7]));
}

/// sum of term(i) for i in 0 .. n - 1; lane i % 8 gets term i, whole rounds first, then the rest.
template <class Term>
double laned_sum(std::size_t n, Term&& term) {
  std::array<double, kLanes> lane{};
  const std::size_t whole = n - n % kLanes;
  for (std::size_t i = 0; i < whole; i += kLanes)
    for (std::size_t k = 0; k < kLanes; ++k) lane[k] += term(i + k);
  for (std::size_t i = whole; i < n; ++i) lane[i - whole] += term(i);
  return lanes_total(lane);
}

}  // namespace

double sum(std::span<const double> x) {
  return laned_sum(x.size(), [&](std::size_t i) { return x[i]; });
}

double dot(std::span<const double> x, std::span<const double> y) {
  return laned_sum(x.size(), [&](std::size_t i) { return x[i] * y[i]; });
}

double squared_norm(std::span<const double> x) { return dot(x, x); }

double mean(std::span<const double> x) {
  if (x.empty()) return std::numeric_limits<double>::quiet_NaN();
  return sum(x) / static_cast<double>(x.size());
}

double sum_of_squared_deviations(std::span<const double> x) {
  if (x.empty()) return std::numeric_limits<double>::quiet_NaN();
  const double m = mean(x);
  const double squares = laned_sum(x.size(), [&](std::size_t i) { return (x[i] - m) * (x[i] - m); });
  const double drift = laned_sum(x.size(), [&](std::size_t i) { return x[i] - m; });
  return squares - drift * drift / static_cast<double>(x.size());
}

double standard_deviation(std::span<const double> x) {
  if (x.size() < 2) return std::numeric_limits<double>::quiet_NaN();
  return std::sqrt(sum_of_squared_deviations(x) / static_cast<double>(x.size() - 1));
}

}  // namespace bandwright
