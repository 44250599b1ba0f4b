// SPDX-License-Identifier: Apache-2.0
#pragma once

#include "base/matrix.hpp"
#include "regression/latent_path.hpp"

namespace bandwright {

/// Partial least squares for one component, the whole path over factor numbers.
///
/// X: n x p, rows are spectra, already centred and scaled; y: n, already centred; row_weights: n,
/// positive: row i counts row_weights[i] times (1/r for each of r replicates).
/// Ensures factors() <= min(max_factors, n, p), fewer when the rank of X runs out or y is explained
/// to rounding, which is no error (`end` says which).
/// Throws Error(Input) if the sizes differ, a value is not finite, or n, p or max_factors is 0.
/// Cost O(a n p) for a factors, three passes over X a factor. Deterministic.
/// Source: Golub-Kahan bidiagonalisation (Manne, Chemom. Intell. Lab. Syst. 2 (1987) 187) with full
/// reorthogonalisation of scores and weights (Bjorck and Indahl, J. Chemometrics 31 (2017) e2898); the
/// same model as NIPALS with deflation of X. X is never deflated; X'y is recomputed from the residual.
[[nodiscard]] LatentPath fit_pls(const MatrixView& X, const VectorView& y, const VectorView& row_weights,
                                 Index max_factors);

}  // namespace bandwright
