// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <string_view>

#include "base/matrix.hpp"
#include "base/options.hpp"

namespace bandwright {

/// Least-squares smoothing and differentiation over a moving window
/// (Savitzky and Golay, Anal. Chem. 36 (1964) 1627).
struct SavitzkyGolay {
  static constexpr std::string_view kName = "savitzky-golay";

  Index points = 11;     ///< width of the moving window, odd
  Index polynomial = 2;  ///< degree of the polynomial, below `points`
  Index derivative = 0;  ///< order of the derivative, at most `polynomial`

  template <class Visitor>
  static void describe(Visitor&& visit) {
    visit("points", &SavitzkyGolay::points, between(3, 201), "width of the moving window, odd");
    visit("polynomial", &SavitzkyGolay::polynomial, between(0, 9), "degree of the polynomial, below points");
    visit("derivative", &SavitzkyGolay::derivative, between(0, 4),
          "order of the derivative, at most polynomial; per unit of the axis, sign included");
  }

  [[nodiscard]] Index half_width() const { return points / 2; }
};

/// Throws Error(Usage) naming the field if the options do not fit together.
void check_step(const SavitzkyGolay& options);

/// The moving-window weights: row i (0 .. points - 1) gives the value, or the derivative of order
/// `derivative` for unit spacing, of the fitted polynomial at position i of the window. The middle
/// row is the convolution for interior points, the others serve the ends. points x points.
/// Computed by QR least squares on the window's Vandermonde matrix scaled to [-1, 1].
[[nodiscard]] Matrix savitzky_golay_weights(const SavitzkyGolay& options);

}  // namespace bandwright
