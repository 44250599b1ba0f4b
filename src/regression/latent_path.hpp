// SPDX-License-Identifier: Apache-2.0
#pragma once

#include "base/matrix.hpp"

namespace bandwright {

/// Why a path has the length it has.
enum class PathEnd {
  Asked,              ///< as many factors as were asked for
  RankUsedUp,         ///< no independent direction of X is left
  ResponseExplained,  ///< nothing of y is left to rounding
};

/// A latent-variable regression for every number of factors 1 .. a at once. Factor k (row k - 1 of
/// each matrix) has the scores t_k = X r_k for centred and scaled spectra X with p variables.
struct LatentPath {
  Matrix rotations;      ///< a x p, r_k
  Matrix loadings;       ///< a x p, p_k: X is approximated by sum t_k p_k'
  Vector y_loadings;     ///< a, q_k: y is approximated by sum t_k q_k
  Vector score_squares;  ///< a, sum over the training rows of weight * t_k^2
  PathEnd end = PathEnd::Asked;

  [[nodiscard]] Index factors() const { return y_loadings.size(); }
  [[nodiscard]] Index variables() const { return rotations.cols(); }

  /// Regression vector with the first `factors` factors: sum q_k r_k, p values.
  [[nodiscard]] Vector coefficients(Index factors) const;

  /// The first `factors` factors alone.
  [[nodiscard]] LatentPath truncated(Index factors) const;
};

}  // namespace bandwright
