// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <string>
#include <vector>

#include "base/matrix.hpp"
#include "spectra/axis.hpp"
#include "spectra/window.hpp"

namespace bandwright {

/// A contiguous run of points of a window (its core) with the neighbours outside the window that a
/// moving window at its ends may use (its margins). Points left out by `except` are never used.
struct Segment {
  Index first = 0;  ///< position on the axis of the first point of the left margin
  Index left_margin = 0;
  Index core = 0;
  Index right_margin = 0;

  [[nodiscard]] Index extent() const { return left_margin + core + right_margin; }
};

/// The segments of one window, in axis order.
struct WindowLayout {
  std::string name;
  std::vector<Segment> segments;

  [[nodiscard]] Index core_points() const;
};

/// Lays the windows out on the axis, each segment with margins of up to `margin` points where the
/// spectrum has them. Throws as `points_in` does.
[[nodiscard]] std::vector<WindowLayout> lay_out(const std::vector<Window>& windows, const Axis& axis,
                                                Index margin);

}  // namespace bandwright
