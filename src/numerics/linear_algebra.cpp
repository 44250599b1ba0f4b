// SPDX-License-Identifier: Apache-2.0
#include "numerics/linear_algebra.hpp"

#include <cblas.h>
#include <fmt/format.h>

#include <Eigen/Eigenvalues>
#include <Eigen/QR>
#include <Eigen/SVD>
#include <cmath>
#include <sstream>

#include "base/error.hpp"
#include "base/matrix.hpp"
#include "numerics/decompositions.hpp"
#include "numerics/products.hpp"

namespace bandwright {
namespace {

constexpr double kRoundOff = 1e-11;  // products of 31 terms of size 1; four digits of room

[[noreturn]] void refuse(const std::string& what) {
  throw Error(ErrorKind::Internal, "self-test of the linear algebra: " + what,
              {.file = {},
               .line = 0,
               .field = {},
               .hint = "install the pthread build of OpenBLAS, unset LD_LIBRARY_PATH and LD_PRELOAD, or try "
                       "OPENBLAS_CORETYPE=Haswell"});
}

void require_close(const Eigen::MatrixXd& got, const Eigen::MatrixXd& want, const char* what) {
  const double error = got.size() == want.size() ? (got - want).cwiseAbs().maxCoeff() : INFINITY;
  if (!(error <= kRoundOff * std::max(1.0, want.cwiseAbs().maxCoeff())))
    refuse(fmt::format("{} is wrong by {:.2g}", what, error));
}

/// A fixed, well-conditioned matrix with entries of size 1 and no symmetry a fault could hide in.
Matrix test_matrix(Index rows, Index columns) {
  Matrix A(rows, columns);
  for (Index i = 0; i < rows; ++i)
    for (Index j = 0; j < columns; ++j)
      A(i, j) = std::sin(static_cast<double>(1 + 7 * i + 13 * j)) + (i == j ? 2.0 : 0.0);
  return A;
}

}  // namespace

void use_one_blas_thread() {
  static const bool done = [] {
    openblas_set_num_threads(1);
    return true;
  }();
  static_cast<void>(done);
}

LinearAlgebraInfo linear_algebra_info() {
  constexpr int kPthreadBuild = 1;                  // 0 serial, 2 OpenMP
  std::istringstream words(openblas_get_config());  // "OpenBLAS 0.3.21 NO_LAPACKE DYNAMIC_ARCH ..."
  std::string name;
  std::string version;
  words >> name >> version;
  return {.library = name + " " + version,
          .kernel = openblas_get_corename(),
          .many_callers = openblas_get_parallel() == kPthreadBuild};
}

void check_linear_algebra() {
  use_one_blas_thread();
  if (!linear_algebra_info().many_callers)
    refuse("the OpenBLAS build that was loaded is not safe when several threads call it");

  const Matrix A = test_matrix(23, 31);
  const Vector v = test_matrix(31, 1).col(0);
  const Vector u = test_matrix(23, 1).col(0);
  require_close(multiply(A, v), A.lazyProduct(v), "a matrix-vector product");
  require_close(multiply_transposed(A, u), A.transpose().lazyProduct(u), "a transposed product");
  require_close(smaller_gram(A), A.lazyProduct(A.transpose()), "a symmetric product");

  const Matrix S = test_matrix(12, 9);
  require_close(singular_values(S), Eigen::JacobiSVD<Eigen::MatrixXd>(S).singularValues(),
                "a singular value");
  const Matrix G = S.transpose().lazyProduct(S);
  require_close(symmetric_eigenvalues(G), Eigen::SelfAdjointEigenSolver<Eigen::MatrixXd>(G).eigenvalues(),
                "an eigenvalue");
  const Matrix b = test_matrix(12, 2);
  require_close(least_squares(S, b), Eigen::HouseholderQR<Eigen::MatrixXd>(S).solve(Eigen::MatrixXd(b)),
                "a least-squares solution");
}

}  // namespace bandwright
