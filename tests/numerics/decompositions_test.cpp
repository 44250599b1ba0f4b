// SPDX-License-Identifier: Apache-2.0
#include "numerics/decompositions.hpp"

#include <gtest/gtest.h>

#include <Eigen/Eigenvalues>
#include <Eigen/QR>
#include <Eigen/SVD>
#include <limits>

#include "base/error.hpp"
#include "support/close.hpp"
#include "support/error_text.hpp"
#include "support/random_data.hpp"

namespace bandwright {
namespace {

struct Shape {
  Index rows;
  Index columns;
};
const std::vector<Shape> kTall{{1, 1}, {5, 1}, {2, 2}, {6, 6}, {9, 4}, {60, 31}};

constexpr Tolerance kBackwardStable{.relative = 1e-13,
                                    .absolute = 1e-13};  // entries of size 1, up to 60 x 31
const std::string kDependent = "the columns of a least-squares problem are linearly dependent";

TEST(Decompositions, SingularValuesAgreeWithEigen) {
  for (const auto& [n, p] : kTall) {
    const Matrix X = random_matrix(1, n, p);
    const Vector want = Eigen::JacobiSVD<Eigen::MatrixXd>(X).singularValues();
    EXPECT_TRUE(expect_close(singular_values(X), want, kBackwardStable)) << n << " x " << p;
    EXPECT_TRUE(expect_close(singular_values(X.transpose()), want, kBackwardStable)) << p << " x " << n;
  }
}

TEST(Decompositions, SingularValuesOfADiagonal) {
  Matrix X = Matrix::Zero(4, 3);
  X(0, 0) = 2.0;
  X(1, 1) = -5.0;
  EXPECT_TRUE(expect_close(singular_values(X), (Vector(3) << 5, 2, 0).finished(), {.absolute = 1e-15}));
  EXPECT_EQ(singular_values(Matrix(0, 4)).size(), 0);
}

TEST(Decompositions, EigenvaluesAgreeWithEigen) {
  for (const Index p : {1, 2, 5, 30}) {
    const Matrix X = random_matrix(2, p + 3, p);
    const Matrix S = X.transpose() * X;
    const Vector want = Eigen::SelfAdjointEigenSolver<Eigen::MatrixXd>(S).eigenvalues();
    EXPECT_TRUE(
        expect_close(symmetric_eigenvalues(S), want, {.relative = 1e-12, .absolute = 1e-13 * S.norm()}))
        << p;
  }
}

TEST(Decompositions, EigenvaluesRise) {
  Matrix S(2, 2);
  S << 2, 1, 1, 2;  // eigenvalues 1 and 3
  EXPECT_TRUE(expect_close(symmetric_eigenvalues(S), (Vector(2) << 1, 3).finished(), {.relative = 1e-15}));
}

TEST(Decompositions, LeastSquaresAgreesWithEigen) {
  for (const auto& [n, p] : kTall) {
    const Matrix A = random_matrix(3, n, p);
    const Matrix B = random_matrix(4, n, 3);
    const Eigen::MatrixXd want = Eigen::ColPivHouseholderQR<Eigen::MatrixXd>(A).solve(Eigen::MatrixXd(B));
    const Matrix got = least_squares(A, B);
    ASSERT_EQ(got.rows(), p);
    ASSERT_EQ(got.cols(), 3);
    for (Index j = 0; j < 3; ++j)
      EXPECT_TRUE(
          expect_close_in_norm(got.col(j), want.col(j), {.relative = 1e-15 * condition(A, p) + 1e-14}))
          << n << " x " << p;
  }
}

TEST(Decompositions, LeastSquaresOfAStraightLineByHand) {
  Matrix A(3, 2);
  A << 1, 0, 1, 1, 1, 2;
  const Matrix B = (Matrix(3, 1) << 1, 3, 4).finished();  // means 1 and 8/3, slope 3/2
  EXPECT_TRUE(expect_close(least_squares(A, B).col(0), (Vector(2) << 7.0 / 6.0, 1.5).finished(),
                           {.relative = 1e-14}));
}

TEST(Decompositions, DependentColumnsAreRefused) {
  const auto refused = [](const Matrix& A) {
    return error_text(ErrorKind::Numerical,
                      [&] { static_cast<void>(least_squares(A, Matrix::Ones(A.rows(), 1))); });
  };
  EXPECT_EQ(refused(Matrix::Zero(4, 2)), kDependent);
  EXPECT_EQ(refused(Matrix::Zero(1, 1)), kDependent);
  for (Index n = 3; n < 20; ++n) {  // rounding leaves a pivot of some 1e-16 that must not pass for rank
    Matrix A = random_matrix(static_cast<std::uint64_t>(n), n, 3);
    A.col(2) = 0.3 * A.col(0) - 0.7 * A.col(1);
    EXPECT_EQ(refused(A), kDependent) << n;
    A.col(2) = A.col(1);
    EXPECT_EQ(refused(A), kDependent) << n;
  }
  EXPECT_EQ(refused(random_matrix(1, 2, 3)), kDependent);  // fewer rows than columns
  EXPECT_EQ(refused(Matrix(0, 2)), kDependent);
}

TEST(Decompositions, ValuesThatAreNotFiniteAreRefused) {
  Matrix A = random_matrix(5, 4, 2);
  A(1, 1) = std::numeric_limits<double>::quiet_NaN();
  EXPECT_EQ(error_text(ErrorKind::Numerical, [&] { static_cast<void>(singular_values(A)); }),
            "the singular value decomposition did not converge");
  EXPECT_EQ(error_text(ErrorKind::Numerical, [&] { static_cast<void>(symmetric_eigenvalues(A.topRows(2))); }),
            "the eigenvalue decomposition did not converge");
  EXPECT_EQ(
      error_text(ErrorKind::Numerical, [&] { static_cast<void>(least_squares(A, Matrix::Ones(4, 1))); }),
      kDependent);
}

}  // namespace
}  // namespace bandwright
