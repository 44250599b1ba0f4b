// SPDX-License-Identifier: Apache-2.0
#include "model/outlier_limits.hpp"

#include <gtest/gtest.h>

#include <cmath>

#include "calibration/calibration.hpp"
#include "numerics/sums.hpp"
#include "support/close.hpp"
#include "support/random_data.hpp"
#include "support/test_data.hpp"

namespace bandwright {
namespace {

// The formulas worked in 60-digit arithmetic; as many digits as printed.
constexpr Tolerance kSevenDigits{.relative = 1e-7};

TEST(OutlierLimits, T2OfANewSpectrum) {
  EXPECT_TRUE(expect_close(t2_limit_new(30, 3, 0.05), 9.856873, kSevenDigits));
  EXPECT_TRUE(expect_close(t2_limit_new(24, 3, 0.05), 10.515884, kSevenDigits));
}

TEST(OutlierLimits, T2OfAStandard) {
  EXPECT_TRUE(expect_close(t2_limit_calibration(30, 3, 0.05), 7.164127, kSevenDigits));
  EXPECT_TRUE(expect_close(t2_limit_calibration(24, 3, 0.05), 6.993682, kSevenDigits));
}

TEST(OutlierLimits, ManyStandardsBringBothToChiSquared) {  // chi-squared(0.95; 3) = 7.814728
  EXPECT_TRUE(expect_close(t2_limit_new(10000000, 3, 0.05), 7.814728, {.relative = 2e-6}));
  EXPECT_TRUE(expect_close(t2_limit_calibration(10000000, 3, 0.05), 7.814728, {.relative = 2e-6}));
}

TEST(OutlierLimits, TooFewStandardsHaveNoT2Limit) {
  EXPECT_TRUE(std::isnan(t2_limit_new(3, 3, 0.05)));
  EXPECT_FALSE(std::isnan(t2_limit_new(4, 3, 0.05)));
  EXPECT_TRUE(std::isnan(t2_limit_calibration(4, 3, 0.05)));
  EXPECT_FALSE(std::isnan(t2_limit_calibration(5, 3, 0.05)));
}

// The exact quantiles of this residual are 0.2928454 and 0.4322408 (inversion of the characteristic
// function): both formulas are approximations and are compared with their own values.
const std::vector<double> kEigenvalues{.05, .03, .02, .01, .005, .005};

TEST(OutlierLimits, QByJacksonAndMudholkar) {
  EXPECT_TRUE(expect_close(q_limit_jackson_mudholkar(kEigenvalues, 0.05), 0.2996199, {.relative = 2e-7}));
  EXPECT_TRUE(expect_close(q_limit_jackson_mudholkar(kEigenvalues, 0.01), 0.4539501, {.relative = 2e-7}));
}

TEST(OutlierLimits, QByBox) {  // g = 0.0329167, h = 3.6455696
  EXPECT_TRUE(expect_close(q_limit_box(kEigenvalues, 0.05), 0.2931950, {.relative = 2e-7}));
  EXPECT_TRUE(expect_close(q_limit_box(kEigenvalues, 0.01), 0.4150399, {.relative = 2e-7}));
}

TEST(OutlierLimits, WithoutResidualThereIsNoQLimit) {
  const std::vector<double> zeros(4, 0.0);
  const std::vector<double> alike(4, 0.3);
  EXPECT_TRUE(std::isnan(q_limit_box(zeros, 0.05)));
  EXPECT_TRUE(std::isnan(q_limit_box({}, 0.05)));
  EXPECT_TRUE(std::isnan(q_limit_jackson_mudholkar(zeros, 0.05)));
  EXPECT_TRUE(std::isnan(q_limit_jackson_mudholkar({}, 0.05)));
  EXPECT_TRUE(std::isnan(q_limit_from_values(zeros, 0.05)));
  EXPECT_TRUE(std::isnan(q_limit_from_values(alike, 0.05)));
  EXPECT_TRUE(std::isnan(q_limit_from_values({alike.data(), 1}, 0.05)));
  EXPECT_TRUE(std::isnan(q_limit_from_values({}, 0.05)));
}

// q = 1, 2, 3, 6: mean 3, variance 14/3 with n - 1; g = 7/9, h = 27/7.
TEST(OutlierLimits, QFromValuesMatchesTwoMoments) {
  const std::vector<double> q{1, 2, 3, 6};
  // Eigenvalues with the same g and h by Box's formula: theta1 = 3, theta2 = 9/4 + 12 c^2 = 7/3.
  const double c = 1.0 / 12.0;
  const std::vector<double> eigenvalues{0.75 + 3 * c, 0.75 - c, 0.75 - c, 0.75 - c};
  for (const double significance : {0.05, 0.01})
    EXPECT_TRUE(expect_close(q_limit_from_values(q, significance), q_limit_box(eigenvalues, significance),
                             {.relative = 1e-12}));
}

TEST(OutlierLimits, ResidualEigenvaluesAreSquaredSingularValues) {
  for (const auto& [n, p] : std::vector<std::pair<Index, Index>>{{5, 12}, {12, 5}}) {
    const Matrix E = random_matrix(1, n, p);
    const Vector values = Eigen::JacobiSVD<Eigen::MatrixXd>(E).singularValues();
    const Vector want = (values.cwiseAbs2() / static_cast<double>(n - 1)).reverse();
    EXPECT_TRUE(expect_close(residual_eigenvalues(E, n), want, {.relative = 1e-11}));
  }
  EXPECT_GE(residual_eigenvalues(Matrix::Ones(4, 6), 4).minCoeff(), 0.0);
}

// T2, leverage, Q and their limits of a calibration on open data, from other software.
class OutlierLimitsOnOpenData : public testing::TestWithParam<Index> {};

TEST_P(OutlierLimitsOnOpenData, AsTheReference) {
  const OpenData& data = beerlambert4();
  const ReferenceResults want = data.results("diagnostics");
  const std::string& name = data.properties[static_cast<std::size_t>(GetParam())];
  const std::vector<Index> training = data.rows_of(want.texts({"samples_training"}));
  const std::vector<Index> foreign = data.rows_of(want.texts({"samples_test"}));
  const CalibrationRecipe recipe{.windows = {whole_axis(data.axis)}, .steps = {}, .max_factors = 12};
  const auto n = static_cast<Index>(training.size());
  const double samples = static_cast<double>(n);
  const Calibration calibration = fit_calibration(recipe, data.axis, data.spectra_at(training),
                                                  data.reference_at(GetParam(), training), Vector::Ones(n));
  const PathProjection of_training = project_path(calibration, data.spectra_at(training));
  const PathProjection of_foreign = project_path(calibration, data.spectra_at(foreign));
  // Q beyond four factors is the noise of 1e-4 of spectra of size 1: sums of squares around 1e-5 out of
  // residuals rounded at 1e-16 of the spectrum keep ten digits.
  constexpr Tolerance kReference{.relative = 1e-8};
  for (Index k = 1; k <= 12; ++k) {
    const std::string count = std::to_string(k);
    SCOPED_TRACE(name + ", " + count + " factors");
    const auto at = [&](const char* set, const char* key) {
      return want.numbers({"by_property", name, "by_factors", count, set, key});
    };
    for (const auto& [set, got] : {std::pair{"training", &of_training}, std::pair{"test", &of_foreign}}) {
      const Vector leverage = got->leverage.col(k - 1);
      EXPECT_TRUE(expect_close(Vector(leverage.array() + 1.0 / samples), at(set, "leverage"), kReference))
          << set;
      EXPECT_TRUE(expect_close(Vector((samples - 1.0) * leverage), at(set, "hotelling_t2"), kReference))
          << set;
      EXPECT_TRUE(expect_close(got->q.col(k - 1), at(set, "q"), kReference)) << set;
    }
    const Vector q = of_training.q.col(k - 1);
    const Vector eigenvalues =
        residual_eigenvalues(spectral_residuals(calibration, data.spectra_at(training), k), n);
    for (const auto& [text, significance] : {std::pair{"0.05", 0.05}, std::pair{"0.01", 0.01}}) {
      const auto limit = [&, level = std::string(text)](const char* key) {
        return want.number({"by_property", name, "by_factors", count, "limits", level, key});
      };
      EXPECT_TRUE(expect_close(t2_limit_new(n, k, significance), limit("t2_limit_new"), kReference));
      EXPECT_TRUE(
          expect_close(q_limit_from_values(values_of(q), significance), limit("q_limit_box"), kReference));
      EXPECT_TRUE(expect_close(q_limit_jackson_mudholkar(values_of(eigenvalues), significance),
                               limit("q_limit_jm"), kReference));
    }
  }
}

INSTANTIATE_TEST_SUITE_P(Properties, OutlierLimitsOnOpenData, testing::Values(0, 1));

}  // namespace
}  // namespace bandwright
