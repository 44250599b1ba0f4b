// SPDX-License-Identifier: Apache-2.0
#include "regression/latent_path.hpp"

#include "numerics/products.hpp"

namespace bandwright {

Vector LatentPath::coefficients(Index factors) const {
  return multiply_transposed(rotations.topRows(factors), y_loadings.head(factors));
}

LatentPath LatentPath::truncated(Index factors) const {
  return {.rotations = rotations.topRows(factors),
          .loadings = loadings.topRows(factors),
          .y_loadings = y_loadings.head(factors),
          .score_squares = score_squares.head(factors),
          .end = end};
}

}  // namespace bandwright
