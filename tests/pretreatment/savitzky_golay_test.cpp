// SPDX-License-Identifier: Apache-2.0
#include "pretreatment/savitzky_golay.hpp"

#include <gtest/gtest.h>
// gtest first: the adapter needs it
#include <rapidcheck/gtest.h>

#include <cmath>

#include "base/error.hpp"
#include "support/close.hpp"
#include "support/error_text.hpp"

namespace bandwright {
namespace {

struct TableRow {
  Index points;
  std::vector<Index> degrees;  ///< of two degrees the middle row is the same
  Index derivative;
  std::vector<double> integers;  ///< from the first point; a short list is completed by symmetry
  double norm;
};

/// The whole row from its first half: even for even derivatives, odd for odd ones.
Vector whole_row(const TableRow& row) {
  Vector values(row.points);
  const double sign = row.derivative % 2 == 0 ? 1.0 : -1.0;
  for (Index i = 0; i < row.points; ++i) {
    const bool given = i < static_cast<Index>(row.integers.size());
    values[i] = given ? row.integers[static_cast<std::size_t>(i)]
                      : sign * row.integers[static_cast<std::size_t>(row.points - 1 - i)];
  }
  return values / row.norm;
}

// Savitzky and Golay, Anal. Chem. 36 (1964) 1627, with the corrections of Steinier, Termonia and Deltour,
// Anal. Chem. 44 (1972) 1906; every row recomputed by exact rational least squares.
const std::vector<TableRow> kTables{
    {5, {2, 3}, 0, {-3, 12, 17}, 35},
    {7, {2, 3}, 0, {-2, 3, 6, 7}, 21},
    {9, {2, 3}, 0, {-21, 14, 39, 54, 59}, 231},
    {11, {2, 3}, 0, {-36, 9, 44, 69, 84, 89}, 429},
    {13, {2, 3}, 0, {-11, 0, 9, 16, 21, 24, 25}, 143},
    {15, {2, 3}, 0, {-78, -13, 42, 87, 122, 147, 162, 167}, 1105},
    {25, {2, 3}, 0, {-253, -138, -33, 62, 147, 222, 287, 342, 387, 422, 447, 462, 467}, 5175},
    {7, {4, 5}, 0, {5, -30, 75, 131}, 231},
    {9, {4, 5}, 0, {15, -55, 30, 135, 179}, 429},
    {11, {4, 5}, 0, {18, -45, -10, 60, 120, 143}, 429},
    {5, {1, 2}, 1, {-2, -1, 0}, 10},
    {7, {1, 2}, 1, {-3, -2, -1, 0}, 28},
    {9, {1, 2}, 1, {-4, -3, -2, -1, 0}, 60},
    {11, {1, 2}, 1, {-5, -4, -3, -2, -1, 0}, 110},
    {5, {3, 4}, 1, {1, -8, 0}, 12},
    {7, {3, 4}, 1, {22, -67, -58, 0}, 252},
    {9, {3, 4}, 1, {86, -142, -193, -126, 0}, 1188},
    {11, {3, 4}, 1, {300, -294, -532, -503, -296, 0}, 5148},
    {5, {2, 3}, 2, {2, -1, -2}, 7},
    {7, {2, 3}, 2, {5, 0, -3, -4}, 42},
    {9, {2, 3}, 2, {28, 7, -8, -17, -20}, 462},
    {11, {2, 3}, 2, {15, 6, -1, -6, -9, -10}, 429},
    {5, {4}, 2, {-1, 16, -30}, 12},
    {7, {4, 5}, 2, {-13, 67, -19, -70}, 132},
    {9, {4, 5}, 2, {-126, 371, 151, -211, -370}, 1716},
    {11, {4, 5}, 2, {-90, 174, 146, 1, -136, -190}, 1716}};

// The weights are least-squares solutions with a condition below 100; entries below 1 are sums of p terms.
constexpr Tolerance kRounding{.absolute = 1e-14};

TEST(SavitzkyGolay, PublishedTables) {
  for (const TableRow& row : kTables) {
    for (const Index degree : row.degrees) {
      SCOPED_TRACE(std::to_string(row.points) + " points, degree " + std::to_string(degree) +
                   ", derivative " + std::to_string(row.derivative));
      const Matrix weights = savitzky_golay_weights({row.points, degree, row.derivative});
      ASSERT_EQ(weights.rows(), row.points);
      EXPECT_TRUE(expect_close(weights.row(row.points / 2).transpose(), whole_row(row), kRounding));
    }
  }
}

TEST(SavitzkyGolay, EndPointsOfTheFivePointQuadratic) {  // exact rational least squares
  const Matrix weights = savitzky_golay_weights({5, 2, 0});
  EXPECT_TRUE(expect_close(weights.row(0).transpose() * 35.0, (Vector(5) << 31, 9, -3, -5, 3).finished(),
                           {.absolute = 1e-12}));
  EXPECT_TRUE(expect_close(weights.row(1).transpose() * 35.0, (Vector(5) << 9, 13, 12, 6, -5).finished(),
                           {.absolute = 1e-12}));
  EXPECT_TRUE(expect_close(weights.row(4).transpose(), weights.row(0).reverse().transpose(), kRounding));
}

/// order-th derivative of x^power.
double derivative_of_power(Index power, Index order, double x) {
  double factor = 1.0;
  for (Index k = 0; k < order; ++k) factor *= static_cast<double>(power - k);
  return power < order ? 0.0 : factor * std::pow(x, static_cast<double>(power - order));
}

RC_GTEST_PROP(SavitzkyGolay, ReproducesPolynomialsUpToItsDegreeAtEveryPoint, ()) {
  const Index half = *rc::gen::inRange<Index>(1, 15);
  const Index points = 2 * half + 1;
  const Index degree = *rc::gen::inRange<Index>(0, std::min<Index>(points, 7));
  const Index derivative = *rc::gen::inRange<Index>(0, std::min<Index>(degree, 4) + 1);
  const Index power = *rc::gen::inRange<Index>(0, degree + 1);
  const Matrix weights = savitzky_golay_weights({points, degree, derivative});
  // The polynomial (x / half)^power over -half .. half, derivatives in unit spacing.
  Vector ordinates(points);
  Vector want(points);
  const auto h = static_cast<double>(half);
  for (Index i = 0; i < points; ++i) {
    const double x = static_cast<double>(i - half) / h;
    ordinates[i] = derivative_of_power(power, 0, x);
    want[i] = derivative_of_power(power, derivative, x) * std::pow(h, -static_cast<double>(derivative));
  }
  // Ordinates of size 1; rounding grows with the size of the weights of a row.
  const double scale = weights.cwiseAbs().rowwise().sum().maxCoeff();
  RC_ASSERT((weights.lazyProduct(ordinates) - want).cwiseAbs().maxCoeff() <= 1e-12 * std::max(1.0, scale));
}

RC_GTEST_PROP(SavitzkyGolay, SmoothingWeightsAddUpToOneAndDerivativesToZero, ()) {
  const Index points = 2 * *rc::gen::inRange<Index>(1, 30) + 1;
  const Index degree = *rc::gen::inRange<Index>(0, std::min<Index>(points, 6));
  const Index derivative = *rc::gen::inRange<Index>(0, std::min<Index>(degree, 4) + 1);
  const Matrix weights = savitzky_golay_weights({points, degree, derivative});
  const double scale = std::max(1.0, weights.cwiseAbs().maxCoeff());
  for (Index i = 0; i < points; ++i)
    RC_ASSERT(std::abs(weights.row(i).sum() - (derivative == 0 ? 1.0 : 0.0)) <= 1e-12 * scale);
}

TEST(SavitzkyGolay, DegreeOneBelowPointsGoesThroughEveryPoint) {
  EXPECT_TRUE((savitzky_golay_weights({5, 4, 0}) - Matrix::Identity(5, 5)).cwiseAbs().maxCoeff() < 1e-13);
}

TEST(SavitzkyGolay, OptionsThatDoNotFitTogetherAreRefused) {
  const auto refused = [](const SavitzkyGolay& options) {
    return error_text(ErrorKind::Usage, [&] { static_cast<void>(savitzky_golay_weights(options)); });
  };
  EXPECT_EQ(refused({10, 2, 0}), "points: 10 must be odd");
  EXPECT_EQ(refused({1, 0, 0}), "points: 1 must be between 3 and 201");
  EXPECT_EQ(refused({203, 2, 0}), "points: 203 must be between 3 and 201");
  EXPECT_EQ(refused({5, 5, 0}), "polynomial: 5 must be below points (5)");
  EXPECT_EQ(refused({11, 10, 0}), "polynomial: 10 must be between 0 and 9");
  EXPECT_EQ(refused({5, 1, 2}), "derivative: 2 must be at most polynomial (1)");
  EXPECT_EQ(refused({11, 6, 5}), "derivative: 5 must be between 0 and 4");
  EXPECT_EQ(refused({11, 2, -1}), "derivative: -1 must be between 0 and 4");
}

}  // namespace
}  // namespace bandwright
