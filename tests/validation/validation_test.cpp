// SPDX-License-Identifier: Apache-2.0
#include "validation/validation.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <limits>

#include "support/close.hpp"
#include "support/toy_standards.hpp"

namespace bandwright {
namespace {

Validation validate_toy(const Model& model, const ToySet& set) {
  WorkerPool pool(1);
  return validate(model, set.spectra, set.reference, pool);
}

TEST(Validation, StatisticsAreThoseOfTheSampleMeans) {
  const Model model = toy_model();
  const ToySet set = toy_set("V", 25, 2, 21);
  const Validation validation = validate_toy(model, set);
  ASSERT_EQ(validation.components.size(), 2U);
  const ComponentValidation& acid = validation.components[0];
  EXPECT_EQ(acid.errors.n, 25);  // samples, not the 50 spectra
  for (Index i = 0; i < 25; ++i)
    EXPECT_EQ(acid.predicted[i],
              validation.prediction.samples[static_cast<std::size_t>(i)].components[0].value);
  const ErrorStatistics direct = error_statistics(set.reference.columns[0].values, acid.predicted);
  EXPECT_EQ(acid.errors.sep, direct.sep);
  EXPECT_EQ(acid.sep_limit,
            sep_limit(model.components[0].statistics.sec, model.components[0].statistics.sec_df, 25));
}

TEST(Validation, CoverageCountsReferenceValuesInsideTheirIntervals) {
  const Model model = toy_model();
  const ToySet set = toy_set("V", 25, 1, 22);
  const Validation validation = validate_toy(model, set);
  Index inside = 0;
  for (Index i = 0; i < 25; ++i) {
    const ComponentResult& r = validation.prediction.samples[static_cast<std::size_t>(i)].components[1];
    const double reference = set.reference.columns[1].values[i];
    if (r.low <= reference && reference <= r.high) ++inside;
  }
  EXPECT_EQ(validation.components[1].coverage, static_cast<double>(inside) / 25.0);
}

TEST(Validation, SampleWithoutAReferenceValueServesTheOtherComponent) {
  const Model model = toy_model();
  ToySet set = toy_set("V", 25, 1, 23);
  set.reference.columns[0].values[3] = std::numeric_limits<double>::quiet_NaN();
  const Validation validation = validate_toy(model, set);
  EXPECT_EQ(validation.components[0].errors.n, 24);
  EXPECT_EQ(validation.components[1].errors.n, 25);
}

TEST(Validation, WithoutCriteriaNothingIsJudged) {
  const Validation validation = validate_toy(toy_model(), toy_set("V", 25, 1, 24));
  EXPECT_FALSE(validation.passed().has_value());
  EXPECT_FALSE(validation.components[0].passed().has_value());
}

TEST(Validation, PassesOnlyWhenEveryCriterionOfEveryComponentIsMet) {
  Recipe recipe = toy_recipe();
  recipe.accept.all = {.sep_max = 1.0,
                       .rmsep_max = {},
                       .bias_margin = 0.5,
                       .coverage_min = 0.5,
                       .n_min = 20,
                       .range_min = 0.5,
                       .r2_min = {}};
  const ToySet set = toy_set("V", 25, 1, 25);
  EXPECT_EQ(validate_toy(toy_model(recipe), set).passed(), true);

  recipe.accept.per_component = {{.component = "water",
                                  .criteria = {.sep_max = 1e-6,
                                               .rmsep_max = {},
                                               .bias_margin = {},
                                               .coverage_min = {},
                                               .n_min = {},
                                               .range_min = {},
                                               .r2_min = {}}}};
  const Validation strict = validate_toy(toy_model(recipe), set);
  EXPECT_EQ(strict.components[0].passed(), true);
  EXPECT_EQ(strict.components[1].passed(), false);
  EXPECT_EQ(strict.passed(), false);
  EXPECT_EQ(strict.components[1].criteria[0].key, "sep_max");
  EXPECT_EQ(strict.components[1].criteria[0].limit, 1e-6);
  EXPECT_FALSE(strict.components[1].criteria[0].met);
}

TEST(Validation, BiasIsJudgedWithoutItsSign) {
  Recipe recipe = toy_recipe();
  recipe.accept.all.bias_margin = 0.05;
  const Model model = toy_model(recipe);
  for (const double shift : {-0.1, 0.1}) {
    ToySet set = toy_set("V", 25, 1, 26);
    set.reference.columns[0].values.array() += shift;
    const ComponentValidation acid = validate_toy(model, set).components[0];
    EXPECT_NEAR(acid.errors.bias, -shift, 0.02);
    EXPECT_EQ(acid.passed(), false);
    ASSERT_TRUE(acid.equivalence_p);
    EXPECT_GT(*acid.equivalence_p, 0.95);
  }
}

TEST(Validation, CorrectedRmsepGivesTheWorkedValue) {
  // RMSEP of twelve worked pairs with a reference error of 0.015 (60-digit arithmetic, ten printed).
  EXPECT_TRUE(expect_close(corrected_rmsep(0.0254950976, Vector::Constant(12, 0.015)), 0.0206155,
                           {.relative = 3e-6, .absolute = 0.0}));
  EXPECT_EQ(corrected_rmsep(0.01, Vector::Constant(5, 0.02)), 0.0);
}

TEST(Validation, LabErrorMayStandInAColumnOfTheReferenceTable) {
  Recipe recipe = toy_recipe();
  recipe.components[0].lab_error.column = "acid_sd";
  const Model model = toy_model(recipe);
  ToySet set = toy_set("V", 25, 1, 30);
  set.reference.columns.push_back({"acid_sd", "wt%", Vector::Constant(25, 1e-4)});
  const ComponentValidation acid = validate_toy(model, set).components[0];
  ASSERT_TRUE(acid.rmsep_corrected);
  EXPECT_TRUE(expect_close(*acid.rmsep_corrected, std::sqrt(acid.errors.rmsep * acid.errors.rmsep - 1e-8),
                           {.relative = 1e-12, .absolute = 0.0}));
  EXPECT_FALSE(validate_toy(model, set).components[1].rmsep_corrected);  // water has no lab_error
  set.reference.columns[2].values[4] = std::numeric_limits<double>::quiet_NaN();
  try {
    static_cast<void>(validate_toy(model, set));
    FAIL() << "a missing lab error was accepted";
  } catch (const Error& error) {
    EXPECT_STREQ(error.what(),
                 "toy.csv:6: column \"acid_sd\": the standard deviation of the reference value is missing or "
                 "negative");
  }
}

TEST(Validation, RefusesSamplesOfTheCalibration) {
  try {
    static_cast<void>(validate_toy(toy_model(), toy_set("S", 25, 1, 27)));
    FAIL() << "standards were accepted as an independent set";
  } catch (const Error& error) {
    EXPECT_STREQ(error.what(),
                 "sample \"S01\" is one of the model's standards (an independent set must hold no sample of "
                 "the calibration)");
  }
}

TEST(Validation, RefusesASetWithoutASpectrumForAnyRow) {
  ToySet set = toy_set("V", 25, 1, 28);
  for (std::string& sample : set.reference.samples) sample += "x";
  EXPECT_THROW(static_cast<void>(validate_toy(toy_model(), set)), Error);
}

TEST(Validation, WarnsOfTooFewSamplesAndOfFlags) {
  ToySet set = toy_set("V", 10, 1, 29);
  set.spectra.values(0, 20) = 2.5;  // saturated
  const Validation validation = validate_toy(toy_model(), set);
  ASSERT_GE(validation.warnings.size(), 2U);
  EXPECT_EQ(validation.warnings[0].text, "acid: 10 samples; infrared practice asks for 20 or more with " +
                                             std::to_string(toy_model().components[0].factors()) +
                                             " factors");
  EXPECT_EQ(validation.warnings[1].text, "acid: flagged, and counted in: 1 of 10 samples");
}

}  // namespace
}  // namespace bandwright
