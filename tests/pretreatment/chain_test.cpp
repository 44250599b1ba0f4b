// SPDX-License-Identifier: Apache-2.0
#include "pretreatment/chain.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <limits>

#include "base/error.hpp"
#include "support/close.hpp"
#include "support/error_text.hpp"
#include "support/random_data.hpp"
#include "support/test_data.hpp"

namespace bandwright {
namespace {

constexpr Tolerance kRounding{.relative = 1e-13, .absolute = 1e-15};

Axis axis_of(Index points, double first = 1000.0, double step = -2.0) {
  Vector positions(points);
  for (Index i = 0; i < points; ++i) positions[i] = first + step * static_cast<double>(i);
  return {positions, AxisUnit::Wavenumber};
}

Window window(double from, double to, std::vector<Stretch> except = {}, std::string name = "w") {
  return {.name = std::move(name), .from = from, .to = to, .except = std::move(except)};
}

Matrix apply(std::vector<Step> steps, std::vector<Window> windows, const Axis& axis, const Matrix& X) {
  return PretreatmentChain(std::move(steps), std::move(windows), axis).apply(X);
}

Matrix apply_to_all(std::vector<Step> steps, const Axis& axis, const Matrix& X) {
  return apply(std::move(steps), {whole_axis(axis)}, axis, X);
}

struct ReferenceCase {
  const char* method;
  Step step;
  double unit;  ///< axis step to the power of the derivative; the reference is per channel
};
void PrintTo(const ReferenceCase& value, std::ostream* out) { *out << value.method; }

class ChainOnOpenData : public testing::TestWithParam<ReferenceCase> {};

// Preprocessed spectra as other software gives them: rows, column means and norms.
TEST_P(ChainOnOpenData, AsTheReference) {
  const OpenData& data = beerlambert4();
  const ReferenceResults want = data.results("preprocessing");
  const std::string method = GetParam().method;
  const auto pretreated = [&](const std::vector<Index>& rows) {
    return Matrix(apply_to_all({GetParam().step}, data.axis, data.spectra_at(rows)) * GetParam().unit);
  };
  constexpr Tolerance kReference{.relative = 1e-10, .absolute = 1e-14};  // derivatives near zero crossings
  const Matrix rows = pretreated(data.rows_of(want.texts({"sample_rows"})));
  const Matrix want_rows = want.rows({"methods", method, "spectra_of_sample_rows"});
  for (Index i = 0; i < rows.rows(); ++i)
    EXPECT_TRUE(expect_close(rows.row(i).transpose(), want_rows.row(i).transpose(), kReference))
        << "row " << i;
  const Matrix training = pretreated(data.training);
  EXPECT_TRUE(expect_close(training.colwise().mean().transpose(),
                           want.numbers({"methods", method, "column_means_training"}), kReference));
  EXPECT_TRUE(
      expect_close(training.norm(), want.number({"methods", method, "frobenius_norm_training"}), kReference));
  EXPECT_TRUE(expect_close(pretreated(data.test).norm(),
                           want.number({"methods", method, "frobenius_norm_test"}), kReference));
}

INSTANTIATE_TEST_SUITE_P(Methods, ChainOnOpenData,
                         testing::Values(ReferenceCase{"sg_w11_p2_d0", SavitzkyGolay{11, 2, 0}, 1.0},
                                         ReferenceCase{"sg_w11_p2_d1", SavitzkyGolay{11, 2, 1}, -4.0},
                                         ReferenceCase{"sg_w11_p2_d2", SavitzkyGolay{11, 2, 2}, 16.0},
                                         ReferenceCase{"snv", Snv{}, 1.0}),
                         [](const auto& chosen) { return std::string(chosen.param.method); });

// SNV with n - 1: (1 2 3 4 5) has mean 3 and standard deviation sqrt(2.5).
TEST(Chain, SnvByHand) {
  const Matrix X = (Matrix(1, 5) << 1, 2, 3, 4, 5).finished();
  const Matrix want =
      (Matrix(1, 5) << -1.26491106406735, -0.632455532033676, 0, 0.632455532033676, 1.26491106406735)
          .finished();
  EXPECT_TRUE(expect_close(apply_to_all({Snv{}}, axis_of(5), X).row(0).transpose(), want.row(0).transpose(),
                           {.relative = 1e-14, .absolute = 1e-16}));
}

TEST(Chain, NoStepsCutTheWindowsOut) {
  const Axis axis = axis_of(10);  // 1000, 998, ..., 982
  const Matrix X = random_matrix(1, 3, 10);
  const PretreatmentChain chain({}, {window(996, 990), window(984, 985, {}, "v")}, axis);
  ASSERT_EQ(chain.points(), 5);
  EXPECT_TRUE(chain.positions() == (Vector(5) << 996, 994, 992, 990, 984).finished());
  const Matrix got = chain.apply(X);
  EXPECT_TRUE(got.leftCols(4) == X.middleCols(2, 4));
  EXPECT_TRUE(got.col(4) == X.col(8));
}

TEST(Chain, DerivativeIsPerAxisUnitSignIncluded) {
  for (const double step : {-2.0, 0.5}) {
    const Axis axis = axis_of(30, 1000.0, step);
    Matrix X(1, 30);
    for (Index j = 0; j < 30; ++j) X(0, j) = 3.0 + 0.25 * (axis[j] - 1000.0) * (axis[j] - 1000.0);
    const Matrix first = apply_to_all({SavitzkyGolay{7, 2, 1}}, axis, X);
    const Matrix second = apply_to_all({SavitzkyGolay{7, 2, 2}}, axis, X);
    for (Index j = 0; j < 30; ++j) {
      EXPECT_TRUE(expect_close(first(0, j), 0.5 * (axis[j] - 1000.0), {.absolute = 1e-10}));
      EXPECT_TRUE(expect_close(second(0, j), 0.5, {.absolute = 1e-10}));
    }
  }
}

// A window takes its neighbours into account, so that it equals the same part of the whole spectrum,
// wherever the neighbours exist.
TEST(Chain, WindowIsACutOutOfTheWholeResult) {
  const Axis axis = axis_of(60);
  const Matrix X = random_matrix(2, 4, 60);
  const std::vector<std::vector<Step>> lists{
      {SavitzkyGolay{11, 2, 1}},
      {SavitzkyGolay{7, 2, 0}, SavitzkyGolay{5, 2, 1}},
      {SavitzkyGolay{5, 3, 2}, SavitzkyGolay{9, 2, 0}, SavitzkyGolay{3, 1, 1}}};
  for (const std::vector<Step>& steps : lists) {
    const Matrix whole = apply_to_all(steps, axis, X);
    // In the middle, at either end, a single point.
    for (const auto& [first, count] :
         std::vector<std::pair<Index, Index>>{{20, 15}, {0, 12}, {45, 15}, {30, 1}, {2, 56}}) {
      const Matrix part = apply(steps, {window(axis[first], axis[first + count - 1])}, axis, X);
      ASSERT_EQ(part.cols(), count);
      for (Index i = 0; i < 4; ++i)
        EXPECT_TRUE(
            expect_close(part.row(i).transpose(), whole.row(i).segment(first, count).transpose(), kRounding))
            << first << " " << count;
    }
  }
}

TEST(Chain, SnvIsTakenOverTheWindowAloneAndAppliedToItsMargins) {
  const Axis axis = axis_of(40);
  const Matrix X = random_matrix(3, 1, 40);
  const Window inner = window(axis[10], axis[25]);
  // SNV first: mean and deviation of the 16 points, then the derivative of the whole spectrum so treated.
  const Matrix core = X.middleCols(10, 16);
  const double deviation = std::sqrt((core.array() - core.mean()).square().sum() / 15.0);
  const Matrix treated = (X.array() - core.mean()) / deviation;
  const Matrix want = apply_to_all({SavitzkyGolay{9, 2, 1}}, axis, treated).middleCols(10, 16);
  const Matrix got = apply({Snv{}, SavitzkyGolay{9, 2, 1}}, {inner}, axis, X);
  EXPECT_TRUE(expect_close(got.row(0).transpose(), want.row(0).transpose(), kRounding));
}

TEST(Chain, SnvBetweenFilters) {
  const Axis axis = axis_of(50);
  const Matrix X = random_matrix(4, 1, 50);
  const Matrix smoothed = apply_to_all({SavitzkyGolay{5, 2, 0}}, axis, X);
  const Matrix core = smoothed.middleCols(15, 20);
  const double deviation = std::sqrt((core.array() - core.mean()).square().sum() / 19.0);
  const Matrix treated = (smoothed.array() - core.mean()) / deviation;
  const Matrix want = apply_to_all({SavitzkyGolay{7, 2, 1}}, axis, treated).middleCols(15, 20);
  const Matrix got =
      apply({SavitzkyGolay{5, 2, 0}, Snv{}, SavitzkyGolay{7, 2, 1}}, {window(axis[15], axis[34])}, axis, X);
  EXPECT_TRUE(expect_close(got.row(0).transpose(), want.row(0).transpose(), kRounding));
}

TEST(Chain, WindowsAreTreatedOneByOneInTheirOrder) {
  const Axis axis = axis_of(50);
  const Matrix X = random_matrix(5, 3, 50);
  const Window low = window(axis[30], axis[44], {}, "low");
  const Window high = window(axis[3], axis[12], {}, "high");
  const std::vector<Step> steps{SavitzkyGolay{5, 2, 1}, Snv{}};
  const Matrix both = apply(steps, {low, high}, axis, X);
  Matrix want(3, 25);
  want << apply(steps, {low}, axis, X), apply(steps, {high}, axis, X);
  EXPECT_TRUE(both == want);
}

TEST(Chain, PointsUnderExceptAreNeverUsed) {
  const Axis axis = axis_of(60);
  Matrix X = random_matrix(6, 2, 60);
  const Window cut = window(axis[10], axis[49], {{axis[28], axis[31]}});
  for (const std::vector<Step>& steps : std::vector<std::vector<Step>>{
           {SavitzkyGolay{9, 2, 1}}, {Snv{}}, {Snv{}, SavitzkyGolay{5, 2, 0}, SavitzkyGolay{5, 2, 2}}}) {
    const Matrix before = apply(steps, {cut}, axis, X);
    ASSERT_EQ(before.cols(), 36);
    Matrix changed = X;
    changed.middleCols(28, 4).setConstant(1e6);
    EXPECT_TRUE(apply(steps, {cut}, axis, changed) == before);
    changed.middleCols(28, 4).setConstant(std::numeric_limits<double>::quiet_NaN());
    EXPECT_TRUE(apply(steps, {cut}, axis, changed) == before);
  }
}

// Beside a gap, the stretch is treated as if the spectrum ended there.
TEST(Chain, StretchBesideAGapEndsThere) {
  const Axis axis = axis_of(60);
  const Matrix X = random_matrix(7, 1, 60);
  const Matrix got =
      apply({SavitzkyGolay{9, 2, 1}}, {window(axis[10], axis[49], {{axis[28], axis[31]}})}, axis, X);
  const Axis left_axis(axis.positions().head(28), axis.unit());
  const Matrix left = apply_to_all({SavitzkyGolay{9, 2, 1}}, left_axis, X.leftCols(28));
  EXPECT_TRUE(
      expect_close(got.row(0).head(18).transpose(), left.row(0).segment(10, 18).transpose(), kRounding));
}

TEST(Chain, LargestInsideLooksAtTheWindowsOnly) {
  const Axis axis = axis_of(10);
  const PretreatmentChain chain({SavitzkyGolay{3, 1, 0}}, {window(996, 986, {{992, 992}})}, axis);
  std::vector<double> spectrum{9, 8, 1, 2, 7, 3, 1, 1, 6, 9};
  EXPECT_EQ(chain.largest_inside(spectrum), 3.0);
}

TEST(Chain, SpectrumAloneHasTheSameBitsAsAmongOthers) {
  const Axis axis = axis_of(60);
  const Matrix X = random_matrix(8, 30, 60);
  const PretreatmentChain chain({Snv{}, SavitzkyGolay{11, 2, 1}}, {window(axis[5], axis[50])}, axis);
  const Matrix all = chain.apply(X);
  for (Index i = 0; i < 30; ++i) EXPECT_TRUE(chain.apply(X.row(i)).row(0) == all.row(i));
  EXPECT_EQ(chain.apply(X.topRows(0)).rows(), 0);
}

std::string refused(std::vector<Step> steps, const Window& asked, const Axis& axis) {
  return error_text(ErrorKind::Usage, [&] { PretreatmentChain(std::move(steps), {asked}, axis); });
}

TEST(Chain, TooFewPointsAreRefused) {
  const Axis axis = axis_of(10);
  EXPECT_EQ(refused({SavitzkyGolay{11, 2, 0}}, whole_axis(axis), axis),
            "window \"all\": the stretch from 1000 to 982 has 10 points; savitzky-golay needs 11");
  // Three points between the end of the spectrum and a gap.
  EXPECT_EQ(refused({SavitzkyGolay{5, 2, 0}}, window(1000, 982, {{994, 994}}), axis),
            "window \"w\": the stretch from 1000 to 996 has 3 points; savitzky-golay needs 5");
  EXPECT_EQ(refused({Snv{}}, window(994, 994), axis), "window \"w\": snv needs at least two points");
}

TEST(Chain, UnevenPointsUnderAFilterAreRefused) {
  Vector positions = axis_of(20).positions();
  positions[12] += 0.5;
  const Axis axis(positions, AxisUnit::Wavenumber);
  EXPECT_EQ(refused({SavitzkyGolay{5, 2, 0}}, whole_axis(axis), axis),
            "window \"all\": the points from 1000 to 962 are not evenly spaced; savitzky-golay needs that");
  EXPECT_NO_THROW(
      PretreatmentChain({SavitzkyGolay{5, 2, 0}}, {window(1000, 986)}, axis));  // margins to 982 are even
  EXPECT_NO_THROW(PretreatmentChain({Snv{}}, {whole_axis(axis)}, axis));
}

TEST(Chain, WindowsOffTheAxisAreRefused) {
  const Axis axis = axis_of(10);
  EXPECT_EQ(refused({}, window(900, 990), axis),
            "window \"w\": the window 900 to 990 reaches beyond the spectra, which cover 982 to 1000");
  EXPECT_EQ(refused({}, window(990.5, 991.5), axis),
            "window \"w\": no point of the spectra lies between 990.5 and 991.5");
}

TEST(Chain, ConstantSpectrumHasNoSnv) {
  const Axis axis = axis_of(10);
  Matrix X = random_matrix(9, 3, 10);
  X.row(1).setConstant(0.1);
  EXPECT_EQ(error_text(ErrorKind::Numerical, [&] { static_cast<void>(apply_to_all({Snv{}}, axis, X)); }),
            "spectrum 2: snv cannot be computed: the spectrum is constant in window \"all\"");
}

}  // namespace
}  // namespace bandwright
