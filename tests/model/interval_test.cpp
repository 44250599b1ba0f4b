// SPDX-License-Identifier: Apache-2.0
#include "model/interval.hpp"

#include <gtest/gtest.h>

#include <cmath>

#include "base/error.hpp"
#include "support/close.hpp"
#include "support/error_text.hpp"

namespace bandwright {
namespace {

/// 24 standards, 3 factors, centred: 20 degrees of freedom; SEC 0.02.
ComponentModel component() {
  ComponentModel model;
  model.name = "water";
  model.recipe.scaling = Scaling::Centre;
  model.statistics.samples = 24;
  model.statistics.sec = 0.02;
  model.statistics.sec_df = 20.0;
  return model;
}

Recipe recipe(IntervalAbout about = IntervalAbout::Reference) {
  Recipe asked;
  ComponentRecipe water;
  water.name = "water";
  asked.components.push_back(water);
  asked.interval.about = about;
  return asked;
}

// t(0.975; 20) = 2.0860, SEC 0.02, D2 = 0.25 with the 1/n of the mean: +-0.0466436 (60-digit arithmetic).
TEST(Interval, AboutTheReferenceValue) {
  const Uncertainty got = uncertainty_of(component(), recipe(), 0.5, 0.25 - 1.0 / 24.0);
  EXPECT_TRUE(expect_close(got.half_width, 0.0466436, {.absolute = 5.1e-8}));
  EXPECT_TRUE(expect_close(got.standard_error, 0.02 * std::sqrt(1.25), {.relative = 1e-14}));
  EXPECT_EQ(got.degrees_of_freedom, 20.0);
  EXPECT_FALSE(got.floored);
}

TEST(Interval, WithoutCentringNoMeanIsCounted) {
  ComponentModel model = component();
  model.recipe.scaling = Scaling::None;
  EXPECT_TRUE(
      expect_close(uncertainty_of(model, recipe(), 0.5, 0.25).half_width, 0.0466436, {.absolute = 5.1e-8}));
}

TEST(Interval, LevelChoosesTheQuantile) {
  Recipe asked = recipe();
  asked.interval.level = 0.90;  // t(0.95; 20) = 1.7247
  const Uncertainty got = uncertainty_of(component(), asked, 0.5, 0.25 - 1.0 / 24.0);
  EXPECT_TRUE(expect_close(got.half_width / got.standard_error, 1.7247, {.absolute = 5.1e-5}));
}

// s^2 = (1 + h) SEC^2 - s_ref^2 = 1.25 * 0.0004 - 0.015^2 = 0.000275.
TEST(Interval, AboutTheTrueValueTheReferenceErrorIsTakenOff) {
  Recipe asked = recipe(IntervalAbout::True);
  asked.components[0].lab_error.absolute = 0.015;
  const Uncertainty got = uncertainty_of(component(), asked, 0.5, 0.25 - 1.0 / 24.0);
  EXPECT_TRUE(expect_close(got.standard_error, std::sqrt(0.000275), {.relative = 1e-13}));
  EXPECT_FALSE(got.floored);
}

TEST(Interval, ReferenceErrorAboveEverythingIsFlooredAndSaid) {
  Recipe asked = recipe(IntervalAbout::True);
  asked.components[0].lab_error.absolute = 0.05;
  const Uncertainty got = uncertainty_of(component(), asked, 0.5, 0.1);
  EXPECT_EQ(got.standard_error, 0.0);
  EXPECT_EQ(got.half_width, 0.0);
  EXPECT_TRUE(got.floored);
}

TEST(Interval, ReferenceErrorGrowsWithTheValue) {
  LabError lab;
  lab.absolute = 0.03;
  lab.relative = 0.02;
  EXPECT_TRUE(expect_close(reference_error(lab, 2.0), 0.05, {.relative = 1e-14}));  // sqrt(0.03^2 + 0.04^2)
  EXPECT_TRUE(expect_close(reference_error(lab, -2.0), 0.05, {.relative = 1e-14}));
  EXPECT_EQ(reference_error({}, 2.0), 0.0);
}

TEST(Interval, WorseErrorOfAnIndependentSetCounts) {
  ComponentModel model = component();
  EXPECT_EQ(error_scale(model).basis, ErrorBasis::Calibration);
  model.validation =
      IndependentError{.samples = 12, .rmsep = 0.03, .sep = 0.025, .bias = 0.0, .set_digest = {}};
  const ErrorScale worse = error_scale(model);
  EXPECT_EQ(worse.value, 0.025);
  EXPECT_EQ(worse.degrees_of_freedom, 11.0);
  EXPECT_EQ(worse.basis, ErrorBasis::Validation);
  model.validation->sep = 0.015;
  const ErrorScale better = error_scale(model);
  EXPECT_EQ(better.value, 0.02);
  EXPECT_EQ(better.degrees_of_freedom, 20.0);
}

TEST(Interval, WithoutDegreesOfFreedomThereIsNoInterval) {
  ComponentModel model = component();
  model.statistics.sec_df = 0.0;
  EXPECT_EQ(
      error_text(ErrorKind::Numerical, [&] { static_cast<void>(uncertainty_of(model, recipe(), 0.5, 0.1)); })
          .rfind("the t quantile does not exist for", 0),
      0u);
}

}  // namespace
}  // namespace bandwright
