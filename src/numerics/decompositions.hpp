// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <string>

#include "base/matrix.hpp"

/// Decompositions by Armadillo over OpenBLAS. Singular or failed systems are errors, never silently
/// approximated. Eigen's own decompositions serve as independent oracle in the tests.

namespace bandwright {

/// Singular values of X (n x p), falling, min(n, p) of them. Throws Error(Numerical) on failure.
[[nodiscard]] Vector singular_values(const MatrixView& X);

/// Eigenvalues of the symmetric matrix S, rising. Throws Error(Numerical) on failure.
[[nodiscard]] Vector symmetric_eigenvalues(const MatrixView& S);

/// The matrix C (p x m) that minimises ||A C - B||, by QR (by LU when A is square). A: n x p with n >= p and
/// full rank, B: n x m. Throws Error(Numerical) if the columns of A are linearly dependent to rounding.
[[nodiscard]] Matrix least_squares(const MatrixView& A, const MatrixView& B);

/// Version of the library behind these functions.
[[nodiscard]] std::string armadillo_version();

}  // namespace bandwright
