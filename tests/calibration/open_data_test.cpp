// SPDX-License-Identifier: Apache-2.0
// Calibrations of two open data sets against reference results computed by other software (see SOURCE.md
// of each folder), themselves checked against 80-bit arithmetic: coefficients agree there within 8e-14
// in relative 2-norm, predictions within 1e-11.
#include <gtest/gtest.h>

#include <cmath>

#include "calibration/calibration.hpp"
#include "support/close.hpp"
#include "support/test_data.hpp"

namespace bandwright {
namespace {

constexpr Index kFactors = 12;
// The rounding of two programs after twelve factors on spectra with a condition number of 1e5.
constexpr Tolerance kCoefficients{.relative = 1e-9};
// Values are of size 1 to 100; a value near zero has no more correct decimals than its neighbours.
constexpr Tolerance kValues{.relative = 1e-9, .absolute = 1e-9};
// An error of 1e-8, where twelve factors explain 25 values of size 10 almost wholly, is a difference of
// values rounded at 2e-15.
constexpr Tolerance kErrors{.relative = 1e-9, .absolute = 1e-14};

CalibrationRecipe recipe_for(const OpenData& data, Scaling scaling, std::vector<Step> steps = {}) {
  return {.windows = {whole_axis(data.axis)},
          .steps = std::move(steps),
          .scaling = scaling,
          .max_factors = kFactors};
}

Calibration fit(const OpenData& data, Index property, Scaling scaling, std::vector<Step> steps = {}) {
  return fit_calibration(recipe_for(data, scaling, std::move(steps)), data.axis,
                         data.spectra_at(data.training), data.reference_at(property, data.training),
                         Vector::Ones(static_cast<Index>(data.training.size())));
}

double root_mean_square(const Vector& errors) {
  return std::sqrt(errors.squaredNorm() / static_cast<double>(errors.size()));
}

/// One property, all numbers of factors: coefficients (where they mean something), intercept, fitted and
/// predicted values, and the errors of every set the reference results know.
void expect_agreement(const OpenData& data, Index property, const ReferenceResults& want, Scaling scaling,
                      Index factors_with_coefficients) {
  const std::string& name = data.properties[static_cast<std::size_t>(property)];
  SCOPED_TRACE(data.folder + " " + name);
  const Calibration calibration = fit(data, property, scaling);
  ASSERT_EQ(calibration.factors(), kFactors);
  const Vector trained = data.reference_at(property, data.training);
  const PathProjection fitted = project_path(calibration, data.spectra_at(data.training));
  const PathProjection predicted = project_path(calibration, data.spectra_at(data.test));
  const ReferenceResults split = data.results("split");

  for (Index k = 1; k <= kFactors; ++k) {
    const std::string count = std::to_string(k);
    SCOPED_TRACE(count + " factors");
    if (k <= factors_with_coefficients) {
      EXPECT_TRUE(expect_close_in_norm(calibration.coefficients(k), want.numbers({name, count, "coef"}),
                                       kCoefficients));
      EXPECT_TRUE(expect_close(calibration.intercept(k), want.number({name, count, "intercept"}), kValues));
    }
    EXPECT_TRUE(expect_close(fitted.values.col(k - 1), want.numbers({name, count, "fitted"}), kValues));
    EXPECT_TRUE(expect_close(predicted.values.col(k - 1), want.numbers({name, count, "predicted"}), kValues));

    const Vector errors = fitted.values.col(k - 1) - trained;
    const auto df = static_cast<double>(errors.size() - k - 1);
    EXPECT_TRUE(expect_close(root_mean_square(errors), want.number({name, count, "rmsec"}), kErrors));
    EXPECT_TRUE(
        expect_close(std::sqrt(errors.squaredNorm() / df), want.number({name, count, "sec"}), kErrors));
    for (const std::string& set : want.keys_below({name, count})) {
      const bool is_test = set == "test";
      if (!is_test && set.find("last_43") != 0 && set.find("test_without") != 0 && set.find("outliers") != 0)
        continue;
      SCOPED_TRACE(set);
      const std::vector<Index> rows = is_test ? data.test : data.rows_of(split.texts({"extra_sets", set}));
      const Vector value = project_path(calibration, data.spectra_at(rows)).values.col(k - 1);
      const Vector error = value - data.reference_at(property, rows);
      EXPECT_TRUE(expect_close(root_mean_square(error), want.number({name, count, set, "rmsep"}), kErrors));
      EXPECT_TRUE(expect_close(error.mean(), want.number({name, count, set, "bias"}), kValues));
    }
  }
}

TEST(CalibrationOnOpenData, MeatsCentred) {
  const ReferenceResults want = meats().results("pls1");
  for (Index property = 0; property < 3; ++property)
    expect_agreement(meats(), property, want, Scaling::Centre, kFactors);
}

TEST(CalibrationOnOpenData, MeatsAutoscaled) {
  const ReferenceResults want = meats().results("pls1_autoscaled");
  for (Index property = 0; property < 3; ++property)
    expect_agreement(meats(), property, want, Scaling::UnitVariance, kFactors);
}

// Four components: beyond four factors only noise is left, and its coefficients are amplified rounding.
constexpr Index kFactorsOfMixtures = 4;

TEST(CalibrationOnOpenData, MixturesCentred) {
  const ReferenceResults want = beerlambert4().results("pls1");
  for (Index property = 0; property < 4; ++property)
    expect_agreement(beerlambert4(), property, want, Scaling::Centre, kFactorsOfMixtures);
}

TEST(CalibrationOnOpenData, MixturesAutoscaled) {
  const ReferenceResults want = beerlambert4().results("pls1_autoscaled");
  for (Index property = 0; property < 4; ++property)
    expect_agreement(beerlambert4(), property, want, Scaling::UnitVariance, kFactorsOfMixtures);
}

struct PretreatedCase {
  const char* method;
  Step step;
  double unit;  ///< of the axis, to the power of the derivative: derivatives of the reference are per channel
};
void PrintTo(const PretreatedCase& value, std::ostream* out) { *out << value.method; }

class CalibrationAfterPretreatment : public testing::TestWithParam<PretreatedCase> {};

TEST_P(CalibrationAfterPretreatment, FitsAndPredictsAsTheReference) {
  const OpenData& data = beerlambert4();
  const ReferenceResults want = data.results("preprocessing");
  for (Index property = 0; property < 4; ++property) {
    const std::string& name = data.properties[static_cast<std::size_t>(property)];
    const Calibration calibration = fit(data, property, Scaling::Centre, {GetParam().step});
    const PathProjection fitted = project_path(calibration, data.spectra_at(data.training));
    const PathProjection predicted = project_path(calibration, data.spectra_at(data.test));
    ASSERT_EQ(calibration.factors(), kFactors);
    for (Index k = 1; k <= kFactors; ++k) {
      SCOPED_TRACE(name + ", " + std::to_string(k) + " factors");
      const auto at = [&](ReferenceResults::Keys below) {
        below.insert(below.begin(),
                     {"methods", GetParam().method, "pls", name, "by_factors", std::to_string(k)});
        return below;
      };
      // The reference has coefficients of A for three factors, and for seven, where they are noise.
      if (property == 0 && k == 3) {
        EXPECT_TRUE(expect_close_in_norm(calibration.coefficients(k) / GetParam().unit,
                                         want.numbers(at({"coef"})), kCoefficients));
      }
      if (k <= kFactorsOfMixtures) {
        EXPECT_TRUE(expect_close(calibration.intercept(k), want.number(at({"intercept"})), kValues));
      }
      EXPECT_TRUE(expect_close(fitted.values.col(k - 1), want.numbers(at({"fitted"})), kValues));
      EXPECT_TRUE(expect_close(predicted.values.col(k - 1), want.numbers(at({"predicted"})), kValues));
      const Vector fit_errors = fitted.values.col(k - 1) - data.reference_at(property, data.training);
      const Vector test_errors = predicted.values.col(k - 1) - data.reference_at(property, data.test);
      EXPECT_TRUE(expect_close(root_mean_square(fit_errors), want.number(at({"rmsec"})), kErrors));
      EXPECT_TRUE(expect_close(root_mean_square(test_errors), want.number(at({"test", "rmsep"})), kErrors));
    }
  }
}

TEST_P(CalibrationAfterPretreatment, RmsepOfMeatsAsTheReference) {
  const OpenData& data = meats();
  const ReferenceResults want = data.results("summary");
  for (Index property = 0; property < 3; ++property) {
    const std::string& name = data.properties[static_cast<std::size_t>(property)];
    const Calibration calibration = fit(data, property, Scaling::Centre, {GetParam().step});
    const PathProjection predicted = project_path(calibration, data.spectra_at(data.test));
    Vector rmsep(kFactors);
    for (Index k = 0; k < kFactors; ++k)
      rmsep[k] = root_mean_square(predicted.values.col(k) - data.reference_at(property, data.test));
    EXPECT_TRUE(
        expect_close(rmsep, want.numbers({name, "preprocessing", GetParam().method, "rmsep"}), kErrors))
        << name;
  }
}

INSTANTIATE_TEST_SUITE_P(Methods, CalibrationAfterPretreatment,
                         testing::Values(PretreatedCase{"sg_w11_p2_d0", SavitzkyGolay{11, 2, 0}, 1.0},
                                         PretreatedCase{"sg_w11_p2_d1", SavitzkyGolay{11, 2, 1}, -4.0},
                                         PretreatedCase{"sg_w11_p2_d2", SavitzkyGolay{11, 2, 2}, 16.0},
                                         PretreatedCase{"snv", Snv{}, 1.0}),
                         [](const auto& chosen) { return std::string(chosen.param.method); });

}  // namespace
}  // namespace bandwright
