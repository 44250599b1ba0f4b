// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <span>
#include <vector>

#include "base/matrix.hpp"
#include "pretreatment/layout.hpp"
#include "pretreatment/step.hpp"
#include "spectra/axis.hpp"
#include "spectra/window.hpp"

namespace bandwright {

/// Windows cut out of a spectrum and pretreated step by step, window by window. A moving window at
/// the end of a spectrum window uses the points outside it where the spectrum has them; statistics
/// of a spectrum (SNV) are taken over the points of the window alone. No step of the list learns
/// from other spectra, so the chain is ready as soon as it is made.
class PretreatmentChain {
 public:
  PretreatmentChain() = default;
  /// Throws Error(Usage) naming the window if a step does not fit: too few points in a stretch, or
  /// uneven points under a moving window.
  PretreatmentChain(std::vector<Step> steps, std::vector<Window> windows, const Axis& axis);

  [[nodiscard]] const std::vector<Step>& steps() const { return steps_; }
  [[nodiscard]] const std::vector<Window>& windows() const { return windows_; }
  [[nodiscard]] const std::vector<WindowLayout>& layout() const { return layout_; }

  /// Axis positions of the p pretreated points, window after window.
  [[nodiscard]] const Vector& positions() const { return positions_; }
  [[nodiscard]] Index points() const { return positions_.size(); }

  /// X: n spectra on the axis -> n x points(). Each row depends on its spectrum alone, bit for bit.
  /// Throws Error(Numerical) if a step cannot be computed (SNV of a constant stretch); the error's
  /// field names the row, 1-based.
  [[nodiscard]] Matrix apply(const MatrixView& X) const;

  /// One spectrum -> points() values.
  void apply_to_one(std::span<const double> spectrum, std::span<double> pretreated) const;

  /// The largest value of the untreated spectrum inside the windows.
  [[nodiscard]] double largest_inside(std::span<const double> spectrum) const;

 private:
  struct PreparedSavitzkyGolay {
    Index half_width = 0;
    Index derivative = 0;
    Matrix weights;  // points x points
  };
  struct WindowBuffer;

  void check_fit(const Axis& axis) const;
  void smooth(const PreparedSavitzkyGolay& filter, WindowBuffer& buffer) const;
  static void standardise(WindowBuffer& buffer);

  std::vector<Step> steps_;
  std::vector<Window> windows_;
  std::vector<WindowLayout> layout_;
  std::vector<std::vector<double>> point_steps_;  // signed step of each segment; 0 where uneven
  std::vector<PreparedSavitzkyGolay> filters_;    // one a step; empty for the others
  Vector positions_;
};

}  // namespace bandwright
