// SPDX-License-Identifier: Apache-2.0
#include "resampling/factor_rules.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <limits>

#include "base/error.hpp"
#include "numerics/distributions.hpp"
#include "resampling/held_out.hpp"
#include "support/close.hpp"
#include "support/error_text.hpp"
#include "support/small_oracles.hpp"

namespace bandwright {
namespace {

/// Squared errors of `samples` samples whose column sums are `press`; all samples alike.
Matrix alike(const std::vector<double>& press, Index samples) {
  Matrix squares(samples, static_cast<Index>(press.size()));
  for (Index k = 0; k < squares.cols(); ++k)
    squares.col(k).setConstant(press[static_cast<std::size_t>(k)] / static_cast<double>(samples));
  return squares;
}

Matrix squared_errors_of_eight_by_five() {
  namespace d = eight_by_five;
  const TrainingData data{.axis = d::axis(),
                          .spectra = d::spectra(),
                          .reference = d::reference(),
                          .sample_of_row = {0, 1, 2, 3, 4, 5, 6, 7},
                          .row_weights = Vector::Ones(8)};
  const CalibrationRecipe recipe{.windows = {whole_axis(data.axis)}, .steps = {}, .max_factors = d::kFactors};
  WorkerPool pool(1);
  return squared_errors_by_sample(refit_folds(recipe, data, make_folds({}, 8, {}), pool), data);
}

// Worked in 60-digit arithmetic: PRESS is least at 3 factors; the F ratio of 2 factors is 1.0987, below
// F(0.75; 8, 8) = 1.6396; its mean square 0.00815312 is within 0.00742063 + 0.00317667.
TEST(FactorRules, SmallSetChoosesTwoWhereTheMinimumIsThree) {
  const Matrix squares = squared_errors_of_eight_by_five();
  constexpr Tolerance kPrinted{.absolute = 5.1e-9};  // eight decimals printed
  const double least = squares.col(2).sum();
  EXPECT_TRUE(expect_close(squares.col(1).sum() / least, 1.0987, {.relative = 5e-5}));  // five digits printed
  EXPECT_TRUE(expect_close(squares.col(1).mean(), 0.00815312, kPrinted));
  EXPECT_TRUE(expect_close(squares.col(2).mean(), 0.00742063, kPrinted));
  const double deviation = std::sqrt((squares.col(2).array() - squares.col(2).mean()).square().sum() / 7.0);
  EXPECT_TRUE(expect_close(deviation / std::sqrt(8.0), 0.00317667, kPrinted));

  EXPECT_EQ(choose_factors(FactorRule::Minimum, squares), 3);
  EXPECT_EQ(choose_factors(FactorRule::FTest, squares), 2);
  EXPECT_EQ(choose_factors(FactorRule::OneStandardError, squares), 2);
}

TEST(FactorRules, MinimumTakesTheFewerFactorsAmongEquals) {
  EXPECT_EQ(choose_factors(FactorRule::Minimum, alike({3.0, 1.0 + 5e-10, 1.0, 2.0}, 5)), 2);
  EXPECT_EQ(choose_factors(FactorRule::Minimum, alike({3.0, 1.0 + 5e-9, 1.0, 2.0}, 5)), 3);
  EXPECT_EQ(choose_factors(FactorRule::Minimum, alike({0.0, 0.0}, 2)), 1);
  EXPECT_EQ(choose_factors(FactorRule::Minimum, alike({4.0}, 2)), 1);
}

// F(0.75; n, n), tabulated (60-digit arithmetic): n = 8 1.6396, 20 1.3580, 100 1.1449.
TEST(FactorRules, FTestChangesSidesAtTheTabulatedRatio) {
  for (const auto& [samples, ratio] : {std::pair<Index, double>{8, 1.6396}, {20, 1.3580}, {100, 1.1449}}) {
    constexpr double kLastDigit = 1e-4;
    EXPECT_EQ(choose_factors(FactorRule::FTest, alike({9.0, ratio - kLastDigit, 1.0}, samples)), 2);
    EXPECT_EQ(choose_factors(FactorRule::FTest, alike({9.0, ratio + kLastDigit, 1.0}, samples)), 3);
  }
}

TEST(FactorRules, FTestLooksOnlyBelowTheMinimum) {
  EXPECT_EQ(choose_factors(FactorRule::FTest, alike({9.0, 1.0, 1.05, 1.02}, 20)), 2);
}

TEST(FactorRules, OneStandardErrorUsesTheSpreadAtTheMinimum) {
  // At 2 factors e^2 is 0 or 2: mean 1, sd 2 / sqrt(3) with n = 4, standard error 1 / sqrt(3) = 0.57735.
  Matrix squares(4, 2);
  squares << 1.577, 0, 1.577, 0, 1.577, 2, 1.577, 2;
  EXPECT_EQ(choose_factors(FactorRule::OneStandardError, squares), 1);
  squares.col(0).setConstant(1.578);
  EXPECT_EQ(choose_factors(FactorRule::OneStandardError, squares), 2);
}

TEST(FactorRules, OneStandardErrorIsTheMinimumWhereErrorsAreAlike) {
  EXPECT_EQ(choose_factors(FactorRule::OneStandardError, alike({2.0, 1.001, 1.0}, 6)), 3);
}

TEST(FactorRules, ErrorsThatAreNoneAreRefused) {
  Matrix broken = alike({2.0, 1.0}, 4);
  broken(2, 1) = std::numeric_limits<double>::quiet_NaN();
  for (const auto& [rule, text] : EnumTexts<FactorRule>::entries) {
    for (const Matrix& squares : {alike({2.0, 1.0}, 1), Matrix(4, 0), Matrix(0, 3), broken})
      EXPECT_EQ(error_text(ErrorKind::Numerical, [&] { static_cast<void>(choose_factors(rule, squares)); }),
                "a factor rule needs the held-out errors of at least two samples");
  }
}

}  // namespace
}  // namespace bandwright
