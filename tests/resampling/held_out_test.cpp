// SPDX-License-Identifier: Apache-2.0
#include "resampling/held_out.hpp"

#include <gtest/gtest.h>

#include <atomic>
#include <cmath>
#include <mutex>
#include <set>

#include "base/error.hpp"
#include "support/close.hpp"
#include "support/error_text.hpp"
#include "support/small_oracles.hpp"
#include "support/test_data.hpp"

namespace bandwright {
namespace {

namespace small = eight_by_five;

TrainingData one_spectrum_a_sample(const Axis& axis, Matrix spectra, Vector reference) {
  TrainingData data{.axis = axis,
                    .spectra = std::move(spectra),
                    .reference = std::move(reference),
                    .sample_of_row = {},
                    .row_weights = {}};
  for (Index i = 0; i < data.spectra.rows(); ++i) data.sample_of_row.push_back(i);
  data.row_weights = Vector::Ones(data.spectra.rows());
  return data;
}

TrainingData small_set() {
  return one_spectrum_a_sample(small::axis(), small::spectra(), small::reference());
}

TrainingData training_set(const OpenData& data, Index property) {
  return one_spectrum_a_sample(data.axis, data.spectra_at(data.training),
                               data.reference_at(property, data.training));
}

CalibrationRecipe recipe_for(const Axis& axis, Index factors, Scaling scaling = Scaling::Centre,
                             std::vector<Step> steps = {}) {
  return {
      .windows = {whole_axis(axis)}, .steps = std::move(steps), .scaling = scaling, .max_factors = factors};
}

CrossValidation scheme(FoldScheme scheme, Index folds = 10) {
  CrossValidation options;
  options.scheme = scheme;
  options.folds = folds;
  return options;
}

// Worked in 60-digit arithmetic by two routes.
TEST(HeldOut, SmallSetLeaveOneOut) {
  constexpr Tolerance kPrinted{.relative = 1e-8};  // nine digits printed and more
  const TrainingData data = small_set();
  WorkerPool pool(1);
  const HeldOut got = refit_folds(recipe_for(data.axis, small::kFactors), data, make_folds({}, 8, {}), pool);
  EXPECT_TRUE(expect_close(got.predicted.col(1), small::left_out_2(), kPrinted));
  const Vector press = squared_errors_by_sample(got, data).colwise().sum();
  EXPECT_TRUE(expect_close(press, small::press(), kPrinted));
  EXPECT_TRUE(expect_close((press / 8.0).cwiseSqrt(), small::rmsecv(), kPrinted));
}

// T2 and Q of a held-out sample are those of a new spectrum to the model of the others.
TEST(HeldOut, T2AndQAreThoseOfAForeignSpectrum) {
  const TrainingData data = small_set();
  WorkerPool pool(1);
  const HeldOut got = refit_folds(recipe_for(data.axis, 3), data, make_folds({}, 8, {}), pool);
  for (Index left_out = 0; left_out < 8; ++left_out) {
    std::vector<Index> others;
    for (Index i = 0; i < 8; ++i)
      if (i != left_out) others.push_back(i);
    const Matrix train = data.spectra(others, Eigen::all);
    const Vector reference = data.reference(others);
    const Calibration calibration =
        fit_calibration(recipe_for(data.axis, 3), data.axis, train, reference, Vector::Ones(7));
    const Projection one = project(calibration, data.spectra.row(left_out), 3);
    constexpr Tolerance kRounding{.relative = 1e-12};
    EXPECT_TRUE(expect_close(got.t2(left_out, 2), 6.0 * one.leverage[0], kRounding));  // (n - 1) h
    EXPECT_TRUE(expect_close(got.q(left_out, 2), one.q[0],
                             {.relative = 1e-10}));  // a difference of spectra of size 50
  }
}

TEST(HeldOut, SameBitsForAnyNumberOfWorkers) {
  const TrainingData data = training_set(beerlambert4(), 1);
  CrossValidation options = scheme(FoldScheme::Random, 6);
  options.repeats = 3;
  const std::vector<Fold> folds = make_folds(options, data.samples(), {});
  const CalibrationRecipe recipe =
      recipe_for(data.axis, 8, Scaling::UnitVariance, {SavitzkyGolay{9, 2, 1}, Snv{}});
  WorkerPool one(1);
  const HeldOut want = refit_folds(recipe, data, folds, one);
  for (const unsigned workers : {2U, 4U}) {
    WorkerPool pool(workers);
    const HeldOut got = refit_folds(recipe, data, folds, pool);
    EXPECT_EQ(got.row, want.row);
    EXPECT_EQ(got.repeat, want.repeat);
    EXPECT_TRUE(got.predicted == want.predicted);
    EXPECT_TRUE(got.t2 == want.t2);
    EXPECT_TRUE(got.q == want.q);
  }
}

TEST(HeldOut, EntriesComeInOrderOfRepeatThenRow) {
  const TrainingData data = small_set();
  CrossValidation options = scheme(FoldScheme::Random, 3);
  options.repeats = 4;
  WorkerPool pool(2);
  const HeldOut got = refit_folds(recipe_for(data.axis, 2), data, make_folds(options, 8, {}), pool);
  ASSERT_EQ(got.row.size(), 32u);
  EXPECT_EQ(got.repeats, 4);
  for (std::size_t e = 0; e < got.row.size(); ++e) {
    EXPECT_EQ(got.repeat[e], static_cast<Index>(e / 8));
    EXPECT_EQ(got.row[e], static_cast<Index>(e % 8));
  }
}

TEST(HeldOut, MeanOverRepeatsAndSquaredErrorsBySample) {
  // Sample 0 has spectra 0 and 1, sample 1 has spectrum 2, sample 2 (spectrum 3) is never held out.
  TrainingData data{.axis = small::axis(),
                    .spectra = Matrix::Zero(4, 5),
                    .reference = (Vector(4) << 1, 1, 5, 7).finished(),
                    .sample_of_row = {0, 0, 1, 2},
                    .row_weights = (Vector(4) << 0.5, 0.5, 1, 1).finished()};
  HeldOut held_out;
  held_out.row = {0, 1, 0, 1, 2};
  held_out.repeat = {0, 0, 1, 1, 1};
  held_out.repeats = 2;
  held_out.predicted = (Matrix(5, 1) << 2, 4, 3, 1, 8).finished();
  EXPECT_EQ(data.samples(), 3);

  const Matrix mean = held_out.mean_predicted(4);
  EXPECT_DOUBLE_EQ(mean(0, 0), 2.5);
  EXPECT_DOUBLE_EQ(mean(1, 0), 2.5);
  EXPECT_DOUBLE_EQ(mean(2, 0), 8.0);
  EXPECT_TRUE(std::isnan(mean(3, 0)));

  const Matrix squares = squared_errors_by_sample(held_out, data);
  ASSERT_EQ(squares.rows(), 2);
  EXPECT_DOUBLE_EQ(squares(0, 0), (1.0 + 9.0 + 4.0 + 0.0) / 4.0);
  EXPECT_DOUBLE_EQ(squares(1, 0), 9.0);
}

// Each spectrum copied as a replicate: every fold trains on the same samples, so nothing changes.
TEST(HeldOut, ReplicatesAreHeldOutTogether) {
  const TrainingData single = small_set();
  TrainingData twice{.axis = single.axis,
                     .spectra = Matrix(16, 5),
                     .reference = Vector(16),
                     .sample_of_row = {},
                     .row_weights = Vector::Constant(16, 0.5)};
  for (Index i = 0; i < 16; ++i) {
    twice.spectra.row(i) = single.spectra.row(i / 2);
    twice.reference[i] = single.reference[i / 2];
    twice.sample_of_row.push_back(i / 2);
  }
  WorkerPool pool(1);
  const std::vector<Fold> folds = make_folds({}, 8, {});
  for (const Scaling scaling : {Scaling::Centre, Scaling::UnitVariance}) {
    const CalibrationRecipe recipe = recipe_for(single.axis, 4, scaling);
    const HeldOut want = refit_folds(recipe, single, folds, pool);
    const HeldOut got = refit_folds(recipe, twice, folds, pool);
    constexpr Tolerance kRounding{.relative = 1e-10};
    for (Index i = 0; i < 16; ++i) {
      EXPECT_TRUE(
          expect_close(got.predicted.row(i).transpose(), want.predicted.row(i / 2).transpose(), kRounding));
      EXPECT_TRUE(expect_close(got.t2.row(i).transpose(), want.t2.row(i / 2).transpose(), kRounding));
    }
  }
}

TEST(HeldOut, ProgressCountsEveryFoldOnce) {
  const TrainingData data = small_set();
  const std::vector<Fold> folds = make_folds({}, 8, {});
  for (const unsigned workers : {1U, 3U}) {
    WorkerPool pool(workers);
    std::mutex mutex;
    std::multiset<std::size_t> seen;
    static_cast<void>(
        refit_folds(recipe_for(data.axis, 2), data, folds, pool, [&](std::size_t done, std::size_t total) {
          const std::lock_guard guard(mutex);
          EXPECT_EQ(total, 8u);
          seen.insert(done);
        }));
    EXPECT_EQ(seen, (std::multiset<std::size_t>{1, 2, 3, 4, 5, 6, 7, 8}));
  }
}

TEST(HeldOut, FactorNumbersEndWhereTheShortestFoldEnds) {
  const TrainingData data = small_set();
  WorkerPool pool(1);
  // Two folds of four: training sets of four samples carry three factors.
  EXPECT_EQ(
      refit_folds(recipe_for(data.axis, 5), data, make_folds(scheme(FoldScheme::Blocks, 2), 8, {}), pool)
          .factors(),
      3);
}

TEST(HeldOut, FoldThatExplainsEverythingEarlyKeepsItsLastPrediction) {
  TrainingData data = small_set();
  data.reference = 2.0 * data.spectra.col(1);
  data.spectra = Matrix(data.spectra.col(1));  // one variable, y in proportion: one factor is all
  data.axis = Axis(Vector::Constant(1, 1.0), AxisUnit::Nanometre);
  WorkerPool pool(1);
  const HeldOut got = refit_folds(recipe_for(data.axis, 3), data, make_folds({}, 8, {}), pool);
  ASSERT_EQ(got.factors(), 3);
  for (Index k = 0; k < 3; ++k)
    EXPECT_TRUE(expect_close(got.predicted.col(k), data.reference, {.relative = 1e-13}));
}

TEST(HeldOut, FoldsWithoutEnoughTrainingSamplesAreRefused) {
  TrainingData data = small_set();
  data.spectra = Matrix(data.spectra.topRows(2));
  data.reference = Vector(data.reference.head(2));
  data.sample_of_row.resize(2);
  data.row_weights = Vector::Ones(2);
  WorkerPool pool(1);
  EXPECT_EQ(error_text(ErrorKind::Numerical,
                       [&] {
                         static_cast<void>(
                             refit_folds(recipe_for(data.axis, 1), data, make_folds({}, 2, {}), pool));
                       }),
            "a cross-validation fold leaves fewer than two samples to train on");
}

TEST(HeldOut, FoldsOfSamplesWithoutAValueAreSkipped) {
  // Samples 2 and 5 of ten have no value for this component: their rows are missing, their numbers are not.
  TrainingData data = small_set();
  data.sample_of_row = {0, 1, 3, 4, 6, 7, 8, 9};
  WorkerPool pool(1);
  const HeldOut got = refit_folds(recipe_for(data.axis, 2), data, make_folds({}, 10, {}), pool);
  ASSERT_EQ(got.row.size(), 8u);
  EXPECT_TRUE(expect_close(got.predicted.col(1), small::left_out_2(), {.relative = 1e-8}));
}

}  // namespace
}  // namespace bandwright
