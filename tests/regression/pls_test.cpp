// SPDX-License-Identifier: Apache-2.0
#include "regression/pls.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <limits>

#include "base/error.hpp"
#include "support/close.hpp"
#include "support/error_text.hpp"
#include "support/random_data.hpp"
#include "support/small_oracles.hpp"

namespace bandwright {
namespace {

namespace small = eight_by_five;

LatentPath fit(const Matrix& X, const Vector& y, Index factors) {
  return fit_pls(X, y, Vector::Ones(X.rows()), factors);
}

LatentPath small_path() {
  return fit(centred(small::spectra()), centred(small::reference()), small::kFactors);
}

constexpr Tolerance kPrinted{.relative = 1e-9, .absolute = 1e-12};     // 12 digits printed
constexpr Tolerance kNineDigits{.relative = 2e-9, .absolute = 1e-10};  // 9 or 10 digits printed

TEST(Pls, SmallSetCoefficients) {
  const LatentPath path = small_path();
  ASSERT_EQ(path.factors(), small::kFactors);
  for (Index k = 1; k <= small::kFactors; ++k) {
    EXPECT_TRUE(expect_close(path.coefficients(k), small::coefficients().row(k - 1).transpose(), kPrinted))
        << k;
    EXPECT_TRUE(
        expect_close(path.coefficients(k).norm(), small::coefficient_norms()[k - 1], {.absolute = 5.1e-6}))
        << k;
  }
}

// The signs of w, t and p are free: each is compared up to the sign of its first entry.
TEST(Pls, SmallSetWeightsLoadingsAndScores) {
  const LatentPath path = small_path();
  const Vector w1 = path.rotations.row(0).transpose();
  const double sign1 = std::copysign(1.0, w1[0]);
  EXPECT_TRUE(expect_close(
      w1 * sign1, small::of(0.239108240, 0.355583714, 0.705523242, 0.522343753, 0.213965958), kNineDigits));
  EXPECT_TRUE(expect_close(path.loadings.row(0).transpose() * sign1,
                           small::of(0.261624353, 0.350292350, 0.675878080, 0.541451098, 0.248702713),
                           kNineDigits));
  EXPECT_TRUE(expect_close(path.y_loadings[0] * sign1, 0.1228078053, kNineDigits));
  EXPECT_TRUE(expect_close(path.score_squares[0], 396.7394724, kNineDigits));

  // r2 = w2 - (p1'w2) w1 with w2 orthogonal to w1, so w2 is what r2 holds besides w1.
  const Vector r2 = path.rotations.row(1).transpose();
  const Vector w2 = r2 - r2.dot(w1) * w1;
  const double sign2 = w2[0] < 0.0 ? 1.0 : -1.0;
  EXPECT_TRUE(expect_close(w2 * sign2,
                           small::of(-0.412080240, 0.0968402824, 0.542553049, -0.349694443, -0.635737226),
                           kNineDigits));
  EXPECT_TRUE(expect_close(path.y_loadings[1] * sign2, 0.1172939006, kNineDigits));
  EXPECT_TRUE(expect_close(path.score_squares[1], 22.69695334, kNineDigits));
}

TEST(Pls, TruncatedPathIsTheShorterFit) {
  const LatentPath path = small_path().truncated(2);
  const LatentPath fitted = fit(centred(small::spectra()), centred(small::reference()), 2);
  EXPECT_EQ(path.factors(), 2);
  EXPECT_TRUE(path.rotations == fitted.rotations);
  EXPECT_TRUE(path.loadings == fitted.loadings);
  EXPECT_TRUE(path.y_loadings == fitted.y_loadings);
  EXPECT_TRUE(path.score_squares == fitted.score_squares);
  EXPECT_TRUE(path.coefficients(2) == fitted.coefficients(2));
}

TEST(Pls, RowWeightsCountRowsSeveralTimes) {
  const Matrix X = centred(small::spectra());
  const Vector y = centred(small::reference());
  Matrix X_twice(16, 5);
  Vector y_twice(16);
  for (Index i = 0; i < 16; ++i) {
    X_twice.row(i) = X.row(i / 2);
    y_twice[i] = y[i / 2];
  }
  const LatentPath halves = fit_pls(X_twice, y_twice, Vector::Constant(16, 0.5), 4);
  const LatentPath singles = fit(X, y, 4);
  constexpr Tolerance kRounding{.relative = 1e-12, .absolute = 1e-13};
  for (Index k = 1; k <= 4; ++k)
    EXPECT_TRUE(expect_close(halves.coefficients(k), singles.coefficients(k), kRounding));
  EXPECT_TRUE(expect_close(halves.score_squares, singles.score_squares, kRounding));

  // A row of weight 3 is three rows, when the rows as weighted are centred.
  const Vector weights = small::of(3, 1, 1, 2, 1, 1, 1, 1);
  std::vector<Index> repeated{0, 0, 0, 1, 2, 3, 3, 4, 5, 6, 7};
  const LatentPath weighted = fit_pls(X, y, weights, 3);
  const Matrix X_repeated = X(repeated, Eigen::all);
  const Vector y_repeated = y(repeated);
  EXPECT_TRUE(
      expect_close(weighted.coefficients(3), fit(X_repeated, y_repeated, 3).coefficients(3), kRounding));
}

TEST(Pls, OneVariableIsTheStraightLine) {
  const Matrix X = centred(Matrix(small::spectra().col(2)));
  const Vector y = centred(small::reference());
  const LatentPath path = fit(X, y, 5);
  EXPECT_EQ(path.factors(), 1);
  EXPECT_TRUE(
      expect_close(path.coefficients(1)[0], X.col(0).dot(y) / X.col(0).squaredNorm(), {.relative = 1e-14}));
}

TEST(Pls, ConstantColumnGetsNoCoefficient) {
  Matrix X = centred(small::spectra());
  X.col(3).setZero();
  const LatentPath path = fit(X, centred(small::reference()), 5);
  EXPECT_EQ(path.factors(), 4);
  for (Index k = 1; k <= 4; ++k) EXPECT_EQ(path.coefficients(k)[3], 0.0);
}

TEST(Pls, PathEndsWithTheRank) {
  const Vector y = centred(small::reference());
  Matrix collinear(8, 6);
  collinear << centred(small::spectra()),
      2.0 * centred(small::spectra()).col(0) - centred(small::spectra()).col(4);
  const LatentPath path = fit(collinear, y, 6);
  EXPECT_EQ(path.factors(), 5);
  EXPECT_EQ(path.end, PathEnd::RankUsedUp);

  Matrix two_alike(8, 2);
  two_alike << centred(small::spectra()).col(1), centred(small::spectra()).col(1);
  EXPECT_EQ(fit(two_alike, y, 2).factors(), 1);
  EXPECT_EQ(fit(Matrix::Zero(8, 3), y, 3).factors(), 0);
}

TEST(Pls, FewerSamplesThanVariablesEndsInAnExactFit) {
  const Matrix X = centred(random_matrix(7, 6, 20));
  const Vector y = centred(random_vector(8, 6));
  const LatentPath path = fit(X, y, 20);
  EXPECT_EQ(path.factors(), 5);  // centred: rank n - 1
  EXPECT_NE(path.end, PathEnd::Asked);
  EXPECT_TRUE(expect_close_in_norm(Vector(X * path.coefficients(5)), y, {.relative = 1e-12}));
}

TEST(Pls, ResponseExplainedEndsThePath) {
  const LatentPath nothing = fit(centred(small::spectra()), Vector::Zero(8), 3);
  EXPECT_EQ(nothing.factors(), 0);
  EXPECT_EQ(nothing.end, PathEnd::ResponseExplained);

  // Orthogonal columns of equal length: y lies in the first direction w = X'y, and one factor is all.
  Matrix X(4, 2);
  X << 1, 1, 1, -1, -1, 1, -1, -1;
  const Vector y = X * Vector::Ones(2);
  const LatentPath path = fit(X, y, 2);
  EXPECT_EQ(path.factors(), 1);
  EXPECT_NE(path.end, PathEnd::Asked);
  EXPECT_TRUE(expect_close(path.coefficients(1), Vector::Ones(2), {.relative = 1e-14}));
}

TEST(Pls, OneSampleCarriesNoFactor) { EXPECT_EQ(fit(Matrix::Zero(1, 3), Vector::Zero(1), 2).factors(), 0); }

TEST(Pls, DuplicateRowsAreNoTrouble) {
  Matrix X(16, 5);
  X << centred(small::spectra()), centred(small::spectra());
  Vector y(16);
  y << centred(small::reference()), centred(small::reference());
  const LatentPath path = fit(X, y, 8);
  ASSERT_GE(path.factors(), 5);
  EXPECT_TRUE(expect_close(path.coefficients(5), small::coefficients().row(4).transpose(), kPrinted));
}

TEST(Pls, ScaleOfTheDataDoesNotMatter) {
  const Matrix X = centred(small::spectra());
  const Vector y = centred(small::reference());
  constexpr double kTiny = 0x1p-100;
  const LatentPath path = fit(X * kTiny, y * kTiny, 5);
  ASSERT_EQ(path.factors(), 5);
  EXPECT_TRUE(expect_close(path.coefficients(5), small::coefficients().row(4).transpose(), kPrinted));
}

TEST(Pls, RefusesWhatItCannotFit) {
  const auto refused = [](const Matrix& X, const Vector& y, const Vector& weights, Index factors) {
    return error_text(ErrorKind::Input, [&] { static_cast<void>(fit_pls(X, y, weights, factors)); });
  };
  const std::string kEmpty = "a regression needs at least one spectrum and one point";
  EXPECT_EQ(refused(Matrix(0, 3), Vector(0), Vector(0), 1), kEmpty);
  EXPECT_EQ(refused(Matrix(3, 0), Vector::Ones(3), Vector::Ones(3), 1), kEmpty);
  EXPECT_EQ(refused(Matrix::Ones(3, 2), Vector::Ones(2), Vector::Ones(3), 1),
            "3 spectra, but 2 reference values and 3 weights");
  EXPECT_EQ(refused(Matrix::Ones(3, 2), Vector::Ones(3), Vector::Ones(4), 1),
            "3 spectra, but 3 reference values and 4 weights");
  EXPECT_EQ(refused(Matrix::Ones(3, 2), Vector::Ones(3), Vector::Ones(3), 0),
            "a regression needs at least one factor");
  for (const double bad :
       {std::numeric_limits<double>::quiet_NaN(), std::numeric_limits<double>::infinity()}) {
    const std::string kNotFinite = "a regression needs finite spectra, reference values and weights";
    Matrix X = Matrix::Ones(3, 2);
    X(1, 1) = bad;
    EXPECT_EQ(refused(X, Vector::Ones(3), Vector::Ones(3), 1), kNotFinite);
    Vector y = Vector::Ones(3);
    y[2] = bad;
    EXPECT_EQ(refused(Matrix::Ones(3, 2), y, Vector::Ones(3), 1), kNotFinite);
    EXPECT_EQ(refused(Matrix::Ones(3, 2), Vector::Ones(3), y, 1), kNotFinite);
  }
}

}  // namespace
}  // namespace bandwright
