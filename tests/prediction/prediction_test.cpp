// SPDX-License-Identifier: Apache-2.0
#include "prediction/prediction.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>

#include "base/error.hpp"
#include "model/interval.hpp"
#include "numerics/distributions.hpp"
#include "support/close.hpp"
#include "support/toy_standards.hpp"

namespace bandwright {
namespace {

constexpr Tolerance kRoundOff{.relative = 1e-12, .absolute = 1e-14};

bool has(const ComponentResult& result, Flag flag) {
  return std::find(result.flags.begin(), result.flags.end(), flag) != result.flags.end();
}

Prediction predict_alone(const Model& model, const SpectraSet& spectra) {
  WorkerPool pool(1);
  return predict(model, spectra, pool);
}

TEST(Prediction, FindsTheCompositionOfNewSamples) {
  const Model model = toy_model();
  const ToySet fresh = toy_set("N", 20, 1, 8);
  const Prediction prediction = predict_alone(model, fresh.spectra);
  ASSERT_EQ(prediction.spectra.size(), 20U);
  for (std::size_t i = 0; i < 20; ++i)
    for (std::size_t c = 0; c < 2; ++c)  // five standard errors: no luck of the draw decides
      EXPECT_NEAR(prediction.spectra[i].components[c].value,
                  fresh.reference.columns[c].values[static_cast<Index>(i)],
                  5.0 * model.components[c].statistics.rmsecv);
}

TEST(Prediction, OneSpectrumAloneEqualsItselfAmongAThousandBitForBit) {
  const Model model = toy_model();
  const ToySet many = toy_set("N", 1000, 1, 9);
  WorkerPool two(2);
  const Prediction among = predict(model, many.spectra, two);
  for (const Index i : {Index{0}, Index{31}, Index{32}, Index{517}, Index{999}}) {
    const Prediction alone = predict_alone(model, subset(many.spectra, {i}));
    for (std::size_t c = 0; c < 2; ++c) {
      const ComponentResult& a = alone.spectra[0].components[c];
      const ComponentResult& b = among.spectra[static_cast<std::size_t>(i)].components[c];
      EXPECT_EQ(a.value, b.value);
      EXPECT_EQ(a.low, b.low);
      EXPECT_EQ(a.high, b.high);
      EXPECT_EQ(a.leverage, b.leverage);
      EXPECT_EQ(a.q, b.q);
    }
  }
}

TEST(Prediction, SameBitsForAnyNumberOfWorkers) {
  const Model model = toy_model();
  const ToySet many = toy_set("N", 150, 1, 10);
  const Prediction one = predict_alone(model, many.spectra);
  for (const unsigned workers : {2U, 4U}) {
    WorkerPool pool(workers);
    const Prediction other = predict(model, many.spectra, pool);
    for (std::size_t i = 0; i < one.spectra.size(); ++i)
      for (std::size_t c = 0; c < 2; ++c) {
        EXPECT_EQ(one.spectra[i].components[c].value, other.spectra[i].components[c].value);
        EXPECT_EQ(one.spectra[i].components[c].q, other.spectra[i].components[c].q);
      }
  }
}

TEST(Prediction, IntervalIsTheLeverageFormula) {
  const Model model = toy_model();
  const Prediction prediction = predict_alone(model, toy_set("N", 1, 1, 11).spectra);
  const ComponentModel& acid = model.components[0];
  const ComponentResult& r = prediction.spectra[0].components[0];
  const double n = 30.0;
  const double df = n - static_cast<double>(acid.factors()) - 1.0;
  const double half = t_quantile(0.975, df) * acid.statistics.sec * std::sqrt(1.0 + r.leverage + 1.0 / n);
  EXPECT_TRUE(expect_close(r.high - r.value, half, kRoundOff));
  EXPECT_TRUE(expect_close(r.value - r.low, half, kRoundOff));
  EXPECT_TRUE(expect_close(r.t2, (n - 1.0) * r.leverage, kRoundOff));
}

TEST(Prediction, RecordedValidationWidensIntervalsButNeverNarrowsThem) {
  Model model = toy_model();
  const SpectraSet spectra = toy_set("N", 1, 1, 11).spectra;
  const double sec = model.components[0].statistics.sec;
  const double before = predict_alone(model, spectra).spectra[0].components[0].standard_error;
  model.components[0].validation =
      IndependentError{.samples = 20, .rmsep = 0, .sep = 2.0 * sec, .bias = 0, .set_digest = {}};
  const double wider = predict_alone(model, spectra).spectra[0].components[0].standard_error;
  EXPECT_TRUE(expect_close(wider, 2.0 * before, kRoundOff));
  model.components[0].validation->sep = 0.5 * sec;
  EXPECT_EQ(predict_alone(model, spectra).spectra[0].components[0].standard_error, before);
}

TEST(Prediction, IntervalAboutTheTrueValueTakesTheLabErrorOff) {
  Recipe recipe = toy_recipe();
  const Model plain = toy_model(recipe);
  const double sec = plain.components[0].statistics.sec;
  recipe.interval.about = IntervalAbout::True;
  recipe.components[0].lab_error.absolute = 0.6 * sec;
  recipe.components[1].lab_error.absolute = 100.0;  // more than there is: floored, and said so
  const Model about_true = toy_model(recipe);
  const SpectraSet spectra = toy_set("N", 1, 1, 11).spectra;
  const auto with = predict_alone(plain, spectra).spectra[0].components;
  const auto without = predict_alone(about_true, spectra).spectra[0].components;
  EXPECT_TRUE(expect_close(without[0].standard_error,
                           std::sqrt(std::pow(with[0].standard_error, 2) - std::pow(0.6 * sec, 2)),
                           kRoundOff));
  EXPECT_FALSE(without[0].interval_floored);
  EXPECT_EQ(without[1].standard_error, 0.0);
  EXPECT_TRUE(without[1].interval_floored);
}

TEST(Prediction, FlagsAValueOutsideTheCalibratedRange) {
  const Model model = toy_model();
  ToySet fresh = toy_set("N", 1, 1, 12);
  fresh.spectra.values.array() = 0.1 + 3.0 * (fresh.spectra.values.array() - 0.1);  // three times the amount
  const ComponentResult acid = predict_alone(model, fresh.spectra).spectra[0].components[0];
  ASSERT_GT(acid.value, model.components[0].limits.value_max);
  EXPECT_TRUE(has(acid, Flag::OutsideRange));
  EXPECT_EQ(acid.verdict, Verdict::NotTrusted);
}

TEST(Prediction, FlagsABandThatNoStandardHas) {
  const Model model = toy_model();
  ToySet fresh = toy_set("N", 1, 1, 13);
  const auto clean = predict_alone(model, fresh.spectra).spectra[0].components[0];
  EXPECT_FALSE(has(clean, Flag::Unexplained));
  for (Index j = 0; j < fresh.spectra.points(); ++j)
    fresh.spectra.values(0, j) += 0.2 * std::exp(-std::pow((fresh.spectra.axis[j] - 1770.0) / 8.0, 2.0));
  const auto dirty = predict_alone(model, fresh.spectra).spectra[0].components[0];
  EXPECT_TRUE(has(dirty, Flag::Unexplained));
  EXPECT_EQ(dirty.verdict, Verdict::NotTrusted);
}

TEST(Prediction, FlagsASaturatedSpectrumOnlyInsideTheWindows) {
  const Model model = toy_model();
  ToySet fresh = toy_set("N", 1, 1, 14);
  fresh.spectra.values(0, fresh.spectra.points() - 1) = 5.0;  // 1644 cm-1, outside both windows
  EXPECT_FALSE(has(predict_alone(model, fresh.spectra).spectra[0].components[0], Flag::Saturated));
  fresh.spectra.values(0, 20) = 2.1;
  EXPECT_TRUE(has(predict_alone(model, fresh.spectra).spectra[0].components[0], Flag::Saturated));
}

TEST(Prediction, SampleIsTheMeanOfItsReplicatesWithTheirLargestDifference) {
  const Model model = toy_model();
  const ToySet fresh = toy_set("N", 2, 3, 15);
  const Prediction prediction = predict_alone(model, fresh.spectra);
  ASSERT_EQ(prediction.samples.size(), 2U);
  EXPECT_EQ(prediction.samples[0].sample, "N01");
  EXPECT_EQ(prediction.samples[0].replicates, 3);
  const double a = prediction.spectra[0].components[0].value;
  const double b = prediction.spectra[1].components[0].value;
  const double c = prediction.spectra[2].components[0].value;
  EXPECT_TRUE(expect_close(prediction.samples[0].components[0].value, (a + b + c) / 3.0, kRoundOff));
  EXPECT_EQ(prediction.samples[0].components[0].largest_difference,
            std::max({a, b, c}) - std::min({a, b, c}));
  EXPECT_FALSE(
      predict_alone(model, toy_set("N", 1, 1, 15).spectra).samples[0].components[0].largest_difference);
}

TEST(Prediction, FlagOfOneReplicateIsAFlagOfTheSample) {
  const Model model = toy_model();
  ToySet fresh = toy_set("N", 1, 2, 16);
  fresh.spectra.values(1, 20) = 2.1;
  EXPECT_TRUE(has(predict_alone(model, fresh.spectra).samples[0].components[0], Flag::Saturated));
}

TEST(Prediction, SpectrumThatCannotBeTreatedIsRefusedAloneAndTheOthersGoOn) {
  Recipe recipe = toy_recipe();
  recipe.pretreatment.steps = {Snv{}};
  const Model model = toy_model(recipe);
  ToySet fresh = toy_set("N", 3, 1, 17);
  fresh.spectra.values.row(1).setConstant(0.5);
  const Prediction prediction = predict_alone(model, fresh.spectra);
  EXPECT_FALSE(prediction.spectra[0].refused);
  EXPECT_EQ(prediction.spectra[1].refused,
            "snv cannot be computed: the spectrum is constant in window \"high\"");
  EXPECT_TRUE(prediction.spectra[1].components.empty());
  EXPECT_FALSE(prediction.spectra[2].refused);
  EXPECT_EQ(prediction.samples[1].replicates, 0);
  EXPECT_TRUE(prediction.samples[1].refused);
  const Prediction alone = predict_alone(model, subset(fresh.spectra, {2}));
  EXPECT_EQ(alone.spectra[0].components[0].value, prediction.spectra[2].components[0].value);
}

TEST(Prediction, RefusesAnotherAxisOrOrdinate) {
  const Model model = toy_model();
  ToySet fresh = toy_set("N", 1, 1, 18);
  fresh.spectra.axis = Axis(fresh.spectra.axis.positions().array() + 1.0, AxisUnit::Wavenumber);
  try {
    static_cast<void>(predict_alone(model, fresh.spectra));
    FAIL() << "a shifted axis was accepted";
  } catch (const Error& error) {
    EXPECT_STREQ(error.what(),
                 "the axis (40 points from 1801 to 1645 cm-1) is not that of the model (40 points from 1800 "
                 "to 1644 cm-1)");
  }
  fresh = toy_set("N", 1, 1, 18);
  fresh.spectra.ordinate = Ordinate::Transmittance;
  EXPECT_THROW(static_cast<void>(predict_alone(model, fresh.spectra)), Error);
  fresh = toy_set("N", 1, 1, 18);
  fresh.spectra.axis = Axis(fresh.spectra.axis.positions(), AxisUnit::Nanometre);
  EXPECT_THROW(static_cast<void>(predict_alone(model, fresh.spectra)), Error);
}

/// A result with standard error 1 and so many degrees of freedom that t is the normal quantile.
ComponentResult result_at(double value) {
  ComponentResult result;
  result.value = value;
  result.standard_error = 1.0;
  result.degrees_of_freedom = 1e9;
  return result;
}

TEST(Verdict, GuardBandIsTheOneSidedQuantile) {
  // One-sided risk 5 %: w = 1.645 u (ILAC-G8:09/2019; the factor from normal tables).
  ComponentRecipe limits;
  limits.spec_max = 10.0;
  EXPECT_EQ(judge(result_at(8.35), limits, 0.05), Verdict::Within);
  EXPECT_EQ(judge(result_at(8.36), limits, 0.05), Verdict::TooClose);
  EXPECT_EQ(judge(result_at(11.64), limits, 0.05), Verdict::TooClose);
  EXPECT_EQ(judge(result_at(11.65), limits, 0.05), Verdict::Outside);
}

TEST(Verdict, LowerLimitMirrorsTheUpperOne) {
  ComponentRecipe limits;
  limits.spec_min = 10.0;
  EXPECT_EQ(judge(result_at(11.65), limits, 0.05), Verdict::Within);
  EXPECT_EQ(judge(result_at(11.64), limits, 0.05), Verdict::TooClose);
  EXPECT_EQ(judge(result_at(8.36), limits, 0.05), Verdict::TooClose);
  EXPECT_EQ(judge(result_at(8.35), limits, 0.05), Verdict::Outside);
}

TEST(Verdict, LimitsCloserThanTheGuardBandsLeaveNoRoomForWithin) {
  ComponentRecipe limits;
  limits.spec_min = 9.0;
  limits.spec_max = 11.0;
  EXPECT_EQ(judge(result_at(10.0), limits, 0.05), Verdict::TooClose);
}

TEST(Verdict, FlagsComeFirstAndWithoutLimitsThereIsNone) {
  ComponentRecipe limits;
  EXPECT_EQ(judge(result_at(1.0), limits, 0.05), Verdict::NoLimits);
  ComponentResult flagged = result_at(1.0);
  flagged.flags = {Flag::Saturated};
  EXPECT_EQ(judge(flagged, limits, 0.05), Verdict::NotTrusted);
}

}  // namespace
}  // namespace bandwright
