// SPDX-License-Identifier: Apache-2.0
#pragma once

#include "base/matrix.hpp"

/// Matrix products over OpenBLAS, one thread each; callers run them side by side in a WorkerPool.
/// Same bits for the same values on the same kernel, wherever matrices and vectors lie, as long as they
/// begin at multiples of 16 bytes, as allocations do (older kernels need that; newer ones do not).

namespace bandwright {

/// X v: n values. X: n x p, v: p.
[[nodiscard]] Vector multiply(const MatrixView& X, const VectorView& v);
/// X' v: p values. X: n x p, v: n.
[[nodiscard]] Vector multiply_transposed(const MatrixView& X, const VectorView& v);
/// The smaller Gram matrix of X: X X' (n x n) when n <= p, else X' X (p x p). Symmetric.
[[nodiscard]] Matrix smaller_gram(const MatrixView& X);

}  // namespace bandwright
