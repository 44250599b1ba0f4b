// SPDX-License-Identifier: Apache-2.0
#include "numerics/products.hpp"

#include <cblas.h>

#include <limits>

#include "base/error.hpp"
#include "numerics/linear_algebra.hpp"

namespace bandwright {
namespace {

blasint blas_size(Index size) {
  if (size > std::numeric_limits<blasint>::max())
    throw Error(ErrorKind::Numerical, "a matrix of this size is beyond the linear-algebra library");
  return static_cast<blasint>(size);
}

/// OpenBLAS insists on a leading dimension of at least 1 even for empty matrices.
blasint leading_dimension(const MatrixView& X) { return blas_size(std::max<Index>(X.outerStride(), 1)); }

Vector product(CBLAS_TRANSPOSE transpose, const MatrixView& X, const VectorView& v, Index result_size) {
  use_one_blas_thread();
  Vector result = Vector::Zero(result_size);
  if (X.size() == 0) return result;
  cblas_dgemv(CblasRowMajor, transpose, blas_size(X.rows()), blas_size(X.cols()), 1.0, X.data(),
              leading_dimension(X), v.data(), 1, 0.0, result.data(), 1);
  return result;
}

}  // namespace

Vector multiply(const MatrixView& X, const VectorView& v) { return product(CblasNoTrans, X, v, X.rows()); }

Vector multiply_transposed(const MatrixView& X, const VectorView& v) {
  return product(CblasTrans, X, v, X.cols());
}

Matrix smaller_gram(const MatrixView& X) {
  use_one_blas_thread();
  const bool by_rows = X.rows() <= X.cols();
  const Index size = by_rows ? X.rows() : X.cols();
  Matrix gram = Matrix::Zero(size, size);
  if (X.size() == 0) return gram;
  cblas_dsyrk(CblasRowMajor, CblasLower, by_rows ? CblasNoTrans : CblasTrans, blas_size(size),
              blas_size(by_rows ? X.cols() : X.rows()), 1.0, X.data(), leading_dimension(X), 0.0, gram.data(),
              blas_size(size));
  for (Index i = 0; i < size; ++i)
    for (Index j = i + 1; j < size; ++j) gram(i, j) = gram(j, i);
  return gram;
}

}  // namespace bandwright
