// SPDX-License-Identifier: Apache-2.0
#pragma once

#include "base/matrix.hpp"

/// Matrix products over OpenBLAS, one thread each; callers run them side by side in a WorkerPool.

namespace bandwright {

/// X v: n values. X: n x p, v: p.
[[nodiscard]] Vector multiply(const MatrixView& X, const VectorView& v);
/// X' v: p values. X: n x p, v: n.
[[nodiscard]] Vector multiply_transposed(const MatrixView& X, const VectorView& v);
/// The smaller Gram matrix of X: X X' (n x n) when n <= p, else X' X (p x p). Symmetric.
[[nodiscard]] Matrix smaller_gram(const MatrixView& X);

}  // namespace bandwright
