// SPDX-License-Identifier: Apache-2.0
#include "validation/error_statistics.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <fstream>
#include <nlohmann/json.hpp>
#include <string>

#include "base/error.hpp"
#include "support/close.hpp"

namespace bandwright {
namespace {

// Twelve pairs worked in 60-digit arithmetic; the values below are printed to ten digits.
constexpr Tolerance kPrinted{.relative = 2e-9, .absolute = 0.0};
constexpr Tolerance kSevenDecimals{.relative = 0.0,
                                   .absolute = 5.1e-8};  // half a unit of the last one printed
// Another library's double precision.
constexpr Tolerance kLibrary{.relative = 1e-8, .absolute = 1e-14};

Vector twelve_references() {
  return Vector{{0.10, 0.18, 0.25, 0.33, 0.40, 0.52, 0.61, 0.70, 0.78, 0.85, 0.93, 1.00}};
}
Vector twelve_estimates() {
  return Vector{{0.12, 0.17, 0.28, 0.31, 0.43, 0.55, 0.60, 0.74, 0.80, 0.84, 0.97, 1.02}};
}

TEST(ErrorStatistics, TwelvePairsGiveTheWorkedBiasAndErrors) {
  const ErrorStatistics s = error_statistics(twelve_references(), twelve_estimates());
  EXPECT_EQ(s.n, 12);
  EXPECT_TRUE(expect_close(s.bias, 0.015, {.relative = 1e-13, .absolute = 0.0}));  // predicted - reference
  EXPECT_TRUE(expect_close(s.rmsep, 0.0254950976, kPrinted));
  EXPECT_TRUE(expect_close(s.sep, 0.0215322169, kPrinted));
  EXPECT_TRUE(expect_close(s.bias_t, 2.4131990, kSevenDecimals));
  EXPECT_TRUE(expect_close(s.bias_t_limit, 2.2009852, kSevenDecimals));
  EXPECT_TRUE(expect_close(s.bias_p, 0.0344190, kSevenDecimals));
  EXPECT_TRUE(expect_close(s.bias_limit, 0.0136809179, kPrinted));
}

TEST(ErrorStatistics, TwelvePairsGiveTheWorkedSlopeAndJointTests) {
  const ErrorStatistics s = error_statistics(twelve_references(), twelve_estimates());
  EXPECT_TRUE(expect_close(s.slope, 0.9807562859, kPrinted));
  EXPECT_TRUE(expect_close(s.intercept, -0.0040471194, {.relative = 2e-8, .absolute = 0.0}));
  EXPECT_TRUE(expect_close(s.line_residual_sd, 0.0217032596, kPrinted));
  EXPECT_TRUE(expect_close(s.slope_t, 0.9095613, kSevenDecimals));
  EXPECT_TRUE(expect_close(s.slope_t_limit, 2.2281389, kSevenDecimals));
  EXPECT_TRUE(expect_close(s.joint_f, 3.0011651, kSevenDecimals));
  EXPECT_TRUE(expect_close(s.joint_f_limit, 4.1028210, kSevenDecimals));
  // The interval of the slope and its t test tell the same: it holds 1 exactly when t is below its limit.
  EXPECT_TRUE(s.slope_low < 1.0 && 1.0 < s.slope_high);
  EXPECT_TRUE(expect_close((s.slope_high - s.slope_low) / 2.0 * s.slope_t,
                           std::abs(s.slope - 1.0) * s.slope_t_limit, {.relative = 1e-12, .absolute = 0.0}));
}

TEST(ErrorStatistics, JointTestTheOtherWayRoundGivesItsOwnWorkedValue) {
  const ErrorStatistics swapped = error_statistics(twelve_estimates(), twelve_references());
  EXPECT_TRUE(expect_close(swapped.joint_f, 3.2797014, kSevenDecimals));
}

TEST(ErrorStatistics, TwelvePairsGiveTheWorkedMeasuresOfAgreement) {
  const ErrorStatistics s = error_statistics(twelve_references(), twelve_estimates());
  EXPECT_TRUE(expect_close(s.reference_sd, 0.3040471953, kPrinted));
  EXPECT_TRUE(expect_close(s.rpd, 14.1205709, {.relative = 1e-8, .absolute = 0.0}));
  EXPECT_TRUE(expect_close(s.rer, 41.7978328, {.relative = 1e-8, .absolute = 0.0}));
  EXPECT_TRUE(expect_close(s.r2, 0.9923295664, kPrinted));
  EXPECT_TRUE(expect_close(s.correlation_squared, 0.9953679286, kPrinted));
  EXPECT_TRUE(expect_close(s.concordance, 0.9962353093, kPrinted));
}

TEST(ErrorStatistics, SepLimitGivesBothWorkedForms) {
  // SEC 0.02 with 40 degrees of freedom: F(11, 40) is the strict form used here.
  EXPECT_TRUE(expect_close(sep_limit(0.02, 40, 12), 0.0285487676, kPrinted));
  // sqrt F(n - 1, M) for n = 10, 15, 20 and M = 50, 100, worked to four decimals.
  EXPECT_NEAR(sep_limit(1.0, 50, 10), 1.4399, 5e-5);
  EXPECT_NEAR(sep_limit(1.0, 100, 10), 1.4053, 5e-5);
  EXPECT_NEAR(sep_limit(1.0, 50, 15), 1.3766, 5e-5);
  EXPECT_NEAR(sep_limit(1.0, 100, 15), 1.3386, 5e-5);
  EXPECT_NEAR(sep_limit(1.0, 50, 20), 1.3411, 5e-5);
  EXPECT_NEAR(sep_limit(1.0, 100, 20), 1.3006, 5e-5);
}

TEST(ErrorStatistics, BiasLimitInUnitsOfSepGivesTheWorkedTable) {
  // t(0.975; n - 1) / sqrt(n), worked to four decimals.
  const std::pair<Index, double> rows[] = {{5, 1.2417},  {10, 0.7154}, {15, 0.5538},
                                           {20, 0.4680}, {30, 0.3734}, {50, 0.2842}};
  for (const auto& [n, want] : rows) {
    const Vector reference = Vector::LinSpaced(n, 0.0, 1.0);
    const Vector predicted = reference + Vector::LinSpaced(n, -1.0, 1.0);
    const ErrorStatistics s = error_statistics(reference, predicted);
    EXPECT_NEAR(s.bias_limit / s.sep, want, 5e-5) << "n = " << n;
  }
}

TEST(ErrorStatistics, EquivalenceGivesTheWorkedPValue) {
  const ErrorStatistics s = error_statistics(twelve_references(), twelve_estimates());
  EXPECT_TRUE(expect_close(equivalence_p(s, 0.03), 0.0172095, kSevenDecimals));
  EXPECT_GT(equivalence_p(s, 0.015), 0.49);  // bias at the margin: even odds
}

TEST(ErrorStatistics, CorrectionTestsGiveTheWorkedNestedF) {
  const CorrectionTests tests = correction_tests(twelve_references(), twelve_estimates());
  EXPECT_TRUE(expect_close(tests.rss_none, 0.0078, {.relative = 1e-12, .absolute = 0.0}));
  EXPECT_TRUE(expect_close(tests.rss_bias, 0.0051, {.relative = 1e-12, .absolute = 0.0}));
  EXPECT_TRUE(expect_close(tests.rss_slope, 0.00471031479, kPrinted));
  EXPECT_TRUE(expect_close(tests.f_bias, 5.8235294, kSevenDecimals));
  EXPECT_TRUE(expect_close(tests.f_bias_limit, 4.8443357, kSevenDecimals));
  EXPECT_TRUE(expect_close(tests.f_slope, 0.8273018, kSevenDecimals));
  EXPECT_TRUE(expect_close(tests.f_slope_limit, 4.9646027, kSevenDecimals));
}

TEST(ErrorStatistics, NorrisReadAsReferenceAndEstimateIsFoundBiased) {
  // NIST Norris, x as reference and y as estimate; worked in exact arithmetic.
  std::ifstream file(std::string(BANDWRIGHT_TEST_DATA) + "/nist_strd/Norris.csv");
  std::string line;
  std::getline(file, line);
  std::vector<double> x;
  std::vector<double> y;
  while (std::getline(file, line)) {
    const auto comma = line.find(',');
    y.push_back(std::stod(line.substr(0, comma)));
    x.push_back(std::stod(line.substr(comma + 1)));
  }
  const Vector reference = Eigen::Map<Vector>(x.data(), static_cast<Index>(x.size()));
  const Vector estimate = Eigen::Map<Vector>(y.data(), static_cast<Index>(y.size()));
  const ErrorStatistics s = error_statistics(reference, estimate);
  EXPECT_TRUE(expect_close(s.bias, 0.625, {.relative = 1e-12, .absolute = 0.0}));
  EXPECT_TRUE(expect_close(s.sep, 1.141521541, {.relative = 1e-9, .absolute = 0.0}));
  EXPECT_TRUE(expect_close(s.rmsep, 1.287439319, {.relative = 1e-9, .absolute = 0.0}));
  EXPECT_TRUE(expect_close(s.bias_t, 3.285089, {.relative = 2e-7, .absolute = 0.0}));
  EXPECT_TRUE(expect_close(s.joint_f, 21.110035, {.relative = 3e-8, .absolute = 0.0}));
  EXPECT_TRUE(expect_close(s.joint_f_limit, 3.275898, {.relative = 2e-7, .absolute = 0.0}));
}

TEST(ErrorStatistics, AgreesWithAGeneralStatisticsLibraryOnOpenData) {
  // Paired t test and regression by SciPy (tests/data/*/reference_results/comparison.json). Its
  // regression is of predicted on reference, so the joint F can be compared.
  for (const char* set : {"beerlambert4", "meats"}) {
    std::ifstream file(std::string(BANDWRIGHT_TEST_DATA) + "/" + set + "/reference_results/comparison.json");
    const auto json = nlohmann::json::parse(file);
    const auto vector_of = [&](const char* key) {
      const auto values = json.at(key).get<std::vector<double>>();
      return Vector(Eigen::Map<const Vector>(values.data(), static_cast<Index>(values.size())));
    };
    const ErrorStatistics s = error_statistics(vector_of("reference"), vector_of("first"));
    const auto& paired = json.at("paired_t_first_minus_reference");
    EXPECT_TRUE(expect_close(s.bias, paired.at("mean_difference").get<double>(), kLibrary)) << set;
    EXPECT_TRUE(expect_close(s.sep, paired.at("sd_n_minus_1").get<double>(), kLibrary)) << set;
    EXPECT_TRUE(expect_close(s.bias_t, std::abs(paired.at("t").get<double>()), kLibrary)) << set;
    EXPECT_TRUE(expect_close(s.bias_p, paired.at("p_two_sided").get<double>(), kLibrary)) << set;
    const auto& regression = json.at("regression_first_on_reference");
    EXPECT_TRUE(expect_close(s.correlation_squared, regression.at("r_squared").get<double>(), kLibrary))
        << set;
    EXPECT_TRUE(expect_close(s.joint_f, regression.at("joint_f_intercept_0_slope_1").get<double>(), kLibrary))
        << set;
  }
}

TEST(ErrorStatistics, RmsepIsMadeOfBiasAndSep) {
  const ErrorStatistics s = error_statistics(twelve_references(), twelve_estimates());
  const double n = 12.0;
  EXPECT_TRUE(expect_close(s.rmsep * s.rmsep, s.bias * s.bias + (n - 1.0) / n * s.sep * s.sep,
                           {.relative = 1e-13, .absolute = 0.0}));
}

TEST(ErrorStatistics, PerfectAgreementLeavesRatiosUndefinedNotInfinite) {
  const Vector reference = Vector::LinSpaced(5, 0.0, 1.0);
  const ErrorStatistics s = error_statistics(reference, reference);
  EXPECT_EQ(s.rmsep, 0.0);
  EXPECT_TRUE(std::isnan(s.bias_t));
  EXPECT_TRUE(std::isnan(s.rpd));
  EXPECT_EQ(s.r2, 1.0);
}

TEST(ErrorStatistics, TwoSamplesHaveNoSlopeTest) {
  const ErrorStatistics s = error_statistics(Vector{{0.0, 1.0}}, Vector{{0.1, 1.2}});
  EXPECT_TRUE(std::isnan(s.slope));
  EXPECT_TRUE(std::isnan(s.joint_f));
  EXPECT_TRUE(std::isfinite(s.sep));
}

TEST(ErrorStatistics, RefusesTooFewOrUnequalValues) {
  try {
    static_cast<void>(error_statistics(Vector::Ones(1), Vector::Ones(1)));
    FAIL() << "one sample was accepted";
  } catch (const Error& error) {
    EXPECT_STREQ(error.what(), "predicted and reference values exist for 1 sample; at least 2 are needed");
  }
  EXPECT_THROW(static_cast<void>(error_statistics(Vector::Ones(3), Vector::Ones(4))), Error);
}

}  // namespace
}  // namespace bandwright
