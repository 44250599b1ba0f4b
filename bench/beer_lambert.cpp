// SPDX-License-Identifier: Apache-2.0
#include "beer_lambert.hpp"

#include <cmath>
#include <numbers>

#include "base/random.hpp"

namespace bandwright {
namespace {

double uniform(Random& random) { return static_cast<double>(random.next() >> 11U) * 0x1p-53; }

/// Box and Muller, Ann. Math. Stat. 29 (1958) 610; one of the two values.
double normal(Random& random) {
  const double radius = std::sqrt(-2.0 * std::log(1.0 - uniform(random)));
  return radius * std::cos(2.0 * std::numbers::pi * uniform(random));
}

/// Pure spectra, one a row: five bands each, a few percent of the axis wide.
Matrix pure_spectra(Index components, Index points, Random& random) {
  Matrix pure = Matrix::Zero(components, points);
  for (Index c = 0; c < components; ++c) {
    for (int band = 0; band < 5; ++band) {
      const double centre = uniform(random);
      const double width = 0.01 + 0.04 * uniform(random);
      const double height = 0.2 + 0.8 * uniform(random);
      for (Index j = 0; j < points; ++j) {
        const double z = (static_cast<double>(j) / static_cast<double>(points) - centre) / width;
        pure(c, j) += height * std::exp(-0.5 * z * z);
      }
    }
  }
  return pure;
}

}  // namespace

Mixtures beer_lambert_mixtures(Index samples, Index points, Index components, double noise,
                               std::uint64_t seed) {
  Random random(seed);
  const Matrix pure = pure_spectra(components, points, random);
  Matrix amounts(samples, components);
  for (Index i = 0; i < samples; ++i)
    for (Index c = 0; c < components; ++c) amounts(i, c) = uniform(random);

  Mixtures mixtures{.spectra = amounts * pure, .amount = amounts.col(0)};
  for (Index i = 0; i < samples; ++i) {
    const double baseline = 0.05 * normal(random);
    for (Index j = 0; j < points; ++j) mixtures.spectra(i, j) += baseline + noise * normal(random);
  }
  return mixtures;
}

}  // namespace bandwright
