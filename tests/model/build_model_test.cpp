// SPDX-License-Identifier: Apache-2.0
#include "model/build_model.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cmath>
#include <limits>
#include <mutex>

#include "base/error.hpp"
#include "support/close.hpp"
#include "support/error_text.hpp"
#include "support/random_data.hpp"
#include "support/test_data.hpp"

namespace bandwright {
namespace {

constexpr Tolerance kReference{.relative = 1e-9, .absolute = 1e-9};  // values of size 1 to 10
// An error of 1e-8, where twelve factors explain 25 values almost wholly, is a difference of values rounded
// at 2e-15.
constexpr Tolerance kErrors{.relative = 1e-9, .absolute = 1e-14};

Recipe recipe_for(const std::vector<std::string>& components, Index max_factors = 12) {
  Recipe recipe;
  for (const std::string& name : components) {
    ComponentRecipe component;
    component.name = name;
    recipe.components.push_back(component);
  }
  recipe.regression.max_factors = max_factors;
  return recipe;
}

Model build(const Recipe& recipe, const SpectraSet& spectra, const ReferenceTable& reference,
            unsigned workers = 1) {
  WorkerPool pool(workers);
  return build_model(recipe, spectra, reference, pool);
}

TEST(BuildModel, StatisticsOfOpenDataAsTheReference) {
  const OpenData& data = beerlambert4();
  const Model model = build(recipe_for(data.properties), data.spectra_set(data.training),
                            data.reference_table(data.training), 2);
  const ReferenceResults fits = data.results("pls1");
  const ReferenceResults held_out = data.results("cross_validation");
  const ReferenceResults summary = data.results("summary");
  EXPECT_EQ(model.samples, 25);
  EXPECT_EQ(model.spectra, 25);
  ASSERT_EQ(model.components.size(), 4u);
  for (const ComponentModel& component : model.components) {
    SCOPED_TRACE(component.name);
    const std::string& name = component.name;
    const auto chosen =
        static_cast<Index>(summary.number({name, "factors_by_loo", "fewest_by_f_test_alpha_0.25"}));
    const std::string count = std::to_string(chosen);
    const Index at = chosen - 1;
    EXPECT_EQ(component.factors(), chosen);
    EXPECT_EQ(component.calibration.factors(), chosen);
    EXPECT_EQ(component.decision.rule, FactorRule::FTest);
    for (const auto& choice : component.decision.choices) {
      if (choice.rule == FactorRule::Minimum) {
        EXPECT_EQ(choice.factors,
                  static_cast<Index>(summary.number({name, "factors_by_loo", "least_press"})));
      }
    }

    ASSERT_EQ(component.curve.size(), 12u);
    const Vector rmsecv = held_out.numbers({name, "loo", "rmsecv"});
    const Vector press = held_out.numbers({name, "loo", "press"});
    const Vector bias = held_out.numbers({name, "loo", "bias"});
    for (std::size_t k = 0; k < 12; ++k) {
      const CurvePoint& point = component.curve[k];
      EXPECT_EQ(point.factors, static_cast<Index>(k) + 1);
      EXPECT_TRUE(expect_close(point.rmsecv, rmsecv[static_cast<Index>(k)], kErrors));
      EXPECT_TRUE(expect_close(point.press, press[static_cast<Index>(k)], kErrors));
      EXPECT_TRUE(expect_close(point.bias_cv, bias[static_cast<Index>(k)], kReference));
      EXPECT_TRUE(expect_close(point.rmsec, fits.number({name, std::to_string(k + 1), "rmsec"}), kErrors));
    }

    const CalibrationStatistics& s = component.statistics;
    EXPECT_EQ(s.samples, 25);
    EXPECT_EQ(s.sec_df, static_cast<double>(25 - chosen - 1));
    EXPECT_TRUE(expect_close(s.reference_sd, summary.number({name, "sd_training_n_minus_1"}), kErrors));
    EXPECT_TRUE(expect_close(s.rmsec, fits.number({name, count, "rmsec"}), kErrors));
    EXPECT_TRUE(expect_close(s.sec, fits.number({name, count, "sec"}), kErrors));
    EXPECT_TRUE(expect_close(s.rmsecv, rmsecv[at], kErrors));
    EXPECT_TRUE(expect_close(s.press, press[at], kErrors));
    EXPECT_TRUE(expect_close(s.bias_cv, bias[at], kReference));
    EXPECT_TRUE(expect_close(s.secv, held_out.numbers({name, "loo", "secv"})[at], kErrors));
    const double spread = s.reference_sd * s.reference_sd * 24.0;
    EXPECT_TRUE(expect_close(1.0 - s.r2, 25.0 * s.rmsec * s.rmsec / spread, {.relative = 1e-8}));
    EXPECT_TRUE(expect_close(1.0 - s.r2_cv, s.press / spread, {.relative = 1e-8}));

    EXPECT_TRUE(expect_close(component.evidence.fitted, fits.numbers({name, count, "fitted"}), kReference));
    EXPECT_TRUE(expect_close(component.evidence.cross_validated,
                             held_out.numbers({name, "loo", "predicted", count}), kReference));
    EXPECT_EQ(component.evidence.samples, component.evidence.spectrum_ids);
    EXPECT_EQ(component.limits.value_min, component.evidence.reference.minCoeff());
    EXPECT_EQ(component.limits.value_max, component.evidence.reference.maxCoeff());
  }
}

TEST(BuildModel, LimitsOfOpenDataAsTheReference) {
  const OpenData& data = beerlambert4();
  Recipe recipe = recipe_for({"A [g/L]"});
  recipe.regression.factors = Index{4};
  for (const auto& [text, significance] : {std::pair{"0.05", 0.05}, std::pair{"0.01", 0.01}}) {
    recipe.limits.significance = significance;
    const Model model = build(recipe, data.spectra_set(data.training), data.reference_table(data.training));
    const OutlierLimits& limits = model.components[0].limits;
    const ReferenceResults want = data.results("diagnostics");
    const auto limit = [&, level = std::string(text)](const char* key) {
      return want.number({"by_property", "A [g/L]", "by_factors", "4", "limits", level, key});
    };
    EXPECT_TRUE(expect_close(limits.t2, limit("t2_limit_new"), kErrors));
    EXPECT_TRUE(expect_close(limits.q_calibration, limit("q_limit_box"), kErrors));
    EXPECT_TRUE(expect_close(limits.q_jackson_mudholkar, limit("q_limit_jm"), kErrors));
    EXPECT_GT(limits.q, limits.q_calibration);  // a held-out residual is larger than a fitted one
    const StandardsEvidence& evidence = model.components[0].evidence;
    EXPECT_TRUE(expect_close(
        evidence.t2, want.numbers({"by_property", "A [g/L]", "by_factors", "4", "training", "hotelling_t2"}),
        kErrors));
    EXPECT_TRUE(expect_close(
        evidence.q, want.numbers({"by_property", "A [g/L]", "by_factors", "4", "training", "q"}), kErrors));
    EXPECT_EQ(limits.leverage_max, evidence.leverage.maxCoeff());
  }
}

/// Spectra of 14 samples in which component "a" (weights 1, spread over all points) and "b" are mixed.
struct Made {
  SpectraSet spectra;
  ReferenceTable table;
};

Made made_mixtures(Index samples = 14) {
  constexpr Index kPoints = 9;
  const Matrix amounts = random_matrix(1, samples, 2).array() + 1.0;
  const Matrix pure = 0.4 * random_matrix(2, 2, kPoints).cwiseAbs();  // absorbances below 1.6
  Made made;
  made.spectra.axis = Axis(Vector::LinSpaced(kPoints, 1000, 1016), AxisUnit::Wavenumber);
  made.spectra.ordinate = Ordinate::Absorbance;
  made.spectra.values = amounts * pure + 0.01 * random_matrix(3, samples, kPoints);
  for (Index i = 0; i < samples; ++i) {
    const std::string name = "S" + std::to_string(10 + i);
    made.spectra.ids.push_back(name);
    made.spectra.origins.push_back({"s.csv", static_cast<std::size_t>(i) + 2});
    made.table.samples.push_back(name);
    made.table.origins.push_back({"r.csv", static_cast<std::size_t>(i) + 2});
  }
  made.table.columns.push_back({"a", "wt%", amounts.col(0)});
  made.table.columns.push_back({"b", "", amounts.col(1)});
  return made;
}

/// Each spectrum twice, as replicates -r1 and -r2.
SpectraSet doubled(const SpectraSet& spectra) {
  SpectraSet twice = spectra;
  twice.values.resize(2 * spectra.size(), spectra.points());
  twice.ids.clear();
  twice.origins.clear();
  for (Index i = 0; i < twice.values.rows(); ++i) {
    const auto row = static_cast<std::size_t>(i / 2);
    twice.values.row(i) = spectra.values.row(i / 2);
    twice.ids.push_back(spectra.ids[row] + (i % 2 == 0 ? "-r1" : "-r2"));
    twice.origins.push_back(spectra.origins[row]);
  }
  return twice;
}

TEST(BuildModel, CopiesAsReplicatesChangeNothing) {
  const Made made = made_mixtures();
  Recipe recipe = recipe_for({"a"}, 4);
  const ComponentModel single = build(recipe, made.spectra, made.table).components[0];
  recipe.replicate_mark = "-r";
  const Model model = build(recipe, doubled(made.spectra), made.table);
  const ComponentModel& copies = model.components[0];
  EXPECT_EQ(model.samples, 14);
  EXPECT_EQ(model.spectra, 28);
  EXPECT_EQ(copies.statistics.samples, 14);
  EXPECT_EQ(copies.statistics.spectra, 28);
  EXPECT_EQ(copies.factors(), single.factors());
  constexpr Tolerance kRounding{.relative = 1e-10};
  EXPECT_TRUE(expect_close(copies.statistics.sec, single.statistics.sec, kRounding));
  EXPECT_TRUE(expect_close(copies.statistics.rmsecv, single.statistics.rmsecv, kRounding));
  EXPECT_TRUE(expect_close(copies.statistics.secv, single.statistics.secv, kRounding));
  EXPECT_TRUE(expect_close(copies.statistics.r2_cv, single.statistics.r2_cv, kRounding));
  EXPECT_TRUE(expect_close(copies.statistics.reference_sd, single.statistics.reference_sd, kRounding));
  EXPECT_TRUE(expect_close(copies.limits.q_jackson_mudholkar, single.limits.q_jackson_mudholkar, kRounding));
  for (Index i = 0; i < 28; ++i)
    EXPECT_TRUE(expect_close(copies.evidence.t2[i], single.evidence.t2[i / 2], kRounding));
}

TEST(BuildModel, SamplesWithoutAValueServeOnlyTheOtherComponents) {
  Made made = made_mixtures();
  made.table.columns[0].values[3] = std::numeric_limits<double>::quiet_NaN();
  const Model model = build(recipe_for({"a", "b"}, 3), made.spectra, made.table);
  EXPECT_EQ(model.samples, 14);
  EXPECT_EQ(model.components[0].statistics.samples, 13);
  EXPECT_EQ(model.components[1].statistics.samples, 14);
  EXPECT_EQ(model.components[0].evidence.samples.size(), 13u);
  EXPECT_THAT(model.components[0].evidence.samples, testing::Not(testing::Contains("S13")));

  // As if the sample were not there at all.
  Made without = made_mixtures();
  Recipe recipe = recipe_for({"a"}, 3);
  recipe.exclusions = {{"S13", "", "lost"}};
  const Model other = build(recipe, without.spectra, without.table);
  EXPECT_EQ(other.samples, 13);
  EXPECT_TRUE(other.components[0].evidence.cross_validated == model.components[0].evidence.cross_validated);
  EXPECT_EQ(other.components[0].statistics.rmsecv, model.components[0].statistics.rmsecv);
}

TEST(BuildModel, GroupsStayTogetherInTheCrossValidation) {
  Made made = made_mixtures();
  for (Index i = 0; i < 14; ++i) made.table.groups.push_back("batch " + std::to_string(i % 7));
  const ComponentModel grouped = build(recipe_for({"a"}, 2), made.spectra, made.table).components[0];
  // Interleaved in seven folds holds out samples i and i + 7 together: the same folds.
  made.table.groups.clear();
  Recipe recipe = recipe_for({"a"}, 2);
  recipe.cross_validation.scheme = FoldScheme::Interleaved;
  recipe.cross_validation.folds = 7;
  const ComponentModel interleaved = build(recipe, made.spectra, made.table).components[0];
  EXPECT_TRUE(grouped.evidence.cross_validated == interleaved.evidence.cross_validated);
}

TEST(BuildModel, ComponentsMayOverrideWhatThePlanSays) {
  const Made made = made_mixtures();
  Recipe recipe = recipe_for({"first", "b"}, 4);
  recipe.windows = {{"low", 1000, 1007, {}}, {"high", 1008, 1016, {}}};
  ComponentRecipe& first = recipe.components[0];
  first.column = "a";
  first.unit = "% m/m";
  first.windows = {"high"};
  first.factors = Index{2};
  first.scaling = Scaling::UnitVariance;
  first.steps = std::vector<Step>{Snv{}};
  const Model model = build(recipe, made.spectra, made.table);
  const ComponentModel& a = model.components[0];
  EXPECT_EQ(a.name, "first");
  EXPECT_EQ(a.unit, "% m/m");
  EXPECT_EQ(a.factors(), 2);
  EXPECT_EQ(a.decision.rule, std::nullopt);
  EXPECT_EQ(a.decision.rule_text(), "fixed");
  EXPECT_EQ(a.recipe.scaling, Scaling::UnitVariance);
  EXPECT_EQ(a.calibration.chain.points(), 5);
  EXPECT_EQ(a.curve.size(), 4u);
  const ComponentModel& b = model.components[1];
  EXPECT_EQ(b.unit, "");
  EXPECT_EQ(b.decision.rule, FactorRule::FTest);
  EXPECT_EQ(b.calibration.chain.points(), 9);
  EXPECT_EQ(b.recipe.scaling, Scaling::Centre);
}

TEST(BuildModel, UnitComesFromTheTable) {
  const Made made = made_mixtures();
  EXPECT_EQ(build(recipe_for({"a"}, 2), made.spectra, made.table).components[0].unit, "wt%");
}

TEST(BuildModel, SameBitsForAnyNumberOfWorkers) {
  const OpenData& data = beerlambert4();
  Recipe recipe = recipe_for({"B [g/L]"}, 6);
  recipe.cross_validation.scheme = FoldScheme::Random;
  recipe.cross_validation.folds = 5;
  recipe.cross_validation.repeats = 3;
  const SpectraSet spectra = data.spectra_set(data.training);
  const ReferenceTable table = data.reference_table(data.training);
  const ComponentModel want = build(recipe, spectra, table, 1).components[0];
  for (const unsigned workers : {2U, 4U}) {
    const ComponentModel got = build(recipe, spectra, table, workers).components[0];
    EXPECT_EQ(got.factors(), want.factors());
    EXPECT_TRUE(got.calibration.path.rotations == want.calibration.path.rotations);
    EXPECT_TRUE(got.evidence.cross_validated == want.evidence.cross_validated);
    EXPECT_EQ(got.statistics.rmsecv, want.statistics.rmsecv);
    EXPECT_EQ(got.limits.q, want.limits.q);
    EXPECT_EQ(got.limits.q_jackson_mudholkar, want.limits.q_jackson_mudholkar);
  }
}

TEST(BuildModel, ProgressNamesTheComponentAndCountsItsFolds) {
  const Made made = made_mixtures();
  WorkerPool pool(2);
  std::mutex mutex;
  std::map<std::string, std::size_t> calls;
  static_cast<void>(build_model(recipe_for({"a", "b"}, 2), made.spectra, made.table, pool,
                                [&](const std::string& component, std::size_t done, std::size_t total) {
                                  const std::lock_guard guard(mutex);
                                  EXPECT_EQ(total, 14u);
                                  EXPECT_LE(done, 14u);
                                  ++calls[component];
                                }));
  EXPECT_EQ(calls, (std::map<std::string, std::size_t>{{"a", 14}, {"b", 14}}));
}

TEST(BuildModel, WarningsSayWhatAnAnalystShouldKnow) {
  Made made = made_mixtures();
  made.spectra.values(2, 4) = 2.5;
  Recipe recipe = recipe_for({"a"}, 20);
  recipe.regression.factors = Index{2};
  const Model model = build(recipe, made.spectra, made.table);
  std::vector<std::string> texts;
  for (const Warning& warning : model.warnings) texts.push_back(warning.text);
  EXPECT_THAT(
      texts, testing::ElementsAre("a: 14 standards for 2 factors; infrared practice asks for 24 or more",
                                  "a: the error curve ends at 9 factors, not 20: the standards carry no more",
                                  "a: saturated inside the windows (above 2): 1 standard spectrum"));
}

TEST(BuildModel, SpectrumThatCannotBeTreatedIsRefusedByName) {
  Made made = made_mixtures();
  made.spectra.values.row(3).setConstant(0.2);
  Recipe recipe = recipe_for({"a"}, 3);
  recipe.pretreatment.steps = {Snv{}};
  EXPECT_EQ(
      error_text(ErrorKind::Numerical, [&] { static_cast<void>(build(recipe, made.spectra, made.table)); }),
      "s.csv:5: spectrum \"S13\": snv cannot be computed: the spectrum is constant in window \"all\" "
      "(leave it out with [[exclude]])");
}

TEST(BuildModel, RefusalsNameTheComponent) {
  const Made made = made_mixtures();
  Recipe recipe = recipe_for({"a"}, 4);
  const auto refused = [&](ErrorKind kind, const Made& data) {
    return error_text(kind, [&] { static_cast<void>(build(recipe, data.spectra, data.table)); });
  };
  recipe.regression.factors = Index{5};
  EXPECT_EQ(refused(ErrorKind::Numerical, made),
            "component \"a\": 5 factors are asked for, but these standards carry no more than 4");
  recipe.regression.factors = FactorRule::FTest;

  Made constant = made;
  constant.table.columns[0].values.setConstant(0.1);
  EXPECT_EQ(refused(ErrorKind::Numerical, constant),
            "component \"a\": no factor can be computed: the reference values or the spectra do not vary");

  Made few = made;
  few.table.columns[0].values.tail(12).setConstant(std::numeric_limits<double>::quiet_NaN());
  EXPECT_EQ(refused(ErrorKind::Input, few),
            "component \"a\": only 2 standards with a reference value; at least 3 are needed");

  recipe.cross_validation.scheme = FoldScheme::Blocks;
  recipe.cross_validation.folds = 15;
  EXPECT_EQ(refused(ErrorKind::Usage, made), "[cross_validation] folds: 15 folds, but only 14 samples");
}

}  // namespace
}  // namespace bandwright
