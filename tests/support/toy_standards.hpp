// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <string>
#include <vector>

#include "base/matrix.hpp"
#include "model/model.hpp"
#include "model/recipe.hpp"
#include "spectra/reference_table.hpp"
#include "spectra/spectra_set.hpp"

namespace bandwright {

/// Two-component Beer-Lambert mixtures with seeded noise, for tests of behaviour, not of numbers.
struct ToySet {
  SpectraSet spectra;
  ReferenceTable reference;
};

/// Samples PREFIX01, PREFIX02 ...; components "acid" and "water" between 0 and 2; 40 points from 1800
/// falling by 4 cm-1; noise 1e-3 absorbance. With several replicates the spectra are PREFIX01-r1 ...
[[nodiscard]] ToySet toy_set(const std::string& prefix, Index samples, Index replicates, std::uint64_t seed);

/// A recipe for them: acid with spec_max 1.2, two windows, PLS with at most 6 factors, chosen by f-test.
[[nodiscard]] Recipe toy_recipe();

/// The model of 30 toy standards by that recipe.
[[nodiscard]] Model toy_model(const Recipe& recipe);
[[nodiscard]] Model toy_model();

}  // namespace bandwright
