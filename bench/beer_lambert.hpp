// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <cstdint>

#include "base/matrix.hpp"

namespace bandwright {

/// Spectra of random mixtures and the amount of their first component.
struct Mixtures {
  Matrix spectra;  ///< n x p
  Vector amount;   ///< n
};

/// n spectra of p points after Beer and Lambert: amounts uniform over 0 .. 1, times pure spectra of a few
/// overlapping Gaussian bands each, plus a baseline and normal noise. Same seed, same bytes on one machine.
[[nodiscard]] Mixtures beer_lambert_mixtures(Index samples, Index points, Index components, double noise,
                                             std::uint64_t seed);

}  // namespace bandwright
