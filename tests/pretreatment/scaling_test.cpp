// SPDX-License-Identifier: Apache-2.0
#include "pretreatment/scaling.hpp"

#include <gtest/gtest.h>

#include <cmath>

#include "base/error.hpp"
#include "support/close.hpp"
#include "support/error_text.hpp"
#include "support/random_data.hpp"

namespace bandwright {
namespace {

Matrix small_matrix() {
  return (Matrix(3, 2) << 1, 10, 2, 10, 6, 10).finished();
}  // means 3 and 10; variance 7 and 0

TEST(Scaling, CentreByHand) {
  const FittedScaling fitted = fit_scaling(Scaling::Centre, small_matrix(), Vector::Ones(3));
  EXPECT_TRUE(fitted.mean == (Vector(2) << 3, 10).finished());
  EXPECT_TRUE(fitted.scale == Vector::Ones(2));
  EXPECT_TRUE(fitted.apply(small_matrix()) == (Matrix(3, 2) << -2, 0, -1, 0, 3, 0).finished());
}

TEST(Scaling, UnitVarianceByHandAndConstantVariablesKeepTheirScale) {
  const FittedScaling fitted = fit_scaling(Scaling::UnitVariance, small_matrix(), Vector::Ones(3));
  EXPECT_TRUE(expect_close(fitted.scale, (Vector(2) << std::sqrt(7.0), 1.0).finished(), {.relative = 1e-15}));
}

TEST(Scaling, NoneDoesNothing) {
  const FittedScaling fitted = fit_scaling(Scaling::None, small_matrix(), Vector::Ones(3));
  EXPECT_TRUE(fitted.apply(small_matrix()) == small_matrix());
}

TEST(Scaling, ScaledColumnsHaveMeanZeroAndVarianceOne) {
  const Matrix X = (5.0 * random_matrix(1, 40, 12)).array() + 3.0;
  const Matrix Z = fit_scaling(Scaling::UnitVariance, X, Vector::Ones(40)).apply(X);
  EXPECT_TRUE(expect_close(Z.colwise().mean().transpose(), Vector::Zero(12), {.absolute = 1e-14}));
  EXPECT_TRUE(
      expect_close(Z.colwise().squaredNorm().transpose() / 39.0, Vector::Ones(12), {.relative = 1e-13}));
}

TEST(Scaling, TwoRowsOfHalfWeightAreOneRow) {
  const Matrix X = random_matrix(2, 6, 4);
  Matrix twice(12, 4);
  for (Index i = 0; i < 12; ++i) twice.row(i) = X.row(i / 2);
  for (const Scaling scaling : {Scaling::Centre, Scaling::UnitVariance}) {
    const FittedScaling single = fit_scaling(scaling, X, Vector::Ones(6));
    const FittedScaling halves = fit_scaling(scaling, twice, Vector::Constant(12, 0.5));
    constexpr Tolerance kRounding{.relative = 1e-14, .absolute = 1e-15};
    EXPECT_TRUE(expect_close(halves.mean, single.mean, kRounding));
    EXPECT_TRUE(expect_close(halves.scale, single.scale, kRounding));
  }
}

TEST(Scaling, ReplicatesThatDifferAreWeightedByHand) {
  // Sample one: 1 and 3, half weight each; sample two: 5. Mean (0.5 + 1.5 + 5) / 2 = 3.5.
  const Matrix X = (Matrix(3, 1) << 1, 3, 5).finished();
  const FittedScaling fitted = fit_scaling(Scaling::UnitVariance, X, (Vector(3) << 0.5, 0.5, 1.0).finished());
  EXPECT_DOUBLE_EQ(fitted.mean[0], 3.5);
  EXPECT_DOUBLE_EQ(fitted.scale[0], std::sqrt((0.5 * 6.25 + 0.5 * 0.25 + 2.25) / (2.0 - 1.0)));
}

TEST(Scaling, LargeOffsetCostsNoDigits) {
  Matrix X = random_matrix(3, 50, 3);
  const FittedScaling near_zero = fit_scaling(Scaling::UnitVariance, X, Vector::Ones(50));
  X.array() += 0x1p20;  // moves the entries by up to half of 2^-33
  const FittedScaling far = fit_scaling(Scaling::UnitVariance, X, Vector::Ones(50));
  EXPECT_TRUE(expect_close(far.mean, near_zero.mean.array() + 0x1p20, {.absolute = 0x1p-33}));
  EXPECT_TRUE(expect_close(far.scale, near_zero.scale, {.relative = 0x1p-32}));
}

TEST(Scaling, SpreadOfRoundingAloneIsNoSpread) {
  Matrix X = Matrix::Constant(4, 1, 0.1);
  X(2, 0) = std::nextafter(0.1, 1.0);
  EXPECT_EQ(fit_scaling(Scaling::UnitVariance, X, Vector::Ones(4)).scale[0], 1.0);
}

TEST(Scaling, OneSampleHasNoVariance) {
  const std::string kText = "unit-variance scaling needs at least two samples";
  EXPECT_EQ(
      error_text(
          ErrorKind::Numerical,
          [] { static_cast<void>(fit_scaling(Scaling::UnitVariance, Matrix::Ones(1, 2), Vector::Ones(1))); }),
      kText);
  EXPECT_EQ(error_text(ErrorKind::Numerical,
                       [] {
                         static_cast<void>(fit_scaling(Scaling::UnitVariance, Matrix::Ones(2, 2),
                                                       Vector::Constant(2, 0.5)));
                       }),
            kText);
}

TEST(Scaling, NoVariablesOrNoRowsAreNoTrouble) {
  EXPECT_EQ(fit_scaling(Scaling::Centre, Matrix(3, 0), Vector::Ones(3)).mean.size(), 0);
  EXPECT_EQ(fit_scaling(Scaling::Centre, Matrix(0, 4), Vector(0)).mean.size(), 4);
}

}  // namespace
}  // namespace bandwright
