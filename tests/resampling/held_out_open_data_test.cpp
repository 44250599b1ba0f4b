// SPDX-License-Identifier: Apache-2.0
// Cross-validation of two open data sets against reference results computed by other software (see SOURCE.md
// of each folder), themselves checked against 80-bit arithmetic: held-out predictions agree there within
// 1e-11.
#include <gtest/gtest.h>

#include "resampling/factor_rules.hpp"
#include "resampling/held_out.hpp"
#include "support/close.hpp"
#include "support/test_data.hpp"

namespace bandwright {
namespace {

constexpr Index kFactors = 12;
// Values are of size 1 to 100; one near zero has no more correct decimals than its neighbours.
constexpr Tolerance kValues{.relative = 1e-9, .absolute = 1e-9};
constexpr Tolerance kErrors{.relative = 1e-9};

TrainingData training_set(const OpenData& data, Index property) {
  TrainingData training{.axis = data.axis,
                        .spectra = data.spectra_at(data.training),
                        .reference = data.reference_at(property, data.training),
                        .sample_of_row = {},
                        .row_weights = Vector::Ones(static_cast<Index>(data.training.size()))};
  for (Index i = 0; i < training.spectra.rows(); ++i) training.sample_of_row.push_back(i);
  return training;
}

HeldOut cross_validated(const OpenData& data, const TrainingData& training, FoldScheme scheme,
                        Scaling scaling, std::vector<Step> steps, WorkerPool& pool) {
  CrossValidation options;
  options.scheme = scheme;
  options.folds = 10;
  const CalibrationRecipe recipe{.windows = {whole_axis(data.axis)},
                                 .steps = std::move(steps),
                                 .scaling = scaling,
                                 .max_factors = kFactors};
  return refit_folds(recipe, training, make_folds(options, training.samples(), {}), pool);
}

/// The numbers of factors that the reference chose from the same errors.
void expect_same_choice(const Matrix& squared_errors, const ReferenceResults& summary,
                        ReferenceResults::Keys at) {
  at.emplace_back("least_press");
  EXPECT_EQ(choose_factors(FactorRule::Minimum, squared_errors), static_cast<Index>(summary.number(at)));
  at.back() = "fewest_by_f_test_alpha_0.25";
  EXPECT_EQ(choose_factors(FactorRule::FTest, squared_errors), static_cast<Index>(summary.number(at)));
}

void expect_agreement(const OpenData& data, const std::string& file, Scaling scaling) {
  const ReferenceResults want = data.results(file);
  const ReferenceResults summary = data.results("summary");
  WorkerPool pool;
  for (Index property = 0; property < data.reference.cols(); ++property) {
    const std::string& name = data.properties[static_cast<std::size_t>(property)];
    const TrainingData training = training_set(data, property);
    for (const auto& [key, scheme] : {std::pair<std::string, FoldScheme>{"loo", FoldScheme::LeaveOneOut},
                                      {"block10", FoldScheme::Blocks},
                                      {"venetian10", FoldScheme::Interleaved}}) {
      SCOPED_TRACE(data.folder + ", " + name + ", " + key);
      const HeldOut got = cross_validated(data, training, scheme, scaling, {}, pool);
      ASSERT_EQ(got.factors(), kFactors);
      ASSERT_EQ(got.row, training.sample_of_row);
      const Matrix squares = squared_errors_by_sample(got, training);
      const Vector press = squares.colwise().sum();
      const Vector bias = (got.predicted.colwise() - training.reference).colwise().mean();
      EXPECT_TRUE(expect_close(press, want.numbers({name, key, "press"}), kErrors));
      EXPECT_TRUE(expect_close((press / static_cast<double>(training.samples())).cwiseSqrt(),
                               want.numbers({name, key, "rmsecv"}), kErrors));
      EXPECT_TRUE(expect_close(bias, want.numbers({name, key, "bias"}), kValues));
      for (Index k = 1; k <= kFactors; ++k) {
        const Vector predicted = want.numbers({name, key, "predicted", std::to_string(k)});
        EXPECT_TRUE(expect_close(got.predicted.col(k - 1), predicted, kValues)) << k << " factors";
      }
      if (scaling == Scaling::Centre && key != "block10") {
        expect_same_choice(squares, summary, {name, "factors_by_" + key});
      }
    }
  }
}

TEST(HeldOutOnOpenData, MeatsCentred) { expect_agreement(meats(), "cross_validation", Scaling::Centre); }
TEST(HeldOutOnOpenData, MixturesCentred) {
  expect_agreement(beerlambert4(), "cross_validation", Scaling::Centre);
}
TEST(HeldOutOnOpenData, MixturesAutoscaledInEachFold) {
  expect_agreement(beerlambert4(), "cross_validation_autoscaled", Scaling::UnitVariance);
}

struct PretreatedCase {
  const char* method;
  Step step;
};
void PrintTo(const PretreatedCase& value, std::ostream* out) { *out << value.method; }

class HeldOutAfterPretreatment : public testing::TestWithParam<PretreatedCase> {};

TEST_P(HeldOutAfterPretreatment, RmsecvAndChoiceAsTheReference) {
  WorkerPool pool;
  for (const OpenData* data : {&meats(), &beerlambert4()}) {
    const ReferenceResults summary = data->results("summary");
    for (Index property = 0; property < data->reference.cols(); ++property) {
      const std::string& name = data->properties[static_cast<std::size_t>(property)];
      SCOPED_TRACE(data->folder + ", " + name);
      const TrainingData training = training_set(*data, property);
      const Matrix squares = squared_errors_by_sample(
          cross_validated(*data, training, FoldScheme::LeaveOneOut, Scaling::Centre, {GetParam().step}, pool),
          training);
      EXPECT_TRUE(expect_close(Vector(squares.colwise().mean().cwiseSqrt()),
                               summary.numbers({name, "preprocessing", GetParam().method, "rmsecv_loo"}),
                               kErrors));
      expect_same_choice(squares, summary, {name, "preprocessing", GetParam().method, "factors_by_loo"});
    }
  }
}

TEST_P(HeldOutAfterPretreatment, InterleavedRmsecvAsTheReference) {
  const OpenData& data = beerlambert4();
  const ReferenceResults want = data.results("preprocessing");
  WorkerPool pool;
  for (Index property = 0; property < data.reference.cols(); ++property) {
    const std::string& name = data.properties[static_cast<std::size_t>(property)];
    const TrainingData training = training_set(data, property);
    const HeldOut got =
        cross_validated(data, training, FoldScheme::Interleaved, Scaling::Centre, {GetParam().step}, pool);
    const Vector rmsecv = squared_errors_by_sample(got, training).colwise().mean().cwiseSqrt();
    EXPECT_TRUE(expect_close(
        rmsecv, want.numbers({"methods", GetParam().method, "pls", name, "rmsecv_venetian10_refit_in_fold"}),
        kErrors))
        << name;
  }
}

INSTANTIATE_TEST_SUITE_P(Methods, HeldOutAfterPretreatment,
                         testing::Values(PretreatedCase{"sg_w11_p2_d0", SavitzkyGolay{11, 2, 0}},
                                         PretreatedCase{"sg_w11_p2_d1", SavitzkyGolay{11, 2, 1}},
                                         PretreatedCase{"sg_w11_p2_d2", SavitzkyGolay{11, 2, 2}},
                                         PretreatedCase{"snv", Snv{}}),
                         [](const auto& chosen) { return std::string(chosen.param.method); });

}  // namespace
}  // namespace bandwright
