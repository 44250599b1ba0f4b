// SPDX-License-Identifier: Apache-2.0
#include "numerics/decompositions.hpp"

#include <armadillo>

#include "base/error.hpp"
#include "numerics/linear_algebra.hpp"

namespace bandwright {
namespace {

[[noreturn]] void fail(const char* what) { throw Error(ErrorKind::Numerical, what); }

/// The transpose of X as Armadillo sees it: X is row-major, Armadillo column-major. A copy, as every
/// factorisation works on its own.
arma::mat transposed(const MatrixView& X) {
  const Matrix compact = X;
  return {compact.data(), static_cast<arma::uword>(X.cols()), static_cast<arma::uword>(X.rows())};
}

Vector to_vector(const arma::vec& v) {
  return Eigen::Map<const Vector>(v.memptr(), static_cast<Index>(v.n_elem));
}

}  // namespace

Vector singular_values(const MatrixView& X) {
  use_one_blas_thread();
  arma::vec values;
  if (!arma::svd(values, transposed(X))) fail("the singular value decomposition did not converge");
  return to_vector(values);
}

Vector symmetric_eigenvalues(const MatrixView& S) {
  use_one_blas_thread();
  arma::vec values;
  if (!arma::eig_sym(values, transposed(S))) fail("the eigenvalue decomposition did not converge");
  return to_vector(values);
}

Matrix least_squares(const MatrixView& A, const MatrixView& B) {
  use_one_blas_thread();
  if (A.rows() < A.cols()) fail("the columns of a least-squares problem are linearly dependent");
  arma::mat solution;
  if (!arma::solve(solution, transposed(A).t(), transposed(B).t(), arma::solve_opts::no_approx))
    fail("the columns of a least-squares problem are linearly dependent");
  return Eigen::Map<const Eigen::MatrixXd>(solution.memptr(), A.cols(), B.cols());
}

std::string armadillo_version() {
  return std::to_string(ARMA_VERSION_MAJOR) + "." + std::to_string(ARMA_VERSION_MINOR) + "." +
         std::to_string(ARMA_VERSION_PATCH);
}

}  // namespace bandwright
