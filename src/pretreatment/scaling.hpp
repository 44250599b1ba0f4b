// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <array>
#include <string_view>
#include <utility>

#include "base/matrix.hpp"
#include "base/options.hpp"

namespace bandwright {

/// What is done to each variable (column) before the regression. Learned from the training spectra.
enum class Scaling {
  Centre,        ///< minus the mean
  UnitVariance,  ///< minus the mean, divided by the standard deviation (n - 1)
  None,
};

template <>
struct EnumTexts<Scaling> {
  static constexpr std::array entries{std::pair{Scaling::Centre, std::string_view{"centre"}},
                                      std::pair{Scaling::UnitVariance, std::string_view{"unit-variance"}},
                                      std::pair{Scaling::None, std::string_view{"none"}}};
};

/// Learned centre and spread of p variables; zeros and ones where nothing is done.
struct FittedScaling {
  Vector mean;   ///< p
  Vector scale;  ///< p, positive

  /// (X - mean) / scale, row by row.
  [[nodiscard]] Matrix apply(const MatrixView& X) const;
};

/// Learns the scaling from X (n x p) with row weights d (n, positive). The mean is weighted; the
/// variance is sum d (x - mean)^2 / (sum d - 1): with d = 1/r for each of r replicate spectra,
/// sum d counts samples. A variable that does not vary keeps scale 1.
/// Throws Error(Numerical) for UnitVariance when sum d <= 1.
[[nodiscard]] FittedScaling fit_scaling(Scaling scaling, const MatrixView& X, const VectorView& row_weights);

}  // namespace bandwright
