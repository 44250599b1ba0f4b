// SPDX-License-Identifier: Apache-2.0
#include "numerics/sums.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <cstring>

#include "support/close.hpp"
#include "support/random_data.hpp"

namespace bandwright {
namespace {

// Lengths around the lane count, where a remainder is easily lost.
const std::vector<Index> kLengths{0, 1, 2, 3, 7, 8, 9, 15, 16, 17, 100, 1001};

std::span<const double> shifted(std::vector<double>& room, const Vector& values, std::size_t by) {
  std::copy(values.begin(), values.end(), room.begin() + static_cast<std::ptrdiff_t>(by));
  return {room.data() + by, static_cast<std::size_t>(values.size())};
}

TEST(Sums, AgreeWithLongDouble) {
  for (const Index n : kLengths) {
    const Vector x = random_vector(1, n);
    const Vector y = random_vector(2, n);
    long double total = 0.0L;
    long double product = 0.0L;
    for (Index i = 0; i < n; ++i) {
      total += x[i];
      product += static_cast<long double>(x[i]) * y[i];
    }
    const Tolerance rounding{
        .absolute = 1.2e-16 * static_cast<double>(n)};  // half a unit for each of n terms of size 1
    EXPECT_TRUE(expect_close(sum(values_of(x)), static_cast<double>(total), rounding)) << n;
    EXPECT_TRUE(expect_close(dot(values_of(x), values_of(y)), static_cast<double>(product), rounding)) << n;
    EXPECT_EQ(squared_norm(values_of(x)), dot(values_of(x), values_of(x)));
  }
}

TEST(Sums, SameBitsWhereverTheDataLie) {
  for (const Index n : kLengths) {
    const Vector x = random_vector(3, n);
    const Vector y = random_vector(4, n);
    std::vector<double> room_x(static_cast<std::size_t>(n) + 8);
    std::vector<double> room_y(static_cast<std::size_t>(n) + 8);
    for (std::size_t by = 0; by < 8; ++by) {
      const auto xs = shifted(room_x, x, by);
      const auto ys = shifted(room_y, y, 7 - by);
      EXPECT_EQ(sum(xs), sum(values_of(x)));
      EXPECT_EQ(dot(xs, ys), dot(values_of(x), values_of(y)));
      if (n > 1) {
        EXPECT_EQ(standard_deviation(xs), standard_deviation(values_of(x)));
      }
    }
  }
}

TEST(Sums, EveryTermCountsOnce) {  // powers of two add without rounding: the sum names its terms
  for (Index n = 1; n <= 50; ++n) {
    Vector x(n);
    for (Index i = 0; i < n; ++i) x[i] = std::ldexp(1.0, static_cast<int>(i));
    EXPECT_EQ(sum(values_of(x)), std::ldexp(1.0, static_cast<int>(n)) - 1.0);
  }
}

TEST(Sums, MeanAndSpreadByHand) {
  const Vector x = (Vector(4) << 2, 4, 4, 6).finished();  // deviations -2 0 0 2
  EXPECT_EQ(mean(values_of(x)), 4.0);
  EXPECT_EQ(sum_of_squared_deviations(values_of(x)), 8.0);
  EXPECT_EQ(standard_deviation(values_of(x)), std::sqrt(8.0 / 3.0));
}

// NIST Statistical Reference Datasets, NumAcc4 (from memory): 1001 values 10000000.2, then 10000000.1 and
// 10000000.3 in turn; mean 10000000.2 and standard deviation 0.1 exactly.
TEST(Sums, LargeOffsetCostsNoDigits) {
  Vector x(1001);
  x[0] = 10000000.2;
  for (Index i = 1; i < 1001; ++i) x[i] = i % 2 == 1 ? 10000000.1 : 10000000.3;
  EXPECT_TRUE(expect_close(mean(values_of(x)), 10000000.2, {.relative = 1e-15}));
  // The data themselves are rounded to 1e-9 when read, a part in 1e8 of the deviation.
  EXPECT_TRUE(expect_close(standard_deviation(values_of(x)), 0.1, {.relative = 1e-8}));
}

TEST(Sums, WhatIsUndefinedIsNotANumber) {
  EXPECT_EQ(sum({}), 0.0);
  EXPECT_TRUE(std::isnan(mean({})));
  EXPECT_TRUE(std::isnan(sum_of_squared_deviations({})));
  const double one = 3.0;
  EXPECT_EQ(mean({&one, 1}), 3.0);
  EXPECT_EQ(sum_of_squared_deviations({&one, 1}), 0.0);
  EXPECT_TRUE(std::isnan(standard_deviation({&one, 1})));
}

TEST(Sums, RowOfAViewIsThatRow) {
  const Matrix X = random_matrix(5, 4, 6);
  const MatrixView inner = X.block(1, 2, 3, 3);
  EXPECT_EQ(row_of(inner, 1)[0], X(2, 2));
  EXPECT_EQ(row_of(inner, 2)[2], X(3, 4));
  EXPECT_EQ(row_of(inner, 0).size(), 3u);
}

}  // namespace
}  // namespace bandwright
