// SPDX-License-Identifier: Apache-2.0
// What must hold for any data (textbook identities of least squares and PLS), on random shapes; and a second
// algorithm, NIPALS with deflation of X, written down here from its definition (Wold, Martens and Wold 1983).
#include <gtest/gtest.h>
// gtest first: the adapter needs it
#include <rapidcheck/gtest.h>

#include <Eigen/QR>

#include "regression/pls.hpp"
#include "support/close.hpp"
#include "support/random_data.hpp"

namespace bandwright {
namespace {

// Conditions stay below 100, so at most 100^2 units of rounding (2e-16) reach a coefficient, times some
// ten for sums over tens of terms: 2e-11. A decade of room.
constexpr double kWorstCondition = 100.0;
constexpr Tolerance kRounding{.relative = 2e-10};

struct Problem {
  Matrix X;
  Vector y;
  Index rank = 0;
};

/// Centred random data of a random shape, well conditioned within its rank.
Problem draw(Index rows_from, Index rows_to, Index columns_from, Index columns_to) {
  const auto n = *rc::gen::inRange<Index>(rows_from, rows_to);
  const auto p = *rc::gen::inRange<Index>(columns_from, columns_to);
  const auto seed = *rc::gen::inRange<std::uint64_t>(0, 1U << 30U);
  Problem problem{.X = centred(random_matrix(seed, n, p)),
                  .y = centred(random_vector(seed + 1, n)),
                  .rank = std::min(n - 1, p)};
  RC_PRE(condition(problem.X, problem.rank) < kWorstCondition);
  return problem;
}

Problem draw_any() { return draw(4, 24, 1, 30); }

LatentPath fit(const Problem& problem) {
  return fit_pls(problem.X, problem.y, Vector::Ones(problem.X.rows()), problem.rank);
}

/// Regression vectors for 1 .. factors, one a row, by NIPALS with deflation of X and y.
Matrix nipals(Matrix X, Vector y, Index factors) {
  const Index p = X.cols();
  Eigen::MatrixXd W(p, factors);
  Eigen::MatrixXd P(p, factors);
  Vector q(factors);
  Matrix b(factors, p);
  for (Index a = 0; a < factors; ++a) {
    const Vector w = (X.transpose() * y).normalized();
    const Vector t = X * w;
    const double tt = t.squaredNorm();
    W.col(a) = w;
    P.col(a) = X.transpose() * t / tt;
    q[a] = t.dot(y) / tt;
    X -= t * P.col(a).transpose();
    y -= q[a] * t;
    const Eigen::MatrixXd inner = P.leftCols(a + 1).transpose() * W.leftCols(a + 1);
    b.row(a) =
        (W.leftCols(a + 1) * Eigen::HouseholderQR<Eigen::MatrixXd>(inner).solve(q.head(a + 1))).transpose();
  }
  return b;
}

void require(const ::testing::AssertionResult& result) {
  if (!result) RC_FAIL(std::string(result.message()));
}

/// NIPALS without reorthogonalisation loses a digit a factor or so; random directions wear out its last
/// factors first, so both are compared while the response residual still stands out from rounding.
void expect_both_algorithms_agree(const Problem& problem) {
  const LatentPath path = fit(problem);
  const Matrix want = nipals(problem.X, problem.y, path.factors());
  for (Index k = 1; k <= path.factors(); ++k) {
    const Vector fitted = problem.X * path.coefficients(k);
    const Vector fitted_by_nipals = problem.X * want.row(k - 1).transpose();
    require(expect_close_in_norm(fitted, fitted_by_nipals, kRounding));
    require(expect_close_in_norm(path.coefficients(k), want.row(k - 1).transpose(), kRounding));
  }
}

RC_GTEST_PROP(PlsIdentities, EqualsNipalsWithFewerSamplesThanVariables, ()) {
  expect_both_algorithms_agree(draw(4, 10, 12, 30));
}
RC_GTEST_PROP(PlsIdentities, EqualsNipalsWithAsManySamplesAsVariables, ()) {
  const auto size = *rc::gen::inRange<Index>(3, 9);
  const auto seed = *rc::gen::inRange<std::uint64_t>(0, 1U << 30U);
  Problem problem{.X = centred(random_matrix(seed, size, size)),
                  .y = centred(random_vector(seed + 1, size)),
                  .rank = size - 1};
  RC_PRE(condition(problem.X, problem.rank) < kWorstCondition);
  expect_both_algorithms_agree(problem);
}
RC_GTEST_PROP(PlsIdentities, EqualsNipalsWithMoreSamplesThanVariables, ()) {
  expect_both_algorithms_agree(draw(12, 40, 2, 9));
}

RC_GTEST_PROP(PlsIdentities, AtFullRankItIsOrdinaryLeastSquares, ()) {
  const Problem problem = draw(10, 30, 1, 8);
  const LatentPath path = fit(problem);
  RC_ASSERT(path.factors() == problem.rank);
  const Vector want = Eigen::ColPivHouseholderQR<Eigen::MatrixXd>(problem.X).solve(problem.y);
  require(expect_close_in_norm(path.coefficients(problem.rank), want, kRounding));
}

RC_GTEST_PROP(PlsIdentities, LeveragesAddUpToTheNumberOfFactors, ()) {  // plus 1 with the 1/n of each mean
  const Problem problem = draw_any();
  const LatentPath path = fit(problem);
  double total = 0.0;
  for (Index k = 0; k < path.factors(); ++k) {
    const Vector t = problem.X * path.rotations.row(k).transpose();
    total += t.squaredNorm() / path.score_squares[k];
    require(expect_close(total, static_cast<double>(k + 1), kRounding));
  }
}

RC_GTEST_PROP(PlsIdentities, ScoresAreOrthogonalAndRebuildX, ()) {
  const Problem problem = draw_any();
  const LatentPath path = fit(problem);
  const Matrix T = problem.X * path.rotations.transpose();
  const Matrix products = T.transpose() * T;
  for (Index i = 0; i < products.rows(); ++i) {
    require(expect_close(products(i, i), path.score_squares[i], kRounding));
    for (Index j = 0; j < i; ++j)
      RC_ASSERT(std::abs(products(i, j)) <= kRounding.relative * std::sqrt(products(i, i) * products(j, j)));
  }
  const bool whole = path.factors() == problem.rank;
  if (whole) {
    RC_ASSERT((T * path.loadings - problem.X).norm() <= kRounding.relative * problem.X.norm());
  }
}

RC_GTEST_PROP(PlsIdentities, ErrorFallsAndCoefficientsGrowWithEachFactor, ()) {
  const Problem problem = draw_any();
  const LatentPath path = fit(problem);
  double sse = problem.y.squaredNorm();
  double norm = 0.0;
  for (Index k = 1; k <= path.factors(); ++k) {
    const Vector b = path.coefficients(k);
    const double new_sse = (problem.y - problem.X * b).squaredNorm();
    RC_ASSERT(new_sse <= sse + kRounding.relative * problem.y.squaredNorm());
    RC_ASSERT(b.norm() >= norm * (1.0 - kRounding.relative));  // de Jong, J. Chemometrics 9 (1995) 323
    sse = new_sse;
    norm = b.norm();
  }
}

RC_GTEST_PROP(PlsIdentities, RotatingXRotatesTheCoefficients, ()) {
  const Problem problem = draw(4, 20, 2, 12);
  const Matrix Q = random_rotation(99, problem.X.cols());
  Problem rotated = problem;
  rotated.X = problem.X * Q;
  const LatentPath path = fit(problem);
  const LatentPath other = fit(rotated);
  for (Index k = 1; k <= std::min(path.factors(), other.factors()); ++k)
    require(expect_close_in_norm(Vector(Q * other.coefficients(k)), path.coefficients(k), kRounding));
}

RC_GTEST_PROP(PlsIdentities, OrderOfVariablesAndSamplesDoesNotMatter, ()) {
  const Problem problem = draw_any();
  const auto seed = *rc::gen::inRange<std::uint64_t>(0, 1U << 30U);
  const std::vector<Index> columns = Random(seed).permutation(problem.X.cols());
  const std::vector<Index> rows = Random(seed + 1).permutation(problem.X.rows());
  Problem shuffled = problem;
  shuffled.X = problem.X(rows, columns);
  shuffled.y = problem.y(rows);
  const LatentPath path = fit(problem);
  const LatentPath other = fit(shuffled);
  for (Index k = 1; k <= std::min(path.factors(), other.factors()); ++k) {
    const Vector want = path.coefficients(k)(columns);
    require(expect_close_in_norm(other.coefficients(k), want, kRounding));
  }
}

}  // namespace
}  // namespace bandwright
