// SPDX-License-Identifier: Apache-2.0
#include "calibration/calibration.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <limits>

#include "base/error.hpp"
#include "support/close.hpp"
#include "support/error_text.hpp"
#include "support/random_data.hpp"
#include "support/small_oracles.hpp"
#include "support/test_data.hpp"

namespace bandwright {
namespace {

namespace small = eight_by_five;

CalibrationRecipe recipe_for(const Axis& axis, Index factors, Scaling scaling = Scaling::Centre,
                             std::vector<Step> steps = {}) {
  return {
      .windows = {whole_axis(axis)}, .steps = std::move(steps), .scaling = scaling, .max_factors = factors};
}

Calibration fit(const Matrix& spectra, const Vector& y, Index factors, Scaling scaling = Scaling::Centre) {
  const Axis axis(Vector::LinSpaced(spectra.cols(), 1.0, static_cast<double>(spectra.cols())),
                  AxisUnit::Nanometre);
  return fit_calibration(recipe_for(axis, factors, scaling), axis, spectra, y, Vector::Ones(spectra.rows()));
}

constexpr Tolerance kPrinted{.relative = 2e-11, .absolute = 1e-12};    // 12 digits printed
constexpr Tolerance kNineDigits{.relative = 5e-9, .absolute = 1e-10};  // 9 digits printed

TEST(Calibration, SmallSetCoefficientsAndErrors) {
  const Calibration calibration = fit(small::spectra(), small::reference(), small::kFactors);
  const PathProjection fitted = project_path(calibration, small::spectra());
  for (Index k = 1; k <= small::kFactors; ++k) {
    SCOPED_TRACE(k);
    EXPECT_TRUE(
        expect_close(calibration.coefficients(k), small::coefficients().row(k - 1).transpose(), kPrinted));
    EXPECT_TRUE(expect_close(calibration.intercept(k), small::intercepts()[k - 1], kPrinted));
    const double sse = (fitted.values.col(k - 1) - small::reference()).squaredNorm();
    EXPECT_TRUE(expect_close(sse, small::sse()[k - 1],
                             {.relative = 1e-10}));  // twelve digits, less two for the difference
    EXPECT_TRUE(
        expect_close(std::sqrt(sse / static_cast<double>(8 - k - 1)), small::sec()[k - 1], kNineDigits));
  }
}

TEST(Calibration, SmallSetWithTwoFactors) {
  const Calibration calibration = fit(small::spectra(), small::reference(), 2);
  const Projection got = project(calibration, small::spectra(), 2);
  EXPECT_TRUE(expect_close(got.value, small::fitted_2(), kNineDigits));
  EXPECT_TRUE(
      expect_close(Vector(got.leverage.array() + 1.0 / 8.0), small::leverage_2(), {.absolute = 5.1e-9}));
  EXPECT_TRUE(expect_close(got.q, small::q_2(), {.relative = 5e-8}));  // eight digits printed
  EXPECT_TRUE(expect_close(got.leverage.sum() + 1.0, 3.0, {.relative = 1e-13}));
  EXPECT_TRUE(expect_close(1.0 / calibration.coefficients(2).norm(), 5.730228141, kNineDigits));
}

// NIST Statistical Reference Datasets, Longley: 16 years, six economic series, nearly collinear.
struct Longley {
  Matrix X;
  Vector y;
};
Longley longley() {
  const NumberTable table = read_number_table("nist_strd/Longley.csv", false);
  return {table.values.rightCols(6), table.values.col(0)};
}

TEST(Calibration, LongleyAtFullRankIsCertifiedLeastSquares) {
  const auto [X, y] = longley();
  const ReferenceResults certified("nist_strd/certified.json");
  const Vector want = certified.numbers({"Longley", "certified", "coefficients"});
  // The correlation matrix has a condition number of 12220: four of sixteen digits go, and some for sums.
  constexpr Tolerance kCertified{.relative = 1e-10};
  const Calibration calibration = fit(X, y, 6, Scaling::UnitVariance);
  ASSERT_EQ(calibration.factors(), 6);
  EXPECT_TRUE(expect_close(calibration.intercept(6), want[0], kCertified));
  EXPECT_TRUE(expect_close(calibration.coefficients(6), want.tail(6), kCertified));
  const Vector errors = project(calibration, X, 6).value - y;
  EXPECT_TRUE(expect_close(std::sqrt(errors.squaredNorm() / 9.0),
                           certified.number({"Longley", "certified", "residual_sd"}), kCertified));
}

// The lower ranks, autoscaled (sd with n - 1), coefficients in original units: 60-digit arithmetic, NIPALS
// and the closed Krylov form agreeing within 1e-30.
TEST(Calibration, LongleyAtLowerRanks) {
  const auto [X, y] = longley();
  const Calibration calibration = fit(X, y, 6, Scaling::UnitVariance);
  struct Rank {
    double intercept;
    std::vector<double> coefficients;
    double sse;
  };
  const std::vector<Rank> want{
      {-265659.4342478,
       {69.0276577939, 0.00759217392375, 0.41257696884, 0.504176290538, 0.105929088232, 156.533030068},
       13738119.32014},
      {-301170.6160411,
       {78.8140590933, 0.00934070829227, -0.345812558838, 0.652313693015, 0.114891110097, 174.349072341},
       8113786.385148},
      {-389001.3525534,
       {94.4148344515, 0.0126604590562, -1.16741651078, -0.60974466296, 0.144587116848, 219.058089482},
       2546056.334602},
      {-1774193.91599,
       {67.6800731802, 0.0114822376011, -1.27971640107, -0.926688537972, -0.27980890644, 955.505693942},
       1410161.250195},
      {-2454636.748984,
       {-63.0892389557, 0.0117011800649, -1.36219374432, -0.889389241361, -0.320211848203, 1312.91943649},
       1023594.973195}};
  const PathProjection fitted = project_path(calibration, X);
  constexpr Tolerance kElevenDigits{.relative = 5e-11};
  for (Index k = 1; k <= 5; ++k) {
    SCOPED_TRACE(k);
    const Rank& rank = want[static_cast<std::size_t>(k - 1)];
    EXPECT_TRUE(expect_close(calibration.intercept(k), rank.intercept, kElevenDigits));
    EXPECT_TRUE(expect_close(calibration.coefficients(k),
                             Eigen::Map<const Vector>(rank.coefficients.data(), 6), kElevenDigits));
    EXPECT_TRUE(expect_close((fitted.values.col(k - 1) - y).squaredNorm(), rank.sse, kElevenDigits));
  }
}

TEST(Calibration, ConstantAddedToTheReferenceValuesMovesTheIntercept) {
  const Calibration plain = fit(small::spectra(), small::reference(), 4);
  const Calibration moved = fit(small::spectra(), small::reference().array() + 100.0, 4);
  constexpr Tolerance kRounding{.relative = 1e-11, .absolute = 1e-12};  // two digits go with the 100
  for (Index k = 1; k <= 4; ++k) {
    EXPECT_TRUE(expect_close(moved.coefficients(k), plain.coefficients(k), kRounding));
    EXPECT_TRUE(expect_close(moved.intercept(k), plain.intercept(k) + 100.0, kRounding));
  }
}

TEST(Calibration, ValueIsInterceptPlusCoefficientsTimesSpectrum) {
  const OpenData& data = beerlambert4();
  const Matrix X = data.spectra_at(data.training);
  for (const Scaling scaling : {Scaling::Centre, Scaling::UnitVariance, Scaling::None}) {
    const Calibration calibration =
        fit_calibration(recipe_for(data.axis, 4, scaling, {SavitzkyGolay{7, 2, 1}}), data.axis, X,
                        data.reference_at(0, data.training), Vector::Ones(X.rows()));
    const Matrix pretreated = calibration.chain.apply(X);
    const PathProjection path = project_path(calibration, X);
    for (Index k = 1; k <= 4; ++k) {
      const Vector by_coefficients =
          (pretreated * calibration.coefficients(k)).array() + calibration.intercept(k);
      constexpr Tolerance kRounding{.relative = 1e-11,
                                    .absolute = 1e-11};  // values of size 10 out of terms of size 100
      EXPECT_TRUE(expect_close(path.values.col(k - 1), by_coefficients, kRounding));
      EXPECT_TRUE(expect_close(project(calibration, X, k).value, by_coefficients, kRounding));
    }
    if (scaling == Scaling::None) {
      EXPECT_EQ(calibration.intercept(2), 0.0);
    }
  }
}

TEST(Calibration, ProjectionWithKFactorsIsTheKthOfThePath) {
  const Calibration calibration = fit(small::spectra(), small::reference(), 4, Scaling::UnitVariance);
  const Matrix foreign = small::spectra() + random_matrix(5, 8, 5);
  const PathProjection path = project_path(calibration, foreign);
  for (Index k = 1; k <= 4; ++k) {
    const Projection one = project(calibration, foreign, k);
    const Projection of_truncated = project(calibration.truncated(k), foreign, k);
    EXPECT_TRUE(expect_close(one.value, path.values.col(k - 1), {.relative = 1e-12}));
    EXPECT_TRUE(one.leverage == path.leverage.col(k - 1));
    EXPECT_TRUE(one.q == path.q.col(k - 1));
    EXPECT_TRUE(one.value == of_truncated.value);
    EXPECT_TRUE(one.q == of_truncated.q);
    const Vector lengths = spectral_residuals(calibration, foreign, k).rowwise().squaredNorm();
    EXPECT_TRUE(expect_close(lengths, one.q, {.relative = 1e-13}));
  }
}

// Scores and loadings in the defining identity X = T P' + E, and E orthogonal to the scores' directions.
TEST(Calibration, SpectrumIsScoresTimesLoadingsPlusResidual) {
  const Calibration calibration = fit(small::spectra(), small::reference(), 3);
  const Projection got = project(calibration, small::spectra(), 3);
  const Matrix rebuilt =
      got.scores * calibration.path.loadings + spectral_residuals(calibration, small::spectra(), 3);
  EXPECT_LE((rebuilt - centred(small::spectra())).norm(), 1e-12);
}

TEST(Calibration, SpectrumAloneHasTheSameBitsAsAmongAThousand) {
  const OpenData& data = beerlambert4();
  const Matrix X = data.spectra_at(data.training);
  const Calibration calibration =
      fit_calibration(recipe_for(data.axis, 4, Scaling::UnitVariance, {SavitzkyGolay{11, 2, 1}, Snv{}}),
                      data.axis, X, data.reference_at(0, data.training), Vector::Ones(X.rows()));
  Matrix many(1000, X.cols());
  const Matrix noise = 0.001 * random_matrix(3, 1000, X.cols());
  for (Index i = 0; i < 1000; ++i) many.row(i) = X.row(i % X.rows()) + noise.row(i);
  const Projection all = project(calibration, many, 4);
  const PathProjection all_path = project_path(calibration, many);
  for (const Index i : {0, 1, 17, 500, 998, 999}) {
    const Matrix one = many.row(i);
    const Projection alone = project(calibration, one, 4);
    const PathProjection alone_path = project_path(calibration, one);
    EXPECT_EQ(alone.value[0], all.value[i]);
    EXPECT_EQ(alone.leverage[0], all.leverage[i]);
    EXPECT_EQ(alone.q[0], all.q[i]);
    EXPECT_TRUE(alone.scores.row(0) == all.scores.row(i));
    EXPECT_TRUE(alone_path.values.row(0) == all_path.values.row(i));
    EXPECT_TRUE(alone_path.q.row(0) == all_path.q.row(i));
  }
}

TEST(Calibration, DuplicateRowsOfHalfWeightAreSingleRows) {
  Matrix X(16, 5);
  Vector y(16);
  for (Index i = 0; i < 16; ++i) {
    X.row(i) = small::spectra().row(i / 2);
    y[i] = small::reference()[i / 2];
  }
  for (const Scaling scaling : {Scaling::Centre, Scaling::UnitVariance, Scaling::None}) {
    const Calibration halves = fit_calibration(recipe_for(small::axis(), 4, scaling), small::axis(), X, y,
                                               Vector::Constant(16, 0.5));
    const Calibration singles = fit(small::spectra(), small::reference(), 4, scaling);
    constexpr Tolerance kRounding{.relative = 1e-11, .absolute = 1e-12};
    for (Index k = 1; k <= 4; ++k) {
      EXPECT_TRUE(expect_close(halves.coefficients(k), singles.coefficients(k), kRounding));
      EXPECT_TRUE(expect_close(halves.intercept(k), singles.intercept(k), kRounding));
    }
  }
}

TEST(Calibration, NothingToLearnIsRefused) {
  const std::string kNothing = "no factor can be computed: the reference values or the spectra do not vary";
  const auto refused = [](const Matrix& X, const Vector& y, Scaling scaling) {
    return error_text(ErrorKind::Numerical, [&] { static_cast<void>(fit(X, y, 2, scaling)); });
  };
  for (const Scaling scaling : {Scaling::Centre, Scaling::UnitVariance}) {
    EXPECT_EQ(refused(small::spectra(), Vector::Constant(8, 0.1), scaling), kNothing);
    EXPECT_EQ(refused(Matrix::Constant(8, 5, 0.3), small::reference(), scaling), kNothing);
  }
  EXPECT_EQ(refused(small::spectra().topRows(1), small::reference().head(1), Scaling::Centre), kNothing);
  EXPECT_EQ(refused(small::spectra().topRows(1), small::reference().head(1), Scaling::UnitVariance),
            "unit-variance scaling needs at least two samples");
  EXPECT_EQ(refused(Matrix::Zero(8, 5), small::reference(), Scaling::None), kNothing);
}

TEST(Calibration, ValuesThatAreNotFiniteAreRefused) {
  Matrix X = small::spectra();
  X(3, 2) = std::numeric_limits<double>::quiet_NaN();
  for (const Scaling scaling : {Scaling::Centre, Scaling::UnitVariance, Scaling::None})
    EXPECT_EQ(
        error_text(ErrorKind::Input, [&] { static_cast<void>(fit(X, small::reference(), 2, scaling)); }),
        "a regression needs finite spectra, reference values and weights");
}

}  // namespace
}  // namespace bandwright
